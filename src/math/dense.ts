/**
 * Real dense kernels on row-major Float64Arrays. "Rows" in a name means that each row of a matrix is one vector:
 * many right-hand sides are kept as rows, so that every inner loop runs along memory.
 * The 4 × 4 tiles keep sixteen sums in registers; that is three to four times faster than plain dot products.
 */

/** out[i+r][j+c] (stride `width`) −= or = Σ_k a[i+r][k] b[j+c][k], k from `from` to `to`; a and b have row length n. */
function tile(
  a: Float64Array,
  i: number,
  b: Float64Array,
  j: number,
  n: number,
  from: number,
  to: number,
  sums: Float64Array,
): void {
  const a0 = i * n
  const a1 = a0 + n
  const a2 = a1 + n
  const a3 = a2 + n
  const b0 = j * n
  const b1 = b0 + n
  const b2 = b1 + n
  const b3 = b2 + n
  let s00 = 0
  let s01 = 0
  let s02 = 0
  let s03 = 0
  let s10 = 0
  let s11 = 0
  let s12 = 0
  let s13 = 0
  let s20 = 0
  let s21 = 0
  let s22 = 0
  let s23 = 0
  let s30 = 0
  let s31 = 0
  let s32 = 0
  let s33 = 0
  for (let k = from; k < to; k++) {
    const x0 = a[a0 + k]!
    const x1 = a[a1 + k]!
    const x2 = a[a2 + k]!
    const x3 = a[a3 + k]!
    const y0 = b[b0 + k]!
    const y1 = b[b1 + k]!
    const y2 = b[b2 + k]!
    const y3 = b[b3 + k]!
    s00 += x0 * y0
    s01 += x0 * y1
    s02 += x0 * y2
    s03 += x0 * y3
    s10 += x1 * y0
    s11 += x1 * y1
    s12 += x1 * y2
    s13 += x1 * y3
    s20 += x2 * y0
    s21 += x2 * y1
    s22 += x2 * y2
    s23 += x2 * y3
    s30 += x3 * y0
    s31 += x3 * y1
    s32 += x3 * y2
    s33 += x3 * y3
  }
  sums[0] = s00
  sums[1] = s01
  sums[2] = s02
  sums[3] = s03
  sums[4] = s10
  sums[5] = s11
  sums[6] = s12
  sums[7] = s13
  sums[8] = s20
  sums[9] = s21
  sums[10] = s22
  sums[11] = s23
  sums[12] = s30
  sums[13] = s31
  sums[14] = s32
  sums[15] = s33
}

const sums = new Float64Array(16)

/** Σ_k a[i][k] b[j][k], k from `from` to `to`. */
function dot(a: Float64Array, i: number, b: Float64Array, j: number, from: number, to: number): number {
  let s = 0
  for (let k = from; k < to; k++) s += a[i + k]! * b[j + k]!
  return s
}

/**
 * Cholesky factor A = L Lᵀ in place (lower triangle; what lies above the diagonal is left as scratch).
 * False when A is not positive definite; A is then spoilt. With `weak` it runs through all the same
 * (unless A holds no numbers): a row whose pivot falls under a hundredth of its diagonal gets its whole diagonal as
 * pivot and nothing in common with later rows, and is put on that list. Then it is no factor of A, but tells where A
 * is not definite, or hardly.
 */
