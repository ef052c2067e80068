import { rowGram, solveLowerRows } from '../../src/math/dense.js'

/** A⁻¹ (both triangles) from the Cholesky factor of A. */
export function inverseFromCholesky(l: Float64Array, n: number): Float64Array {
  // row c of `columns` is column c of L⁻¹, so that A⁻¹ = L⁻ᵀ L⁻¹ is all products of its rows
  const columns = new Float64Array(n * n)
  const firsts = Int32Array.from({ length: n }, (_, c) => c)
  for (let c = 0; c < n; c++) columns[c * n + c] = 1
  solveLowerRows(l, n, columns, n, firsts)
  return rowGram(columns, n, n, firsts)
}
