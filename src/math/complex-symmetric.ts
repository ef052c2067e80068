/**
 * Kernels for complex-symmetric systems (A = Aᵀ, not Hermitian), real and imaginary parts in separate arrays.
 * Neither factorisation pivots: for A = G + jB with G and B positive definite the growth factor is below 3
 * (N. J. Higham, Factorizing complex symmetric matrices with positive definite real and imaginary parts,
 * Math. Comp. 67, 1998; from memory).
 */

/** out = M x for a real row-major n × n matrix and a complex vector. */
export function realTimesComplex(
  matrix: Float64Array,
  n: number,
  xRe: Float64Array,
  xIm: Float64Array,
  outRe: Float64Array,
  outIm: Float64Array,
): void {
  // four rows at a time, so that each entry of x is fetched a quarter as often
  let i = 0
  for (; i + 3 < n; i += 4) {
    let re0 = 0
    let im0 = 0
    let re1 = 0
    let im1 = 0
    let re2 = 0
    let im2 = 0
    let re3 = 0
    let im3 = 0
    for (let j = 0, p = i * n; j < n; j++, p++) {
      const re = xRe[j]!
      const im = xIm[j]!
      const m0 = matrix[p]!
      const m1 = matrix[p + n]!
      const m2 = matrix[p + 2 * n]!
      const m3 = matrix[p + 3 * n]!
      re0 += m0 * re
      im0 += m0 * im
      re1 += m1 * re
      im1 += m1 * im
      re2 += m2 * re
      im2 += m2 * im
      re3 += m3 * re
      im3 += m3 * im
    }
    outRe[i] = re0
    outIm[i] = im0
    outRe[i + 1] = re1
    outIm[i + 1] = im1
    outRe[i + 2] = re2
    outIm[i + 2] = im2
    outRe[i + 3] = re3
    outIm[i + 3] = im3
  }
  // up to three rows are left
  for (; i < n; i++) {
    let re = 0
    let im = 0
    for (let j = 0, p = i * n; j < n; j++, p++) {
      re += matrix[p]! * xRe[j]!
      im += matrix[p]! * xIm[j]!
    }
    outRe[i] = re
    outIm[i] = im
  }
}

/** L (unit lower triangle, row-major) and the reciprocals of D on the diagonal, of A = L D Lᵀ. */
export interface DenseFactor {
  readonly n: number
  readonly re: Float64Array
  readonly im: Float64Array
}

/**
 * Factors the lower triangle of a row-major n × n matrix in place: no pivoting, n³/6 complex products.
 * Refuses (undefined) when a pivot vanishes.
 */
export function factorDense(re: Float64Array, im: Float64Array, n: number): DenseFactor | undefined {
  for (let i = 0; i < n; i++) {
    const row = i * n
    // row i of L D, from the rows above it
    for (let j = 1; j < i; j++) {
      const above = j * n
      let sRe = re[row + j]!
      let sIm = im[row + j]!
      for (let k = 0; k < j; k++) {
        const aRe = re[row + k]!
        const aIm = im[row + k]!
        const bRe = re[above + k]!
        const bIm = im[above + k]!
        sRe -= aRe * bRe - aIm * bIm
        sIm -= aRe * bIm + aIm * bRe
      }
      re[row + j] = sRe
      im[row + j] = sIm
    }
    // divide by D, and take what the row contributes to its own pivot
    let dRe = re[row + i]!
    let dIm = im[row + i]!
    for (let k = 0; k < i; k++) {
      const wRe = re[row + k]!
      const wIm = im[row + k]!
      const pRe = re[k * n + k]!
      const pIm = im[k * n + k]!
      const lRe = wRe * pRe - wIm * pIm
      const lIm = wRe * pIm + wIm * pRe
      dRe -= wRe * lRe - wIm * lIm
      dIm -= wRe * lIm + wIm * lRe
      re[row + k] = lRe
      im[row + k] = lIm
    }
    const size = dRe * dRe + dIm * dIm
    if (!(size > 0 && Number.isFinite(size))) return undefined
    re[row + i] = dRe / size
    im[row + i] = -dIm / size
  }
  return { n, re, im }
}

/** Solves A x = b in place. */
export function solveDense({ n, re, im }: DenseFactor, xRe: Float64Array, xIm: Float64Array): void {
  // forward: L y = b
  for (let i = 0; i < n; i++) {
    let sRe = xRe[i]!
    let sIm = xIm[i]!
    for (let k = 0, p = i * n; k < i; k++, p++) {
      sRe -= re[p]! * xRe[k]! - im[p]! * xIm[k]!
      sIm -= re[p]! * xIm[k]! + im[p]! * xRe[k]!
    }
    xRe[i] = sRe
    xIm[i] = sIm
  }
  // diagonal, then back: Lᵀ x = D⁻¹ y, row by row so that memory is read in order
  for (let i = 0; i < n; i++) multiplyAt(xRe, xIm, i, re[i * n + i]!, im[i * n + i]!)
  for (let i = n - 1; i > 0; i--) {
    const zRe = xRe[i]!
    const zIm = xIm[i]!
    for (let k = 0, p = i * n; k < i; k++, p++) {
      xRe[k] = xRe[k]! - (re[p]! * zRe - im[p]! * zIm)
      xIm[k] = xIm[k]! - (re[p]! * zIm + im[p]! * zRe)
    }
  }
}

