import { describe, expect, test } from 'vitest'
import {
  emptyChains,
  factorChains,
  factorDense,
  realTimesComplex,
  solveChains,
  solveDense,
} from '../../src/math/complex-symmetric.js'
import { numbers } from '../network/signs.js'

/** Row-major G + jB with both parts symmetric and diagonally dominant. */
function matrixOf(n: number, random: () => number) {
  const re = new Float64Array(n * n)
  const im = new Float64Array(n * n)
  for (let i = 0; i < n; i++) {
    re[i * n + i] = im[i * n + i] = n
    for (let j = 0; j < i; j++) {
      re[i * n + j] = re[j * n + i] = random() - 0.5
      im[i * n + j] = im[j * n + i] = random() - 0.5
    }
  }
  return { re, im }
}

/** The obvious product, entry by entry. */
function product(a: { re: Float64Array; im: Float64Array }, n: number, xRe: Float64Array, xIm: Float64Array) {
  const re = new Float64Array(n)
  const im = new Float64Array(n)
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) {
      const k = i * n + j
      re[i] = re[i]! + a.re[k]! * xRe[j]! - a.im[k]! * xIm[j]!
      im[i] = im[i]! + a.re[k]! * xIm[j]! + a.im[k]! * xRe[j]!
    }
  return { re, im }
}

const vectorOf = (n: number, random: () => number) => Float64Array.from({ length: n }, () => random() - 0.5)

function farthest(a: Float64Array, b: Float64Array): number {
  return Math.max(...a.map((value, k) => Math.abs(value - b[k]!)))
}

test.each([1, 2, 7, 40, 41])('the product of a real %i × %i matrix equals the obvious one', (n) => {
  const random = numbers(n)
  const { re } = matrixOf(n, random)
  const [xRe, xIm] = [vectorOf(n, random), vectorOf(n, random)]
  const [outRe, outIm] = [new Float64Array(n), new Float64Array(n)]
  realTimesComplex(re, n, xRe, xIm, outRe, outIm)
  const expected = product({ re, im: new Float64Array(n * n) }, n, xRe, xIm)
  expect(farthest(outRe, expected.re)).toBeLessThan(1e-13 * n)
  expect(farthest(outIm, expected.im)).toBeLessThan(1e-13 * n)
})

describe('dense LDLᵀ', () => {
  test.each([1, 2, 5, 60])('solves a system of %i unknowns to rounding', (n) => {
    const random = numbers(100 + n)
    const a = matrixOf(n, random)
    const [xRe, xIm] = [vectorOf(n, random), vectorOf(n, random)]
    const b = product(a, n, xRe, xIm)
    const factor = factorDense(a.re.slice(), a.im.slice(), n)!
    solveDense(factor, b.re, b.im)
    expect(farthest(b.re, xRe)).toBeLessThan(1e-13)
    expect(farthest(b.im, xIm)).toBeLessThan(1e-13)
  })

  test('refuses a matrix whose pivot vanishes', () => {
    expect(factorDense(Float64Array.of(0, 1, 1, 0), new Float64Array(4), 2)).toBeUndefined()
  })
})

describe('chains', () => {
  // lengths of chains, and which are closed to rings
  test.each([
    [[1], [false]],
    [
      [2, 5],
      [false, false],
    ],
    [[2], [true]],
    [
      [3, 9, 1],
      [true, true, false],
    ],
    [
      [30, 4],
      [false, true],
    ],
  ])('of %j places (rings: %j) agree with the dense solution', (lengths, rings) => {
    const random = numbers(lengths.length * 31 + lengths[0]!)
    const n = lengths.reduce((sum, length) => sum + length, 0)
    const dense = { re: new Float64Array(n * n), im: new Float64Array(n * n) }
    const ranges: [number, number][] = []
    for (const length of lengths) {
      const from = ranges.at(-1)?.[1] ?? -1
      ranges.push([from + 1, from + length])
    }
    const chains = emptyChains(n, ranges)
    const join = (i: number, j: number, re: number, im: number) => {
      for (const k of [i * n + j, j * n + i]) {
        dense.re[k] = dense.re[k]! + re
        dense.im[k] = dense.im[k]! + im
      }
    }
    for (const [c, [first, last]] of ranges.entries()) {
      for (let k = first; k <= last; k++) {
        dense.re[k * n + k] = chains.diagonalRe[k] = 3 + random()
        dense.im[k * n + k] = chains.diagonalIm[k] = random()
        if (k === last) break
        chains.nextRe[k] = random() - 0.5
        chains.nextIm[k] = random() - 0.5
        join(k, k + 1, chains.nextRe[k]!, chains.nextIm[k]!)
      }
      if (!rings[c]) continue
      chains.closureRe[c] = random()
      chains.closureIm[c] = random()
      join(first, last, chains.closureRe[c]!, chains.closureIm[c]!)
    }
    const [xRe, xIm] = [vectorOf(n, random), vectorOf(n, random)]
    const b = product(dense, n, xRe, xIm)
    factorChains(chains)
    solveChains(chains, b.re, b.im)
    expect(farthest(b.re, xRe)).toBeLessThan(1e-14)
    expect(farthest(b.im, xIm)).toBeLessThan(1e-14)
  })
})
