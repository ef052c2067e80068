import { describe, expect, it } from 'vitest'
import { fourPiEpsilon } from '../../src/field/constants.js'
import { lineMean, selfMean } from '../../src/field/line-mean.js'
import type { Point } from '../../src/layout/layout.js'
import { inverse } from './sign.js'

const line = (p: Point, q: Point): Float64Array => {
  const d = [q[0] - p[0], q[1] - p[1], q[2] - p[2]]
  const length = Math.hypot(...d)
  return Float64Array.of(...p, ...d.map((x) => x / length), length)
}
const mean = (a: Float64Array, b: Float64Array, extra = 0): number => lineMean(a, 0, b, 0, extra)
const unit = line([0, 0, 0], [1, 0, 0])

// all values computed for the project's physics page, printed to twelve digits [C]
describe('closed forms of mean inverse distances', () => {
  it('a line with its own surface', () => {
    expect(selfMean(1, 0.01)).toBeCloseTo(8.616584733721, 11)
    expect(selfMean(1, 0.001)).toBeCloseTo(13.203804419084, 11)
  })
  it('parallel lines', () => {
    expect(mean(unit, line([0.25, 0.1, 0], [0.75, 0.1, 0]))).toBeCloseTo(4.540648540525, 11)
    expect(mean(unit, line([2, 0.1, 0], [2.5, 0.1, 0]))).toBeCloseTo(0.591306945477, 11)
    expect(mean(unit, line([0.75, 0.1, 0], [0.25, 0.1, 0]))).toBeCloseTo(4.540648540525, 11)
  })
  it('lines on one line', () => {
    expect(mean(unit, line([1.2, 0, 0], [1.7, 0, 0]))).toBeCloseTo(1.222134073846, 11)
    expect(mean(unit, line([1, 0, 0], [1.5, 0, 0]))).toBeCloseTo(1.909542504884, 11)
  })
  it('skew lines', () => {
    expect(mean(unit, line([0.2, 0.05, 0.3], [0.5, 0.9, 0.1]))).toBeCloseTo(1.717512998579, 11)
    expect(mean(unit, line([0, 0, 0], [0, 1, 0]))).toBeCloseTo(2 * Math.log(1 + Math.SQRT2), 11)
  })
  it('does not jump where the parallel form takes over from the skew form', () => {
    const tilted = (e: number): number => mean(unit, line([0.4, 0.6, 0.1], [1.4, 0.6 + e, 0.1]))
    // the parallel form leaves out what is linear in the tilt: about 1e-4 there
    expect(Math.abs(tilted(0.99e-4) / tilted(1.01e-4) - 1)).toBeLessThan(2e-4)
  })
  it('errs under 0.1 % where the far rule takes over', () => {
    for (const far of [
      line([3.01, 0, 0], [4.01, 0, 0]),
      line([0, 3.01, 0], [1, 3.01, 0]),
      line([0, 3.1, 0], [0.3, 3.4, 0.9]),
    ]) {
      // slow second way: midpoints of 100 × 100 pieces
      let sum = 0
      for (let i = 0; i < 100; i++)
        for (let j = 0; j < 100; j++) {
          const at = (l: Float64Array, t: number, k: number): number => l[k]! + t * l[6]! * l[3 + k]!
          const d = [0, 1, 2].map((k) => at(unit, (i + 0.5) / 100, k) - at(far, (j + 0.5) / 100, k))
          sum += 1e-4 / Math.hypot(...d)
        }
      expect(Math.abs(mean(unit, far) / sum - 1)).toBeLessThan(1e-3)
    }
  })
})

it('two wires over ground, five equal segments each [C]', () => {
  const pieces = (p: Point, q: Point): Float64Array[] =>
    [0, 1, 2, 3, 4].map((k) => {
      const at = (t: number): Point => [
        p[0] + (t * (q[0] - p[0])) / 5,
        p[1] + (t * (q[1] - p[1])) / 5,
        p[2] + (t * (q[2] - p[2])) / 5,
      ]
      return line(at(k), at(k + 1))
    })
  const all = [...pieces([0, 0, 0.1], [0.5, 0, 0.1]), ...pieces([0.3, 0.05, 0.15], [0.6, 0.4, 0.25])]
  const radius = (k: number): number => (k < 5 ? 0.005 : 0.003)
  const image = (l: Float64Array): Float64Array => l.map((x, k) => (k === 2 || k === 5 ? -x : x))
  const p = all.map((a, i) =>
    all.map((b, j) => {
      const one = i < 5 === j < 5
      const direct = i === j ? selfMean(a[6]!, radius(i)) : mean(a, b, one ? radius(i) ** 2 : 0)
      return direct - mean(a, image(b))
    }),
  )
  const c = inverse(p)
  const sum = (i0: number, j0: number): number => {
    let total = 0
    for (let i = i0; i < i0 + 5; i++) for (let j = j0; j < j0 + 5; j++) total += c[i]![j]!
    return total * fourPiEpsilon * 1e12
  }
  // within the far rule's error
  expect(sum(0, 0) / 8.492881).toBeCloseTo(1, 3)
  expect(sum(0, 5) / -0.622952).toBeCloseTo(1, 3)
  expect(sum(5, 5) / 6.330717).toBeCloseTo(1, 3)
})
