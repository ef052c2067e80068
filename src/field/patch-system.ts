/**
 * Coefficients of potential of the patches of sheets, between each other and to segments, over K = 1/4πε0 (1/m).
 * A patch carries an even charge only; the harmonics of a segment near it feel that charge as they feel another
 * segment's, so a tube over a sheet gathers its charge on the side of the sheet.
 */
import { lineStride } from '../geometry/closest-approach.js'
import { pieceToRectangle, rectangleStride } from '../geometry/rectangles.js'
import type { Segments } from '../geometry/segments.js'
import {
  dipoleMeans,
  feltOrder,
  harmonicReach,
  neededOrder,
  type RingSource,
  ringMeans,
} from './harmonics.js'
import type { Patches } from './patches.js'
import { farLineRectangle, lineRectangleMean, lineRule, rectangleMean } from './rectangle-mean.js'

/** Patches and, over metal at z = 0, their mirror images. */
export interface PatchSet {
  readonly patches: Patches
  readonly images?: Patches
}

/** Coefficients between all patches, count × count. */
export function patchPotential({ patches, images }: PatchSet): Float64Array {
  const { count, rectangles, side } = patches
  const out = new Float64Array(count * count)
  for (let i = 0; i < count; i++)
    for (let j = 0; j <= i; j++) {
      if (side[i] !== side[j]) continue
      let mean = rectangleMean(rectangles, i, rectangles, j)
      if (images) mean -= rectangleMean(rectangles, i, images.rectangles, j)
      out[i * count + j] = mean
      out[j * count + i] = mean
    }
  return out
}

/** Coefficients between two sets of patches over the same face: those of a × those of b. */
export function patchesBetween(a: Patches, { patches, images }: PatchSet): Float64Array {
  const out = new Float64Array(a.count * patches.count)
  for (let i = 0; i < a.count; i++)
    for (let j = 0; j < patches.count; j++) {
      if (a.side[i] !== patches.side[j]) continue
      let mean = rectangleMean(a.rectangles, i, patches.rectangles, j)
      if (images) mean -= rectangleMean(a.rectangles, i, images.rectangles, j)
      out[i * patches.count + j] = mean
    }
  return out
}

/** A segment and a patch (or its image) near enough for harmonics. */
interface NearPatch {
  readonly i: number
  readonly j: number
  readonly image: boolean
  /** from the axis, never under that of touching surfaces */
  readonly distance: number
  /** the segment is moved by this, where the drawing has it inside the sheet */
  readonly shift?: Float64Array
}

export interface PatchCross {
  /** segments × patches */
  readonly charges: Float64Array
  readonly near: readonly NearPatch[]
  /** same places: 1 where the patch, 2 where its image needs no dipole rule */
  readonly settled: Uint8Array
}

const found = new Float64Array(5)
const ends = (lines: Float64Array, i: number) => {
  const p = i * lineStride
  const l = lines[p + 6]!
  return [
    [lines[p]!, lines[p + 1]!, lines[p + 2]!],
    [lines[p]! + l * lines[p + 3]!, lines[p + 1]! + l * lines[p + 4]!, lines[p + 2]! + l * lines[p + 5]!],
  ] as const
}

