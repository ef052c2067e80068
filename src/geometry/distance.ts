/** Distances between straight pieces and to the face. Metres. */
import type { Point } from '../layout/layout.js'
import { distance } from './polyline.js'

/** Closest places of two pieces: their shares (0 … 1) along the first and the second, and the distance. */
export interface Closest {
  readonly u: number
  readonly v: number
  readonly distance: number
}

const dot = (p: Point, q: Point): number => p[0] * q[0] + p[1] * q[1] + p[2] * q[2]
const minus = (p: Point, q: Point): Point => [p[0] - q[0], p[1] - q[1], p[2] - q[2]]

export const between = (p: Point, q: Point, u: number): Point => [
  p[0] + u * (q[0] - p[0]),
  p[1] + u * (q[1] - p[1]),
  p[2] + u * (q[2] - p[2]),
]

/** Share along p–q of the place nearest to a point; 0 for a piece without length. */
export function shareNearest(point: Point, p: Point, q: Point): number {
  const along = minus(q, p)
  const square = dot(along, along)
  return square > 0 ? Math.min(1, Math.max(0, dot(minus(point, p), along) / square)) : 0
}

/**
 * Closest places of pieces a0–a1 and b0–b1. The square of the distance is convex in both shares, so its least value
 * is where both derivatives vanish or on one of the four edges; trying all five is safe for parallel pieces too.
 */
export function closestPlaces(a0: Point, a1: Point, b0: Point, b1: Point): Closest {
  const tries: (readonly [number, number])[] = [
    [0, shareNearest(a0, b0, b1)],
    [1, shareNearest(a1, b0, b1)],
    [shareNearest(b0, a0, a1), 0],
    [shareNearest(b1, a0, a1), 1],
  ]
  const a = minus(a1, a0)
  const b = minus(b1, b0)
  const w = minus(a0, b0)
  const determinant = dot(a, a) * dot(b, b) - dot(a, b) ** 2
  if (determinant > 1e-12 * dot(a, a) * dot(b, b)) {
    const u = (dot(a, b) * dot(b, w) - dot(b, b) * dot(a, w)) / determinant
    const v = (dot(a, a) * dot(b, w) - dot(a, b) * dot(a, w)) / determinant
    if (u > 0 && u < 1 && v > 0 && v < 1) tries.push([u, v])
  }
  let best: Closest = { u: 0, v: 0, distance: Number.POSITIVE_INFINITY }
  for (const [u, v] of tries) {
    const d = distance(between(a0, a1, u), between(b0, b1, v))
    if (d < best.distance) best = { u, v, distance: d }
  }
  return best
}

/** The nearest point of the face: the sheet (0, 0) to size at z = 0, without size all of z = 0. */
export function footOnFace(point: Point, size: readonly [number, number] | undefined): Point {
  if (size === undefined) return [point[0], point[1], 0]
  return [Math.min(size[0], Math.max(0, point[0])), Math.min(size[1], Math.max(0, point[1])), 0]
}
