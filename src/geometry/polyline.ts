/** Paths of straight pieces, with the length along them. Metres. */
import type { PathPoint, Point } from '../layout/layout.js'
import type { Polyline } from './conductors.js'

/** Drawn points made three-dimensional: those without z lie at `height`. */
export const raised = (path: readonly PathPoint[], height: number): Point[] =>
  path.map(({ x, y, z }) => [x, y, z ?? height])

/** The polyline through these points; repeated points are merged. */
export function polyline(corners: readonly Point[]): Polyline {
  const distinct = corners.filter((p, i) => i === 0 || distance(p, corners[i - 1]!) > 1e-9)
  const points = new Float64Array(distinct.length * 3)
  const at = new Float64Array(distinct.length)
  distinct.forEach((p, i) => {
    points.set(p, 3 * i)
    at[i] = i === 0 ? 0 : at[i - 1]! + distance(p, distinct[i - 1]!)
  })
  return { points, at, length: at[at.length - 1] ?? 0 }
}

export const distance = (p: Point, q: Point): number => Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2])

/** Index of the straight piece that holds path length s (clamped to the path). */
export function pieceAt(line: Polyline, s: number): number {
  let low = 0
  let high = line.at.length - 2
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (line.at[middle]! <= s) low = middle
    else high = middle - 1
  }
  return Math.max(0, low)
}

/** The point at path length s (clamped to the path). */
export function pointAt(line: Polyline, s: number): Point {
  const { points, at } = line
  if (at.length < 2) return [points[0]!, points[1]!, points[2]!]
  const i = pieceAt(line, s)
  const t = Math.min(1, Math.max(0, (s - at[i]!) / (at[i + 1]! - at[i]!)))
  const p = 3 * i
  return [
    points[p]! + t * (points[p + 3]! - points[p]!),
    points[p + 1]! + t * (points[p + 4]! - points[p + 1]!),
    points[p + 2]! + t * (points[p + 5]! - points[p + 2]!),
  ]
}
