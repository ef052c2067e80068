/** The closed forms against slow quadrature, and against each other. */
import { describe, expect, it } from 'vitest'
import { gaussRule } from '../../src/field/gauss.js'
import {
  farLineRectangle,
  lineRectangleMean,
  lineRule,
  parallelMean,
  pointMean,
  rectangleMean,
  selfRectangle,
} from '../../src/field/rectangle-mean.js'

/** mean of f over −a … a by many Gauss places in many parts */
function mean(a: number, f: (x: number) => number, parts = 12): number {
  const { places, weights } = gaussRule(12)
  let sum = 0
  for (let part = 0; part < parts; part++) {
    const middle = -a + ((2 * part + 1) * a) / parts
    places.forEach((x, k) => {
      sum += (weights[k]! * f(middle + (x * a) / parts)) / parts
    })
  }
  return sum
}
const slowPoint = (x: number, y: number, z: number, a: number, b: number): number =>
  mean(a, (s) => mean(b, (t) => 1 / Math.hypot(x - s, y - t, z)))

describe('a point and a rectangle', () => {
  it.each([
    [0.3, 0.2, 0.4],
    [1.4, -0.3, 0.05],
    [-2, 3, 0.7],
    [1.6, 1.2, 0],
    [0.2, 2.5, -0.3],
  ])('at (%f, %f, %f)', (x, y, z) => {
    // the slow way has a near-singular integrand where the point is close
    expect(pointMean(x, y, z, 1, 0.6) / slowPoint(x, y, z, 1, 0.6)).toBeCloseTo(1, z === 0.05 ? 5 : 9)
  })
  it('in the middle of a square of side 1 in its plane: 4 asinh 1', () => {
    expect(pointMean(0, 0, 0, 0.5, 0.5)).toBeCloseTo(4 * Math.asinh(1), 12)
  })
  it('on a corner: half of the mean in the middle of a square of the same size', () => {
    expect(pointMean(0.5, 0.5, 0, 0.5, 0.5)).toBeCloseTo(2 * Math.asinh(1), 12)
  })
})

describe('two rectangles', () => {
  it('a unit square with itself: 4 [ln(1 + √2) + (1 − √2)/3] (the fourfold integral done by hand)', () => {
    const exact = 4 * (Math.log(1 + Math.SQRT2) + (1 - Math.SQRT2) / 3)
    expect(selfRectangle(0.5, 0.5)).toBeCloseTo(exact, 12)
    expect(selfRectangle(5, 5)).toBeCloseTo(exact / 10, 12)
  })
  it('a strip with itself is the mean of what it gives along itself', () => {
    const slow = mean(0.5, (x) => mean(0.05, (y) => pointMean(x, y, 0, 0.5, 0.05)))
    expect(selfRectangle(0.5, 0.05) / slow).toBeCloseTo(1, 5)
  })
  it.each([
    ['side by side, touching', 1, 0, 0],
    ['corner to corner', 1, 0.8, 0],
    ['face to face', 0, 0, 0.3],
    ['face to face, almost touching', 0, 0, 0.001],
    ['apart in all three', 0.7, -0.5, 0.4],
  ])('of the same axes, %s', (_, x, y, z) => {
    const slow = mean(0.3, (s) => mean(0.2, (t) => pointMean(x + s, y + t, z, 0.5, 0.4)))
    expect(parallelMean(x, y, z, 0.5, 0.4, 0.3, 0.2) / slow).toBeCloseTo(1, 5)
  })

  const of = (centre: number[], u: number[], v: number[], a: number, b: number): Float64Array =>
    Float64Array.from([...centre, ...u, ...v, a, b])
  const floor = of([0, 0, 0], [1, 0, 0], [0, 1, 0], 0.5, 0.5)
  it.each([
    ['a wall on the edge of a floor', of([0.5, 0, 0.5], [0, 1, 0], [0, 0, 1], 0.5, 0.5), 0.003],
    ['a slim wall on the edge of a floor', of([0.5, 0, 0.1], [0, 1, 0], [0, 0, 1], 0.5, 0.1), 0.003],
    ['a slanted one near by', of([1.2, 0.3, 0.4], [0.6, 0.8, 0], [-0.8, 0.6, 0], 0.3, 0.3), 0.001],
    ['one further away', of([2, 1, 0.4], [0.6, 0.8, 0], [0, 0, 1], 0.3, 0.4), 0.001],
    ['one far away', of([5, 1, 0.4], [0.6, 0.8, 0], [0, 0, 1], 0.3, 0.4), 0.0005],
  ])('%s: within the stated error of the slow mean, the same either way round', (_, other, tolerance) => {
    const slow = mean(other[9]!, (s) =>
      mean(
        other[10]!,
        (t) =>
          pointMean(
            other[0]! + s * other[3]! + t * other[6]!,
            other[1]! + s * other[4]! + t * other[7]!,
            other[2]! + s * other[5]! + t * other[8]!,
            0.5,
            0.5,
          ),
        4,
      ),
    )
    const quick = rectangleMean(floor, 0, other, 0)
    expect(Math.abs(quick / slow - 1)).toBeLessThan(tolerance)
    expect(rectangleMean(other, 0, floor, 0) / quick).toBeCloseTo(1, 12)
  })
})

describe('a line and a rectangle', () => {
  const patch = Float64Array.of(0, 0, 0, 1, 0, 0, 0, 1, 0, 0.01, 0.015)
  const line = (x: number, y: number, z: number, length: number): Float64Array =>
    Float64Array.of(x, y, z, 0.6, 0.8, 0, length)
  const slow = (l: Float64Array): number =>
    mean(l[6]! / 2, (s) => {
      const along = s + l[6]! / 2
      return pointMean(l[0]! + 0.6 * along, l[1]! + 0.8 * along, l[2]!, 0.01, 0.015)
    })
  it.each([
    ['a segment over it', line(-0.006, -0.008, 0.02, 0.02), 0.02],
    ['a long lead over it', line(-0.015, -0.02, 0.006, 0.05), 0.006],
    ['a long lead right on it', line(-0.015, -0.02, 0.003, 0.05), 0.003],
    ['a segment beside it', line(0.02, 0.01, 0.01, 0.02), 0.014],
  ])('%s', (_, l, distance) => {
    const quick = lineRectangleMean(l, 0, patch, 0, lineRule(l[6]!, 0.01, 0.015, distance))
    expect(Math.abs(quick / slow(l) - 1)).toBeLessThan(0.002)
  })
  it('far away: point to point with second moments', () => {
    const l = line(0.1, 0.05, 0.03, 0.02)
    expect(Math.abs(farLineRectangle(l, 0, patch, 0) / slow(l) - 1)).toBeLessThan(5e-4)
  })
})
