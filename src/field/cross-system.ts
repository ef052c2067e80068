/** Coefficients between two sets of segments that are solved apart: a lead and the fixed bodies, or two leads. 1/m. */
import { lineStride } from '../geometry/closest-approach.js'
import type { Segments } from '../geometry/segments.js'
import type { ChargeSystem } from './charge-system.js'
import { shiftedMean } from './charge-system.js'
import { dipoleMeans, dipoleReach, feltOrder, leadDipoleReach, neededOrder, ringBlock } from './harmonics.js'
import { lineMean } from './line-mean.js'
import { directSettled, imageSettled, middleDistance, type NearPair, nearPair } from './near-pairs.js'

/** Square to add to the distances of a pair that is joined end to end there, or 0 for separate conductors. */
export type Joint = (i: number, j: number) => number
export const noJoint: Joint = () => 0

export interface CrossBare {
  /** charges of a × charges of b */
  readonly charges: Float64Array
  /** same places: bits that say where no dipole rule is needed, for the pair and for its image */
  readonly settled: Uint8Array
  readonly near: readonly NearPair[]
}

/** Coefficients between the total charges, and all near pairs. */
export function bareCross(a: Segments, b: Segments, imagesB: Segments | undefined, joint: Joint): CrossBare {
  const charges = new Float64Array(a.count * b.count)
  const near: NearPair[] = []
  const settled = new Uint8Array(a.count * b.count)
  for (let i = 0; i < a.count; i++) {
    for (let j = 0; j < b.count; j++) {
      if (a.side[i] !== b.side[j]) {
        settled[i * b.count + j] = directSettled | imageSettled
        continue
      }
      const extra = joint(i, j)
      const pair = extra > 0 ? undefined : nearPair(a, i, b, j, false)
      if (pair && !pair.entangled) near.push(pair)
      if (pair || extra > 0) settled[i * b.count + j]! |= directSettled
      let mean = pair ? shiftedMean(a, b, pair) : lineMean(a.lines, i, b.lines, j, extra)
      if (imagesB) {
        const image = nearPair(a, i, imagesB, j, true)
        if (image) near.push(image)
        if (image) settled[i * b.count + j]! |= imageSettled
        mean -= lineMean(a.lines, i, imagesB.lines, j, 0)
      }
      charges[i * b.count + j] = mean
    }
  }
  return { charges, near, settled }
}

/** Highest harmonic each segment of a needs because of b, at least `least`. */
export function crossOrders(
  a: Segments,
  b: Segments,
  near: readonly NearPair[],
  least: Int32Array,
  most: number,
): Int32Array {
  const orders = least.slice()
  for (const { i, j, axes } of near)
    orders[i] = Math.max(orders[i]!, neededOrder(a.radius[i]!, b.radius[j]!, axes, most))
  return orders
}

/** Harmonics of a segment of b beyond those its own system has; columns follow the rows of that system. */
export interface Extra {
  readonly column: number
  readonly from: number
  readonly to: number
}

export interface CrossHarmonics {
  /** harmonics of a (rows of its system) × charges of b; those of patches are not filled in */
  readonly toCharges: Float64Array
  /** (charges of a, then harmonics of a) × (harmonics of b, then extras), row length `width` */
  readonly toHarmonics: Float64Array
  readonly width: number
  /** by segment of b */
  readonly extras: ReadonlyMap<number, Extra>
  /** which components of b's harmonics are touched */
  readonly components: readonly number[]
}

/** Extra harmonics that segments of b need because of a, numbered after b's own. */
function extraHarmonics(
  a: Segments,
  b: ChargeSystem,
  near: readonly NearPair[],
  most: number,
): Map<number, Extra> {
  const needed = new Map<number, number>()
  for (const { i, j, axes } of near) {
    const order = neededOrder(b.segments.radius[j]!, a.radius[i]!, axes, most)
    if (order > Math.max(b.orders[j]!, needed.get(j) ?? 0)) needed.set(j, order)
  }
  let column = b.hh.count
  const extras = new Map<number, Extra>()
  for (const [j, to] of needed) {
    extras.set(j, { column, from: b.orders[j]! + 1, to })
    column += 2 * (to - b.orders[j]!)
  }
  return extras
}

