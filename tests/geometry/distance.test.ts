import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { between, closestPlaces, footOnFace, shareNearest } from '../../src/geometry/distance.js'
import { distance } from '../../src/geometry/polyline.js'
import type { Point } from '../../src/layout/layout.js'

describe('closest places of two pieces', () => {
  it('of skew pieces are the feet of the common perpendicular', () => {
    const { u, v, distance: d } = closestPlaces([0, 0, 0], [4, 0, 0], [1, -1, 2], [1, 3, 2])
    expect([u, v, d]).toEqual([0.25, 0.25, 2])
  })
  it('of crossing pieces coincide, of pieces on one line are the facing ends', () => {
    expect(closestPlaces([0, 0, 0], [2, 2, 0], [0, 2, 0], [2, 0, 0]).distance).toBeCloseTo(0, 15)
    expect(closestPlaces([0, 0, 0], [1, 0, 0], [3, 0, 0], [2, 0, 0])).toEqual({ u: 1, v: 1, distance: 1 })
  })
  it('of parallel pieces are their lateral distance apart, nearly parallel or not', () => {
    for (const tilt of [0, 1e-14, 1e-9, 1e-7]) {
      expect(closestPlaces([0, 0, 0], [1, 0, 0], [0.3, 0.5, 0], [1.7, 0.5 + tilt, 0]).distance).toBeCloseTo(
        0.5,
        12,
      )
    }
  })
  it('of pieces without length are those places', () => {
    expect(closestPlaces([1, 1, 1], [1, 1, 1], [1, 1, 4], [1, 1, 4]).distance).toBe(3)
    expect(closestPlaces([1, 1, 1], [1, 1, 1], [0, 0, 1], [2, 0, 1])).toEqual({ u: 0, v: 0.5, distance: 1 })
  })

  const point = fc.tuple(
    fc.integer({ min: -9, max: 9 }),
    fc.integer({ min: -9, max: 9 }),
    fc.integer({ min: -9, max: 9 }),
  )
  it('are no farther than any two places of a grid, and as far as they say', () => {
    fc.assert(
      fc.property(point, point, point, point, (a0: Point, a1: Point, b0: Point, b1: Point) => {
        const { u, v, distance: d } = closestPlaces(a0, a1, b0, b1)
        expect(distance(between(a0, a1, u), between(b0, b1, v))).toBe(d)
        for (let i = 0; i <= 10; i++) {
          for (let j = 0; j <= 10; j++) {
            expect(d).toBeLessThanOrEqual(distance(between(a0, a1, i / 10), between(b0, b1, j / 10)) + 1e-9)
          }
        }
      }),
      { numRuns: 200, seed: 3 },
    )
  })
})

describe('nearest places', () => {
  it('on a piece are clamped to its ends', () => {
    expect(shareNearest([5, 1, 0], [0, 0, 0], [2, 0, 0])).toBe(1)
    expect(shareNearest([-5, 1, 0], [0, 0, 0], [2, 0, 0])).toBe(0)
    expect(shareNearest([1, 1, 0], [3, 3, 3], [3, 3, 3])).toBe(0)
  })
  it('on the face are the foot, or the nearest place of its rim', () => {
    expect(footOnFace([0.2, 0.1, -0.03], [0.9, 0.4])).toEqual([0.2, 0.1, 0])
    expect(footOnFace([-0.2, 0.7, 0.03], [0.9, 0.4])).toEqual([0, 0.4, 0])
    expect(footOnFace([-0.2, 0.7, 0.03], undefined)).toEqual([-0.2, 0.7, 0])
  })
})