/** How segment i stands to patch j: far (nothing), or its distance, with what keeps it out of the sheet. */
function standing(segments: Segments, i: number, { rectangles }: Patches, j: number) {
  const { lines } = segments
  const p = i * lineStride
  const q = j * rectangleStride
  const half = lines[p + 6]! / 2
  const x = rectangles[q]! - lines[p]! - half * lines[p + 3]!
  const y = rectangles[q + 1]! - lines[p + 1]! - half * lines[p + 4]!
  const z = rectangles[q + 2]! - lines[p + 2]! - half * lines[p + 5]!
  const size = 2 * (half + Math.hypot(rectangles[q + 9]!, rectangles[q + 10]!))
  if (x * x + y * y + z * z > 2.25 * size * size) return undefined
  const [from, to] = ends(lines, i)
  const distance = pieceToRectangle(rectangles, j, from, to, 16, found)
  const touching = Math.max(segments.outer[i]!, 1.03 * segments.radius[i]!)
  if (distance >= touching) return { distance, entangled: false }
  // out of the sheet, the shortest way
  const shift = new Float64Array(3)
  const along = found[1]! * 2 * half
  for (let k = 0; k < 3; k++)
    shift[k] =
      distance > 1e-6 * touching
        ? ((lines[p + k]! + along * lines[p + 3 + k]! - found[2 + k]!) * (touching - distance)) / distance
        : crossProduct(rectangles, q, k) * touching
  return { distance: touching, shift, entangled: distance < 0.8 * touching }
}

/** Component k of the normal of the rectangle at q. */
function crossProduct(r: Float64Array, q: number, k: number): number {
  const n = (k + 1) % 3
  const o = (k + 2) % 3
  return r[q + 3 + n]! * r[q + 6 + o]! - r[q + 3 + o]! * r[q + 6 + n]!
}

const moved = new Float64Array(lineStride)

/** Charge coefficients of all segments and patches, and which are near. */
export function barePatchCross(segments: Segments, { patches, images }: PatchSet): PatchCross {
  const { count, side } = patches
  const charges = new Float64Array(segments.count * count)
  const settled = new Uint8Array(segments.count * count)
  const near: NearPatch[] = []
  const mean = (i: number, j: number, of: Patches, image: boolean): number => {
    const stands = standing(segments, i, of, j)
    if (!stands) return farLineRectangle(segments.lines, i, of.rectangles, j)
    const { distance, entangled } = stands
    // an image lies behind the face: no conductor is inside it
    const shift = image ? undefined : stands.shift
    if (distance < harmonicReach * segments.radius[i]!) {
      settled[i * count + j]! |= image ? 2 : 1
      if (image || !entangled) near.push({ i, j, image, distance, ...(shift && { shift }) })
    }
    const q = j * rectangleStride
    const [a, b] = [of.rectangles[q + 9]!, of.rectangles[q + 10]!]
    const rule = lineRule(segments.lines[lineStride * i + 6]!, a, b, distance)
    if (!shift) return lineRectangleMean(segments.lines, i, of.rectangles, j, rule)
    moved.set(segments.lines.subarray(lineStride * i, lineStride * (i + 1)))
    for (let k = 0; k < 3; k++) moved[k]! += shift[k]!
    return lineRectangleMean(moved, 0, of.rectangles, j, rule)
  }
  for (let i = 0; i < segments.count; i++)
    for (let j = 0; j < count; j++) {
      if (segments.side[i] !== side[j]) {
        settled[i * count + j] = 3
        continue
      }
      charges[i * count + j] = mean(i, j, patches, false) - (images ? mean(i, j, images, true) : 0)
    }
  return { charges, near, settled }
}

/** Puts the coefficients of patches behind those of the segments. */
export function addPatches(
  potential: Float64Array,
  count: number,
  between: Float64Array,
  cross: PatchCross,
): void {
  const patches = Math.sqrt(between.length)
  const charges = count + patches
  for (let i = 0; i < count; i++)
    for (let j = 0; j < patches; j++) {
      potential[i * charges + count + j] = cross.charges[i * patches + j]!
      potential[(count + j) * charges + i] = cross.charges[i * patches + j]!
    }
  for (let i = 0; i < patches; i++)
    potential.set(between.subarray(i * patches, (i + 1) * patches), (count + i) * charges + count)
}

/** Raises `orders` to the highest harmonic that each segment needs beside a sheet: as beside its own mirror image. */
export function raiseOrders(
  orders: Int32Array,
  segments: Segments,
  { near }: PatchCross,
  most: number,
): void {
  for (const { i, distance } of near) {
    const a = segments.radius[i]!
    orders[i] = Math.max(orders[i]!, neededOrder(a, a, 2 * distance, most))
  }
}