/**
 * Several separate chains, one behind the other in the same arrays: `diagonal[k]`, `next[k]` between k and k + 1,
 * and where a chain is closed to a ring, `closure[c]` between its first and its last element.
 */
export interface Chains {
  /** first and last element of each chain */
  readonly ranges: readonly (readonly [number, number])[]
  readonly diagonalRe: Float64Array
  readonly diagonalIm: Float64Array
  readonly nextRe: Float64Array
  readonly nextIm: Float64Array
  readonly closureRe: Float64Array
  readonly closureIm: Float64Array
  /** multipliers of the row of the last element, made by the factorisation */
  readonly lastRe: Float64Array
  readonly lastIm: Float64Array
}

export function emptyChains(count: number, ranges: Chains['ranges']): Chains {
  const zeros = (n: number) => new Float64Array(n)
  return {
    ranges,
    diagonalRe: zeros(count),
    diagonalIm: zeros(count),
    nextRe: zeros(count),
    nextIm: zeros(count),
    closureRe: zeros(ranges.length),
    closureIm: zeros(ranges.length),
    lastRe: zeros(count),
    lastIm: zeros(count),
  }
}

/** LDLᵀ in place: the diagonal becomes 1/D, `next` the multipliers. The last row of each chain may fill in. */
export function factorChains(chains: Chains): void {
  const { diagonalRe: dRe, diagonalIm: dIm, nextRe: eRe, nextIm: eIm, lastRe: mRe, lastIm: mIm } = chains
  for (const [c, [first, last]] of chains.ranges.entries()) {
    // coupling of the last element with the one being eliminated
    let fRe = chains.closureRe[c]!
    let fIm = chains.closureIm[c]!
    for (let k = first; k < last; k++) {
      invertAt(dRe, dIm, k)
      const pRe = dRe[k]!
      const pIm = dIm[k]!
      const toLast = k === last - 1
      if (toLast) {
        fRe += eRe[k]!
        fIm += eIm[k]!
      }
      const wRe = fRe * pRe - fIm * pIm
      const wIm = fRe * pIm + fIm * pRe
      mRe[k] = wRe
      mIm[k] = wIm
      dRe[last] = dRe[last]! - (fRe * wRe - fIm * wIm)
      dIm[last] = dIm[last]! - (fRe * wIm + fIm * wRe)
      if (toLast) break
      const lRe = eRe[k]! * pRe - eIm[k]! * pIm
      const lIm = eRe[k]! * pIm + eIm[k]! * pRe
      dRe[k + 1] = dRe[k + 1]! - (eRe[k]! * lRe - eIm[k]! * lIm)
      dIm[k + 1] = dIm[k + 1]! - (eRe[k]! * lIm + eIm[k]! * lRe)
      eRe[k] = lRe
      eIm[k] = lIm
      const gRe = -(lRe * fRe - lIm * fIm)
      fIm = -(lRe * fIm + lIm * fRe)
      fRe = gRe
    }
    invertAt(dRe, dIm, last)
  }
}

/** Solves in place with the factors of factorChains. */
export function solveChains(chains: Chains, xRe: Float64Array, xIm: Float64Array): void {
  const { diagonalRe: dRe, diagonalIm: dIm, nextRe: eRe, nextIm: eIm, lastRe: mRe, lastIm: mIm } = chains
  for (const [first, last] of chains.ranges) {
    let zRe = xRe[last]!
    let zIm = xIm[last]!
    for (let k = first; k < last; k++) {
      const yRe = xRe[k]!
      const yIm = xIm[k]!
      zRe -= mRe[k]! * yRe - mIm[k]! * yIm
      zIm -= mRe[k]! * yIm + mIm[k]! * yRe
      if (k === last - 1) break
      xRe[k + 1] = xRe[k + 1]! - (eRe[k]! * yRe - eIm[k]! * yIm)
      xIm[k + 1] = xIm[k + 1]! - (eRe[k]! * yIm + eIm[k]! * yRe)
    }
    xRe[last] = zRe
    xIm[last] = zIm
    for (let k = first; k <= last; k++) multiplyAt(xRe, xIm, k, dRe[k]!, dIm[k]!)
    zRe = xRe[last]!
    zIm = xIm[last]!
    for (let k = last - 1; k >= first; k--) {
      let yRe = xRe[k]! - (mRe[k]! * zRe - mIm[k]! * zIm)
      let yIm = xIm[k]! - (mRe[k]! * zIm + mIm[k]! * zRe)
      if (k < last - 1) {
        const nRe = xRe[k + 1]!
        const nIm = xIm[k + 1]!
        yRe -= eRe[k]! * nRe - eIm[k]! * nIm
        yIm -= eRe[k]! * nIm + eIm[k]! * nRe
      }
      xRe[k] = yRe
      xIm[k] = yIm
    }
  }
}

function invertAt(re: Float64Array, im: Float64Array, k: number): void {
  const size = re[k]! * re[k]! + im[k]! * im[k]!
  re[k] = re[k]! / size
  im[k] = -im[k]! / size
}

function multiplyAt(xRe: Float64Array, xIm: Float64Array, k: number, re: number, im: number): void {
  const a = xRe[k]!
  xRe[k] = a * re - xIm[k]! * im
  xIm[k] = a * im + xIm[k]! * re
}