export function factorCholesky(a: Float64Array, n: number, weak?: number[]): boolean {
  const diagonal = weak && Float64Array.from({ length: n }, (_, c) => Math.abs(a[c * n + c]!))
  for (let j = 0; j < n; j += 4) {
    const end = Math.min(j + 4, n)
    // bring the panel of four columns up to date with all columns left of it
    for (let i = j; i < n; i += 4) {
      if (i + 4 <= n && end === j + 4) {
        tile(a, i, a, j, n, 0, j, sums)
        for (let r = 0; r < 4; r++) for (let c = 0; c < 4; c++) a[(i + r) * n + j + c]! -= sums[4 * r + c]!
      } else {
        for (let r = i; r < Math.min(i + 4, n); r++)
          for (let c = j; c < end; c++) a[r * n + c]! -= dot(a, r * n, a, c * n, 0, j)
      }
    }
    // factor the panel
    for (let c = j; c < end; c++) {
      let pivot = a[c * n + c]! - dot(a, c * n, a, c * n, j, c)
      const alone = diagonal !== undefined && pivot < 0.01 * diagonal[c]!
      if (alone) {
        weak?.push(c)
        pivot = diagonal[c]!
      }
      if (!(pivot > 0)) return false
      const root = Math.sqrt(pivot)
      a[c * n + c] = root
      for (let i = c + 1; i < n; i++) {
        a[i * n + c] = alone ? 0 : (a[i * n + c]! - dot(a, i * n, a, c * n, j, c)) / root
      }
    }
  }
  return true
}

/** Each row x of `b` (rows × n) becomes L⁻¹ x. Row r is known to be zero before `firsts[r]` (default 0). */
export function solveLowerRows(
  l: Float64Array,
  n: number,
  b: Float64Array,
  rows: number,
  firsts?: Int32Array,
): void {
  for (let r = 0; r < rows; r += 4) {
    let first = firsts?.[r] ?? 0
    for (let q = r + 1; q < Math.min(r + 4, rows); q++) first = Math.min(first, firsts?.[q] ?? 0)
    first -= first % 4
    for (let i = first; i < n; i += 4) {
      const end = Math.min(i + 4, n)
      const tiled = r + 4 <= rows && end === i + 4
      if (tiled) tile(b, r, l, i, n, first, i, sums)
      for (let q = 0; q < 4 && r + q < rows; q++) {
        const row = (r + q) * n
        for (let k = i; k < end; k++) {
          const above = tiled ? sums[4 * q + k - i]! : dot(b, row, l, k * n, first, i)
          b[row + k] = (b[row + k]! - above - dot(b, row, l, k * n, i, k)) / l[k * n + k]!
        }
      }
    }
  }
}

/** All products of rows: result (rowsA × rowsB) = A Bᵀ, for A (rowsA × n) and B (rowsB × n). */
export function rowProducts(
  a: Float64Array,
  rowsA: number,
  b: Float64Array,
  rowsB: number,
  n: number,
): Float64Array {
  const out = new Float64Array(rowsA * rowsB)
  for (let i = 0; i < rowsA; i += 4) {
    for (let j = 0; j < rowsB; j += 4) fillTile(a, rowsA, i, b, rowsB, j, n, 0, out)
  }
  return out
}

/** A Aᵀ for A (rows × n), both triangles. Row r is known to be zero before `firsts[r]`, which must not decrease. */
export function rowGram(a: Float64Array, rows: number, n: number, firsts?: Int32Array): Float64Array {
  const out = new Float64Array(rows * rows)
  for (let i = 0; i < rows; i += 4) {
    for (let j = 0; j <= i; j += 4) fillTile(a, rows, i, a, rows, j, n, firsts?.[i] ?? 0, out)
  }
  for (let i = 0; i < rows; i++) for (let j = 0; j < i; j++) out[j * rows + i] = out[i * rows + j]!
  return out
}

/** One 4 × 4 tile of A Bᵀ, or what of it lies inside. */
function fillTile(
  a: Float64Array,
  rowsA: number,
  i: number,
  b: Float64Array,
  rowsB: number,
  j: number,
  n: number,
  from: number,
  out: Float64Array,
): void {
  if (i + 4 <= rowsA && j + 4 <= rowsB) {
    tile(a, i, b, j, n, from, n, sums)
    for (let r = 0; r < 4; r++) for (let c = 0; c < 4; c++) out[(i + r) * rowsB + j + c] = sums[4 * r + c]!
    return
  }
  for (let r = i; r < Math.min(i + 4, rowsA); r++)
    for (let c = j; c < Math.min(j + 4, rowsB); c++) out[r * rowsB + c] = dot(a, r * n, b, c * n, from, n)
}
