/** Flat rectangles in space, in one typed array, and the nearest places on them. Metres. */

/** numbers kept for one rectangle: centre x, y, z, unit vectors u and v along its sides, half of each side */
export const rectangleStride = 11

/** distance, share (0 … 1) along the piece, and x, y, z of the place on the rectangle */
export type RectangleFoot = Float64Array

/** Distance from a point to rectangle k; `out` receives it, with the nearest place in out[2 … 4]. */
export function footOnRectangle(
  rectangles: Float64Array,
  k: number,
  x: number,
  y: number,
  z: number,
  out: RectangleFoot,
): number {
  const p = k * rectangleStride
  const dx = x - rectangles[p]!
  const dy = y - rectangles[p + 1]!
  const dz = z - rectangles[p + 2]!
  const a = rectangles[p + 9]!
  const b = rectangles[p + 10]!
  const alongU = dx * rectangles[p + 3]! + dy * rectangles[p + 4]! + dz * rectangles[p + 5]!
  const alongV = dx * rectangles[p + 6]! + dy * rectangles[p + 7]! + dz * rectangles[p + 8]!
  const s = Math.min(a, Math.max(-a, alongU))
  const t = Math.min(b, Math.max(-b, alongV))
  out[2] = rectangles[p]! + s * rectangles[p + 3]! + t * rectangles[p + 6]!
  out[3] = rectangles[p + 1]! + s * rectangles[p + 4]! + t * rectangles[p + 7]!
  out[4] = rectangles[p + 2]! + s * rectangles[p + 5]! + t * rectangles[p + 8]!
  const ex = x - out[2]
  const ey = y - out[3]
  const ez = z - out[4]
  out[0] = Math.sqrt(ex * ex + ey * ey + ez * ez)
  return out[0]
}

const golden = (Math.sqrt(5) - 1) / 2

/**
 * Least distance of the straight piece p–q to rectangle k, with its place in `out`. A rectangle is convex, so the
 * distance is convex along the piece; `steps` golden sections narrow the place to 0.618^steps of the piece.
 */
export function pieceToRectangle(
  rectangles: Float64Array,
  k: number,
  p: readonly [number, number, number],
  q: readonly [number, number, number],
  steps: number,
  out: RectangleFoot,
): number {
  const [px, py, pz] = p
  const dx = q[0] - px
  const dy = q[1] - py
  const dz = q[2] - pz
  const at = (t: number): number => footOnRectangle(rectangles, k, px + t * dx, py + t * dy, pz + t * dz, out)
  let low = 0
  let high = 1
  let s = 1 - golden
  let t = golden
  let atS = at(s)
  let atT = at(t)
  for (let n = 0; n < steps; n++) {
    if (atS <= atT) {
      high = t
      t = s
      atT = atS
      s = high - golden * (high - low)
      atS = at(s)
    } else {
      low = s
      s = t
      atS = atT
      t = low + golden * (high - low)
      atT = at(t)
    }
  }
  // the ends themselves are often the nearest places
  const atStart = at(0)
  const atEnd = at(1)
  const middle = (low + high) / 2
  const between = at(middle)
  const best = atStart <= between && atStart <= atEnd ? 0 : atEnd <= between ? 1 : middle
  out[1] = best
  return at(best)
}