/** Middles of patches, or of their quarters, as lines without length: places for the rule of dipoles. */
function middles({ count, rectangles }: Patches, quarters: boolean): RingSource {
  const each = quarters ? 4 : 1
  const lines = new Float64Array(each * count * lineStride)
  for (let j = 0; j < count; j++)
    for (let k = 0; k < each; k++) {
      const q = j * rectangleStride
      const s = quarters ? ((k & 1) - 0.5) * rectangles[q + 9]! : 0
      const t = quarters ? ((k >> 1) - 0.5) * rectangles[q + 10]! : 0
      for (let c = 0; c < 3; c++)
        lines[(each * j + k) * lineStride + c] =
          rectangles[q + c]! + s * rectangles[q + 3 + c]! + t * rectangles[q + 6 + c]!
    }
  return { lines, frames: new Float64Array(0), radius: new Float64Array(0) }
}

const values = new Float64Array(64)

/**
 * Hands every coefficient between a harmonic of a segment (cosine, sine, in the order of its rows) and the charge of
 * a patch to `couple`: near pairs ring by ring, others by dipoles up to so many radii.
 */
export function couplePatches(
  segments: Segments,
  orders: Int32Array,
  { patches, images }: PatchSet,
  { near, settled }: PatchCross,
  dipolesTo: number,
  couple: (segment: number, harmonic: number, patch: number, value: number) => void,
): void {
  for (const { i, j, image, distance, shift } of near) {
    const order = feltOrder(segments.radius[i]!, distance, orders[i]!)
    const { rectangles } = image && images ? images : patches
    const q = j * rectangleStride
    const rule = lineRule(
      segments.lines[lineStride * i + 6]!,
      rectangles[q + 9]!,
      rectangles[q + 10]!,
      Math.max(distance - 0.3 * segments.radius[i]!, 0.3 * distance),
    )
    ringMeans(
      segments,
      i,
      order,
      shift,
      (lines, k) => lineRectangleMean(lines, k, rectangles, j, rule),
      values,
    )
    for (let h = 1; h <= 2 * order; h++) couple(i, h - 1, j, image ? -values[h]! : values[h]!)
  }
  coupleDipoles(segments, orders, patches, 1, settled, dipolesTo, couple)
  if (images) coupleDipoles(segments, orders, images, 2, settled, dipolesTo, couple)
}

function coupleDipoles(
  segments: Segments,
  orders: Int32Array,
  patches: Patches,
  bit: 1 | 2,
  settled: Uint8Array,
  dipolesTo: number,
  couple: (segment: number, harmonic: number, patch: number, value: number) => void,
): void {
  const { count, rectangles } = patches
  const whole = middles(patches, false)
  const quarters = middles(patches, true)
  const sign = bit === 1 ? 1 : -1
  const means = new Float64Array(2)
  for (let i = 0; i < segments.count; i++) {
    if (orders[i] === 0) continue
    const p = i * lineStride
    const half = segments.lines[p + 6]! / 2
    for (let j = 0; j < count; j++) {
      const done = settled[i * count + j]!
      if (done === 3 || (done & bit) !== 0) continue
      const q = j * rectangleStride
      let square = 0
      for (let k = 0; k < 3; k++)
        square += (segments.lines[p + k]! + half * segments.lines[p + 3 + k]! - rectangles[q + k]!) ** 2
      if (square > (dipolesTo * segments.radius[i]!) ** 2) continue
      means.fill(0)
      if (square > 36 * (rectangles[q + 9]! ** 2 + rectangles[q + 10]! ** 2))
        dipoleMeans(segments, i, whole, j, sign, means)
      else for (let k = 0; k < 4; k++) dipoleMeans(segments, i, quarters, 4 * j + k, sign / 4, means)
      couple(i, 0, j, means[0]!)
      couple(i, 1, j, means[1]!)
    }
  }
}
