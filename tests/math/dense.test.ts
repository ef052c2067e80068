import { describe, expect, it } from 'vitest'
import { factorCholesky, rowGram, rowProducts, solveLowerRows } from '../../src/math/dense.js'
import { inverseFromCholesky } from './inverse.js'

/** A definite matrix of size n: Hilbert's, eased by a multiple of the unit matrix. */
const definite = (n: number): Float64Array =>
  Float64Array.from({ length: n * n }, (_, k) => {
    const i = Math.floor(k / n)
    const j = k % n
    return 1 / (i + j + 1) + (i === j ? 0.1 : 0)
  })

/** A B for square matrices, term by term. */
function product(a: Float64Array, b: Float64Array, n: number): Float64Array {
  const out = new Float64Array(n * n)
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) for (let k = 0; k < n; k++) out[i * n + j]! += a[i * n + k]! * b[k * n + j]!
  return out
}

// sizes on both sides of the tile width
describe.each([1, 2, 3, 4, 5, 7, 8, 13, 30])('dense kernels, size %i', (n) => {
  it('the factor times its transpose is the matrix', () => {
    const a = definite(n)
    const l = a.slice()
    expect(factorCholesky(l, n)).toBe(true)
    for (let i = 0; i < n; i++)
      for (let j = 0; j <= i; j++) {
        let sum = 0
        for (let k = 0; k <= j; k++) sum += l[i * n + k]! * l[j * n + k]!
        expect(sum).toBeCloseTo(a[i * n + j]!, 13)
      }
  })

  it('the inverse times the matrix is one', () => {
    const a = definite(n)
    const l = a.slice()
    factorCholesky(l, n)
    const one = product(a, inverseFromCholesky(l, n), n)
    one.forEach((x, k) => {
      expect(x).toBeCloseTo(k % (n + 1) === 0 ? 1 : 0, 11)
    })
  })

  it.each([1, 3, 4, 6])('%i right-hand sides solved are L times the solution', (rows) => {
    const l = definite(n)
    factorCholesky(l, n)
    const b = Float64Array.from({ length: rows * n }, (_, k) => Math.sin(k + 1))
    const y = b.slice()
    solveLowerRows(l, n, y, rows)
    for (let r = 0; r < rows; r++)
      for (let i = 0; i < n; i++) {
        let sum = 0
        for (let k = 0; k <= i; k++) sum += l[i * n + k]! * y[r * n + k]!
        expect(sum).toBeCloseTo(b[r * n + i]!, 12)
      }
  })

  it('products of rows are sums of products', () => {
    const a = Float64Array.from({ length: 5 * n }, (_, k) => Math.cos(k))
    const b = Float64Array.from({ length: 6 * n }, (_, k) => Math.sin(2 * k))
    const ab = rowProducts(a, 5, b, 6, n)
    const aa = rowGram(a, 5, n)
    for (let i = 0; i < 5; i++)
      for (let j = 0; j < 6; j++) {
        let sum = 0
        let own = 0
        for (let k = 0; k < n; k++) {
          sum += a[i * n + k]! * b[j * n + k]!
          if (j < 5) own += a[i * n + k]! * a[j * n + k]!
        }
        expect(ab[i * 6 + j]).toBeCloseTo(sum, 12)
        if (j < 5) expect(aa[i * 5 + j]).toBeCloseTo(own, 12)
      }
  })
})

describe('a matrix that is not definite', () => {
  it('is refused', () => {
    expect(factorCholesky(Float64Array.of(1, 2, 2, 1), 2)).toBe(false)
  })
  it('or its weak rows are named', () => {
    const weak: number[] = []
    expect(factorCholesky(Float64Array.of(1, 2, 0, 2, 1, 0, 0, 0, 1), 3, weak)).toBe(true)
    expect(weak).toEqual([1])
  })
})
