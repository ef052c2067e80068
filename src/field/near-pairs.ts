/**
 * How two segments stand to each other: the pieces of one conductor, two conductors that may be too close for one
 * charge per segment, or far apart. Metres.
 */
import { closestApproach, lineStride } from '../geometry/closest-approach.js'
import { pathBetween, type Segments } from '../geometry/segments.js'
import { harmonicReach } from './harmonics.js'

/** A pair that is near enough for harmonics. */
export interface NearPair {
  readonly i: number
  readonly j: number
  /** j stands for its mirror image */
  readonly image: boolean
  /** axis distance, never under that of touching surfaces */
  readonly axes: number
  /** j is moved by this, where the drawing has the two inside each other */
  readonly shift?: Float64Array
  /** so far inside each other that harmonics would describe nothing real */
  readonly entangled: boolean
}

/** Bits that say what a pair of segments needs no dipole rule for: itself, or j's mirror image. */
export const directSettled = 1
export const imageSettled = 2

/** The mirror images in z = 0. */
export function mirrored(segments: Segments): Segments {
  const lines = segments.lines.slice()
  const frames = segments.frames.slice()
  for (let i = 0; i < segments.count; i++) {
    for (const k of [2, 5]) {
      lines[lineStride * i + k]! *= -1
      frames[6 * i + k]! *= -1
    }
  }
  return { ...segments, lines, frames }
}

/**
 * Do these two segments of one body continue each other? Path between them at most 1.5 × the straight distance, or
 * nearer than two equivalent radii.
 */
export function continuous(segments: Segments, i: number, j: number): boolean {
  const { lines, radius } = segments
  const apart = middleDistance(segments, i, segments, j)
  if (pathBetween(segments, i, j) <= 1.5 * apart) return true
  if (apart - (lines[lineStride * i + 6]! + lines[lineStride * j + 6]!) / 2 > 2 * radius[i]!) return false
  return closestApproach(lines, i, lines, j, found) < 2 * radius[i]!
}

const found = new Float64Array(6)

export function middleDistance(a: Segments, i: number, b: Segments, j: number): number {
  const p = i * lineStride
  const q = j * lineStride
  const l = a.lines[p + 6]! / 2
  const m = b.lines[q + 6]! / 2
  const x = a.lines[p]! + l * a.lines[p + 3]! - b.lines[q]! - m * b.lines[q + 3]!
  const y = a.lines[p + 1]! + l * a.lines[p + 4]! - b.lines[q + 1]! - m * b.lines[q + 4]!
  const z = a.lines[p + 2]! + l * a.lines[p + 5]! - b.lines[q + 2]! - m * b.lines[q + 5]!
  return Math.sqrt(x * x + y * y + z * z)
}

/** The near pair of segment i of `a` and segment j of `b` (for an image: the mirrored segments), or nothing. */
export function nearPair(
  a: Segments,
  i: number,
  b: Segments,
  j: number,
  image: boolean,
): NearPair | undefined {
  const l = a.lines[lineStride * i + 6]!
  const m = b.lines[lineStride * j + 6]!
  const reach = harmonicReach * Math.max(a.radius[i]!, b.radius[j]!)
  if (middleDistance(a, i, b, j) > reach + (l + m) / 2) return undefined
  const axes = closestApproach(a.lines, i, b.lines, j, found)
  if (axes > reach) return undefined
  const touching = Math.max(a.outer[i]! + b.outer[j]!, 1.03 * (a.radius[i]! + b.radius[j]!))
  if (image || axes >= touching) return { i, j, image, axes, entangled: false }
  const shift = apartBy(a, i, b, j, axes, touching - axes)
  return { i, j, image, axes: touching, shift, entangled: axes < 0.8 * touching }
}

/** The move of j that takes it `more` further from i: along the line of nearest approach, or across both. */
function apartBy(a: Segments, i: number, b: Segments, j: number, axes: number, more: number): Float64Array {
  const away = Float64Array.of(-found[3]!, -found[4]!, -found[5]!)
  if (axes < 1e-6 * more) {
    const p = lineStride * i + 3
    const q = lineStride * j + 3
    for (let k = 0; k < 3; k++) {
      const n = (k + 1) % 3
      const o = (k + 2) % 3
      away[k] = a.lines[p + n]! * b.lines[q + o]! - a.lines[p + o]! * b.lines[q + n]!
    }
    // one straight line: any way across
    if (Math.hypot(...away) < 1e-6) away.set(a.frames.subarray(6 * i, 6 * i + 3))
  }
  const size = Math.hypot(...away)
  return away.map((x) => (x / size) * more)
}