const block = new Float64Array(64 * 64)

/** Everything between the harmonics of either side and the other side. `most` = 0: no extras. */
export function crossHarmonics(
  a: ChargeSystem,
  b: ChargeSystem,
  { near, settled }: CrossBare,
  most: number,
): CrossHarmonics {
  const extras = extraHarmonics(a.segments, b, near, most)
  let width = b.hh.count
  for (const { from, to } of extras.values()) width += 2 * (to - from + 1)
  const toCharges = new Float64Array(a.hh.count * b.charges)
  const toHarmonics = new Float64Array((a.segments.count + a.hh.count) * width)
  const touchedRows = new Set<number>()
  for (const { i, j, axes, image, shift } of near) {
    const sign = image ? -1 : 1
    const extra = extras.get(j)
    const mi = feltOrder(a.segments.radius[i]!, axes, a.orders[i]!)
    const mj = feltOrder(b.segments.radius[j]!, axes, extra?.to ?? b.orders[j]!)
    ringBlock(a.segments, i, mi, image && b.images ? b.images : b.segments, j, mj, shift, block)
    const wide = 2 * mj + 1
    const rowA = a.rows[i]!
    for (let u = 0; u <= 2 * mi; u++) {
      if (u > 0) toCharges[(rowA + u - 1) * b.charges + j]! += sign * block[u * wide]!
      const row = (u === 0 ? i : a.segments.count + rowA + u - 1) * width
      for (let v = 1; v <= 2 * mj; v++) {
        const own = v <= 2 * b.orders[j]!
        const column = own ? b.rows[j]! + v - 1 : (extra?.column ?? 0) + v - 1 - 2 * b.orders[j]!
        toHarmonics[row + column]! += sign * block[u * wide + v]!
      }
    }
    if (mj > 0 && b.orders[j]! > 0) touchedRows.add(b.rows[j]!)
  }
  const count = b.segments.count
  const done = (i: number, j: number): number => settled[i * count + j]!
  dipoles(
    b,
    a,
    dipoleReach,
    (j, i) => done(i, j),
    (j, i, cosine, sine) => {
      toHarmonics[i * width + b.rows[j]!]! += cosine
      toHarmonics[i * width + b.rows[j]! + 1]! += sine
      touchedRows.add(b.rows[j]!)
    },
  )
  dipoles(a, b, leadDipoleReach, done, (i, j, cosine, sine) => {
    toCharges[a.rows[i]! * b.charges + j]! += cosine
    toCharges[(a.rows[i]! + 1) * b.charges + j]! += sine
  })
  return { toCharges, toHarmonics, width, extras, components: componentsOf(b, touchedRows) }
}

/** First harmonics of one system and the charges of the other, up to so many radii, where nothing else is settled. */
function dipoles(
  from: ChargeSystem,
  { segments: others, images }: ChargeSystem,
  reach: number,
  settled: (i: number, j: number) => number,
  couple: (i: number, j: number, cosine: number, sine: number) => void,
): void {
  const { segments, orders } = from
  const means = new Float64Array(2)
  for (let i = 0; i < segments.count; i++) {
    if (orders[i] === 0) continue
    for (let j = 0; j < others.count; j++) {
      const done = settled(i, j)
      if (done === 3 || middleDistance(segments, i, others, j) > reach * segments.radius[i]!) continue
      means.fill(0)
      if (!(done & directSettled)) dipoleMeans(segments, i, others, j, 1, means)
      if (images && !(done & imageSettled)) dipoleMeans(segments, i, images, j, -1, means)
      couple(i, j, means[0]!, means[1]!)
    }
  }
}

/** Components of the system that hold these rows. */
function componentsOf({ components }: ChargeSystem, rows: ReadonlySet<number>): number[] {
  const found = new Set<number>()
  for (const row of rows) {
    let low = 0
    let high = components.length - 2
    while (low < high) {
      const middle = (low + high + 1) >> 1
      if (components[middle]! <= row) low = middle
      else high = middle - 1
    }
    found.add(low)
  }
  return [...found].sort((p, q) => p - q)
}

/** Length of segment i, m. */
export const segmentLength = (segments: Segments, i: number): number => segments.lines[lineStride * i + 6]!
