/**
 * A second way to the field between two coated cylinders, sharing nothing with src/gaps: multipoles at both centres,
 * matched at the coatings by translating each series to the other centre (Graf's addition theorem for 2-D
 * harmonics). Exact as the number of multipoles grows; the cylinders carry opposite charge. Used as a judge only.
 */

export interface Coated {
  /** radius of the conductor and of the coating, m */
  readonly core: number
  readonly outer: number
  readonly permittivity: number
}

export interface CoatedPair {
  /** voltage across the air on the facing line, per volt between the cores */
  readonly share: number
  /** field in the air at distance s (m) from the first surface, per volt between the cores, 1/m */
  readonly field: (s: number) => number
}

/** Gaussian elimination with pivots, in place; returns the solution. */
function solved(rows: number[][], right: number[]): number[] {
  const n = right.length
  for (let k = 0; k < n; k++) {
    let best = k
    for (let i = k + 1; i < n; i++) if (Math.abs(rows[i]![k]!) > Math.abs(rows[best]![k]!)) best = i
    ;[rows[k], rows[best]] = [rows[best]!, rows[k]!]
    ;[right[k], right[best]] = [right[best]!, right[k]!]
    for (let i = k + 1; i < n; i++) {
      const f = rows[i]![k]! / rows[k]![k]!
      for (let j = k; j < n; j++) rows[i]![j]! -= f * rows[k]![j]!
      right[i]! -= f * right[k]!
    }
  }
  for (let k = n - 1; k >= 0; k--) {
    for (let j = k + 1; j < n; j++) right[k]! -= rows[k]![j]! * right[j]!
    right[k]! /= rows[k]![k]!
  }
  return right
}

/** how a coated core answers harmonic n: its multipole per unit of incoming field at the outer radius */
function answer({ core, outer, permittivity }: Coated, n: number): number {
  const r = (core / outer) ** (2 * n)
  const k = permittivity * (1 + r)
  return (1 - r - k) / (1 - r + k)
}

/**
 * Two coated cylinders with clear gap d (m). Unknown are A_n: potential outside
 * φ = Σ_i ±[−ln r_i + Σ A_i,n (b_i/r_i)^n cos nθ_i], + for the first, angles counted towards the other cylinder.
 */
export function coatedPair(first: Coated, second: Coated, d: number, orders: number): CoatedPair {
  const both = [first, second]
  const D = first.outer + second.outer + d
  const rows = Array.from({ length: 2 * orders }, () => new Array<number>(2 * orders).fill(0))
  const right = new Array<number>(2 * orders).fill(0)
  both.forEach((body, i) => {
    const other = both[1 - i]!
    for (let k = 1; k <= orders; k++) {
      const row = i * orders + k - 1
      const f = answer(body, k)
      const lift = k * Math.log(body.outer / D)
      rows[row]![row] = 1
      // incoming: the other's charge and multipoles, of opposite sign
      right[row] = (-f * Math.exp(lift)) / k
      let logBinomial = 0 // ln C(m + k − 1, k)
      for (let m = 1; m <= orders; m++) {
        if (m > 1) logBinomial += Math.log((m + k - 1) / (m - 1))
        rows[row]![(1 - i) * orders + m - 1] =
          f * Math.exp(lift + m * Math.log(other.outer / D) + logBinomial)
      }
    }
  })
  const A = solved(rows, right)
  // core potentials, for charge 2πε0 and −2πε0
  const core = both.map((body, i) => {
    const other = both[1 - i]!
    let v = Math.log(body.core / body.outer) / -body.permittivity - Math.log(body.outer) + Math.log(D)
    for (let m = 1; m <= orders; m++) v -= A[(1 - i) * orders + m - 1]! * (other.outer / D) ** m
    return i === 0 ? v : -v
  })
  const difference = core[0]! - core[1]!
  const potential = (s: number) => {
    const radii = [first.outer + s, second.outer + d - s]
    let v = 0
    both.forEach((body, i) => {
      let own = -Math.log(radii[i]!)
      for (let m = 1; m <= orders; m++) own += A[i * orders + m - 1]! * (body.outer / radii[i]!) ** m
      v += i === 0 ? own : -own
    })
    return v
  }
  const field = (s: number) => {
    const radii = [first.outer + s, second.outer + d - s]
    let e = 0
    both.forEach((body, i) => {
      let own = 1
      for (let m = 1; m <= orders; m++) own += m * A[i * orders + m - 1]! * (body.outer / radii[i]!) ** m
      e += own / radii[i]!
    })
    return e / difference
  }
  return { share: (potential(0) - potential(d)) / difference, field }
}
