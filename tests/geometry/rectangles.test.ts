import fc from 'fast-check'
import { expect, it } from 'vitest'
import { footOnRectangle, pieceToRectangle } from '../../src/geometry/rectangles.js'
import type { Point } from '../../src/layout/layout.js'

const out = new Float64Array(5)
/** 2 × 1 m in the plane x = 0, its sides along y and z */
const upright = Float64Array.of(0, 0, 0, 0, 1, 0, 0, 0, 1, 1, 0.5)

it.each([
  ['in front', [0.3, 0.2, 0.1], 0.3, [0, 0.2, 0.1]],
  ['beside an edge', [0.3, 1.4, 0.1], 0.5, [0, 1, 0.1]],
  ['beside a corner', [0, 1.3, 0.9], 0.5, [0, 1, 0.5]],
  ['on it', [0, 0.5, 0.5], 0, [0, 0.5, 0.5]],
] as const)('a point %s', (_, [x, y, z], distance, place) => {
  expect(footOnRectangle(upright, 0, x, y, z, out)).toBeCloseTo(distance, 12)
  place.forEach((value, k) => {
    expect(out[2 + k]!).toBeCloseTo(value, 12)
  })
})

const rounding = 50
it('a piece that goes through it has no distance; one that ends before it is nearest with its end', () => {
  expect(pieceToRectangle(upright, 0, [-1, 0.2, 0.1], [0.5, 0.2, 0.1], rounding, out)).toBeLessThan(1e-9)
  expect(out[1]).toBeCloseTo(2 / 3, 8)
  expect(pieceToRectangle(upright, 0, [1, 0.2, 0.1], [0.25, 0.2, 0.1], rounding, out)).toBe(0.25)
  expect(out[1]).toBe(1)
})

it('no place on the piece and on the rectangle is nearer than the one found', () => {
  const metre = fc.double({ min: -2, max: 2, noNaN: true })
  const point = fc.tuple(metre, metre, metre)
  const share = fc.double({ min: 0, max: 1, noNaN: true })
  fc.assert(
    fc.property(point, point, share, share, share, (p, q, along, s, t) => {
      const found = pieceToRectangle(upright, 0, p, q, rounding, out)
      const place: Point = [0, 2 * s - 1, t - 0.5]
      const on = p.map((x, k) => x + along * (q[k]! - x))
      const apart = Math.hypot(...place.map((x, k) => x - on[k]!))
      expect(found).toBeLessThan(apart + 1e-9)
      // and it is one
      const at = p.map((x, k) => x + out[1]! * (q[k]! - x))
      expect(Math.hypot(...at.map((x, k) => x - out[2 + k]!))).toBeCloseTo(found, 12)
    }),
  )
})
