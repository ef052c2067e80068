/** Where two straight segments come nearest to each other. Metres. */

/** numbers kept for one line: start x, y, z, unit direction x, y, z, length */
export const lineStride = 7

/** place along the first and along the second, and the vector between them (first minus second), after the distance */
export type Approach = Float64Array

/**
 * Least distance of segment i of `a` and segment j of `b`; `out` receives distance, place along i, place along j,
 * and the vector from the place on j to the place on i.
 */
export function closestApproach(
  a: Float64Array,
  i: number,
  b: Float64Array,
  j: number,
  out: Approach,
): number {
  const p = i * lineStride
  const q = j * lineStride
  const l = a[p + 6]!
  const m = b[q + 6]!
  const ux = a[p + 3]!
  const uy = a[p + 4]!
  const uz = a[p + 5]!
  const vx = b[q + 3]!
  const vy = b[q + 4]!
  const vz = b[q + 5]!
  const wx = a[p]! - b[q]!
  const wy = a[p + 1]! - b[q + 1]!
  const wz = a[p + 2]! - b[q + 2]!
  const c = ux * vx + uy * vy + uz * vz
  const wu = wx * ux + wy * uy + wz * uz
  const wv = wx * vx + wy * vy + wz * vz
  const sine = 1 - c * c
  // the nearest place on the endless line of i (parallel: the middle of what overlaps), then clamp one after the other
  let s: number
  if (sine > 1e-9) s = (c * wv - wu) / sine
  else {
    const far = c > 0 ? m : -m
    const low = Math.max(0, Math.min(-wu, far - wu))
    const high = Math.min(l, Math.max(-wu, far - wu))
    s = (low + high) / 2
  }
  s = Math.min(l, Math.max(0, s))
  const t = Math.min(m, Math.max(0, s * c + wv))
  s = Math.min(l, Math.max(0, t * c - wu))
  const ex = wx + s * ux - t * vx
  const ey = wy + s * uy - t * vy
  const ez = wz + s * uz - t * vz
  const distance = Math.sqrt(ex * ex + ey * ey + ez * ez)
  out[0] = distance
  out[1] = s
  out[2] = t
  out[3] = ex
  out[4] = ey
  out[5] = ez
  return distance
}
