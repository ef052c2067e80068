/**
 * Coefficients of potential of one set of segments, with the patches of sheets behind them, over K = 1/4πε0 (1/m), with the harmonics of close pairs
 * eliminated. Below, q are total charges (one a segment, then one a patch) and h the harmonics (field/harmonics.ts):
 *
 *   P ← P_qq − P_qh P_hh⁻¹ P_hq
 *
 * P_hh is sparse: harmonics act on each other only between separate conductors (or legs of one, or images) that are
 * really close; its rows are ordered so that such neighbours stand together.
 */
import { lineStride } from '../geometry/closest-approach.js'
import { rectangleStride } from '../geometry/rectangles.js'
import type { Segments } from '../geometry/segments.js'
import { type Couplings, couplingRows } from './couplings.js'
import { eliminate } from './eliminate.js'
import {
  dipoleMeans,
  dipoleReach,
  feltOrder,
  harmonicSelf,
  mutualReach,
  neededOrder,
  ringBlock,
} from './harmonics.js'
import { lineMean, selfMean } from './line-mean.js'
import {
  continuous,
  directSettled,
  imageSettled,
  middleDistance,
  mirrored,
  type NearPair,
  nearPair,
} from './near-pairs.js'
import {
  addPatches,
  barePatchCross,
  couplePatches,
  type PatchSet,
  patchPotential,
  raiseOrders,
} from './patch-system.js'
import { mirroredPatches, noPatches, type Patches } from './patches.js'
import { selfRectangle } from './rectangle-mean.js'
import { bandOrder, type Skyline, skyline } from './skyline.js'

export interface ChargeSystem {
  readonly segments: Segments
  /** the patches of sheets */
  readonly sheets: PatchSet
  /** number of total charges: segments, then patches */
  readonly charges: number
  /** mirror images in a metal face; absent without one */
  readonly images?: Segments
  /** highest harmonic of each segment, and the row of its first in P_hh: rows c_1, s_1, c_2, … follow */
  readonly orders: Int32Array
  readonly rows: Int32Array
  readonly hh: Skyline
  /** first row of each component of P_hh, and the end */
  readonly components: Int32Array
  readonly couplings: Couplings
  /** what each charge has with itself alone */
  readonly alone: Float64Array
  /** the reduced matrix, charges × charges, both triangles */
  readonly potential: Float64Array
}

/** Coefficients of one pair, segment j moved by its shift. */
export function shiftedMean(a: Segments, b: Segments, pair: NearPair): number {
  if (!pair.shift) return lineMean(a.lines, pair.i, b.lines, pair.j, 0)
  const moved = b.lines.slice(lineStride * pair.j, lineStride * (pair.j + 1))
  for (let k = 0; k < 3; k++) moved[k]! += pair.shift[k]!
  return lineMean(a.lines, pair.i, moved, 0, 0)
}

/** P_qq before elimination, all pairs that are near, and which pairs (j ≤ i) need no dipole rule. */
function bareSystem(
  segments: Segments,
  images: Segments | undefined,
  charges: number,
): { potential: Float64Array; near: NearPair[]; settled: Uint8Array } {
  const { count, lines, radius, body, side } = segments
  const potential = new Float64Array(charges * charges)
  const near: NearPair[] = []
  const settled = new Uint8Array(count * count)
  const continued = (i: number, j: number): number =>
    i === j ? selfMean(lines[lineStride * i + 6]!, radius[i]!) : lineMean(lines, i, lines, j, radius[i]! ** 2)
  for (let i = 0; i < count; i++) {
    for (let j = 0; j <= i; j++) {
      if (side[i] !== side[j]) continue
      const one = i === j || (body[i] === body[j] && continuous(segments, i, j))
      const pair = one ? undefined : nearPair(segments, i, segments, j, false)
      if (pair && !pair.entangled) near.push(pair)
      if (one || pair) settled[i * count + j]! |= directSettled
      let mean = one
        ? continued(i, j)
        : pair
          ? shiftedMean(segments, segments, pair)
          : lineMean(lines, i, lines, j, 0)
      if (images) {
        const image = nearPair(segments, i, images, j, true)
        if (image) near.push(image)
        if (image) settled[i * count + j]! |= imageSettled
        mean -= lineMean(lines, i, images.lines, j, 0)
      }
      potential[i * charges + j] = mean
      potential[j * charges + i] = mean
    }
  }
  return { potential, near, settled }
}

/** What each segment and each patch has with itself alone, without images. */
function aloneOf({ lines, radius }: Segments, { rectangles, count }: Patches): Float64Array {
  const segments = Array.from(radius, (a, i) => selfMean(lines[lineStride * i + 6]!, a))
  const patches = Array.from({ length: count }, (_, i) => {
    const q = i * rectangleStride
    return selfRectangle(rectangles[q + 9]!, rectangles[q + 10]!)
  })
  return Float64Array.from([...segments, ...patches])
}

/** Highest harmonic of every segment: what its near pairs need, at least `least`. */
function segmentOrders(
  segments: Segments,
  near: readonly NearPair[],
  least: Int32Array,
  most: number,
): Int32Array {
  const orders = least.slice()
  const { radius } = segments
  for (const { i, j, axes } of near) {
    orders[i] = Math.max(orders[i]!, neededOrder(radius[i]!, radius[j]!, axes, most))
    orders[j] = Math.max(orders[j]!, neededOrder(radius[j]!, radius[i]!, axes, most))
  }
  return orders
}

const actsMutually = ({ axes }: NearPair, a: number, b: number): boolean =>
  axes < mutualReach * Math.sqrt(a * b)

/** Rows of P_hh for every segment, the components, and the empty matrix. */
function layOut(
  segments: Segments,
  near: readonly NearPair[],
  orders: Int32Array,
): Pick<ChargeSystem, 'rows' | 'hh' | 'components'> {
  const neighbours: number[][] = Array.from({ length: segments.count }, () => [])
  for (const pair of near) {
    const { i, j } = pair
    if (i === j || !actsMutually(pair, segments.radius[i]!, segments.radius[j]!)) continue
    neighbours[i]!.push(j)
    neighbours[j]!.push(i)
  }
  const { order, component } = bandOrder(neighbours)
  const rows = new Int32Array(segments.count)
  const components: number[] = []
  let next = 0
  order.forEach((segment, k) => {
    if (k === 0 || component[k] !== component[k - 1]) components.push(next)
    rows[segment] = next
    next += 2 * orders[segment]!
  })
  components.push(next)
  // every row begins where the lowest neighbour of its segment begins
  const first = new Int32Array(next)
  for (let i = 0; i < segments.count; i++) {
    const lowest = neighbours[i]!.reduce((low, j) => Math.min(low, rows[j]!), rows[i]!)
    first.fill(lowest, rows[i]!, rows[i]! + 2 * orders[i]!)
  }
  return { rows, hh: skyline(first), components: Int32Array.from(components) }
}

const block = new Float64Array(64 * 64)

/** The system of these segments and patches. `least`: harmonics every segment has anyway; `most`: the highest any may get. */
export function chargeSystem(
  segments: Segments,
  plane: boolean,
  least: Int32Array,
  most: number,
  patches: Patches = noPatches,
): ChargeSystem {
  const images = plane ? mirrored(segments) : undefined
  const sheets: PatchSet = { patches, ...(plane && { images: mirroredPatches(patches) }) }
  const charges = segments.count + patches.count
  const { potential, near, settled } = bareSystem(segments, images, charges)
  const cross = barePatchCross(segments, sheets)
  addPatches(potential, segments.count, patchPotential(sheets), cross)
  const orders = segmentOrders(segments, near, least, most)
  raiseOrders(orders, segments, cross, most)
  const { rows, hh, components } = layOut(segments, near, orders)
  const { add: couple, finished } = couplingRows(hh.count, charges)
  for (let i = 0; i < segments.count; i++) {
    for (let m = 1; m <= orders[i]!; m++) {
      const self = harmonicSelf(m, segments.lines[lineStride * i + 6]!)
      for (const r of [rows[i]! + 2 * m - 2, rows[i]! + 2 * m - 1]) hh.values[hh.base[r]! + r] = self
    }
  }
  for (const pair of near) {
    const { i, j, axes, image, shift } = pair
    const other = image && images ? images : segments
    const sign = image ? -1 : 1
    const mi = feltOrder(segments.radius[i]!, axes, orders[i]!)
    const mj = feltOrder(segments.radius[j]!, axes, orders[j]!)
    const mutual = i === j || actsMutually(pair, segments.radius[i]!, segments.radius[j]!)
    if (mutual) {
      const wide = 2 * mj + 1
      ringBlock(segments, i, mi, other, j, mj, shift, block)
      for (let u = 1; u <= 2 * mi; u++) couple(rows[i]! + u - 1, j, sign * block[u * wide]!)
      if (i !== j) for (let v = 1; v <= 2 * mj; v++) couple(rows[j]! + v - 1, i, sign * block[v]!)
      addMutual(hh, rows[i]!, mi, rows[j]!, mj, sign)
      continue
    }
    if (mi > 0) {
      ringBlock(segments, i, mi, other, j, 0, shift, block)
      for (let u = 1; u <= 2 * mi; u++) couple(rows[i]! + u - 1, j, sign * block[u]!)
    }
    if (mj > 0) {
      ringBlock(segments, i, 0, other, j, mj, shift, block)
      for (let v = 1; v <= 2 * mj; v++) couple(rows[j]! + v - 1, i, sign * block[v]!)
    }
  }
  coupleDipoles(segments, images, orders, settled, (i, j, cosine, sine) => {
    couple(rows[i]!, j, cosine)
    couple(rows[i]! + 1, j, sine)
  })
  couplePatches(segments, orders, sheets, cross, dipoleReach, (i, h, j, value) => {
    couple(rows[i]! + h, segments.count + j, value)
  })
  const couplings = finished()
  const system = {
    segments,
    sheets,
    charges,
    alone: aloneOf(segments, patches),
    ...(images && { images }),
    orders,
    rows,
    hh,
    components,
    couplings,
    potential,
  }
  eliminate(system)
  return system
}

/** The first harmonics of all segments and the charges of others further away. */
function coupleDipoles(
  segments: Segments,
  images: Segments | undefined,
  orders: Int32Array,
  settled: Uint8Array,
  couple: (i: number, j: number, cosine: number, sine: number) => void,
): void {
  const { count, side, radius } = segments
  const means = new Float64Array(2)
  for (let i = 0; i < count; i++) {
    if (orders[i] === 0) continue
    for (let j = 0; j < count; j++) {
      const done = settled[j <= i ? i * count + j : j * count + i]!
      if (done === 3 || side[i] !== side[j]) continue
      if (middleDistance(segments, i, segments, j) > dipoleReach * radius[i]!) continue
      means.fill(0)
      if (!(done & directSettled)) dipoleMeans(segments, i, segments, j, 1, means)
      if (images && !(done & imageSettled)) dipoleMeans(segments, i, images, j, -1, means)
      couple(i, j, means[0]!, means[1]!)
    }
  }
}

/** Adds the harmonic part of `block` (rows of i, columns of j) to the lower triangle of P_hh. */
function addMutual(
  { base, values }: Skyline,
  ri: number,
  mi: number,
  rj: number,
  mj: number,
  sign: number,
): void {
  const wide = 2 * mj + 1
  for (let u = 1; u <= 2 * mi; u++) {
    for (let v = 1; v <= 2 * mj; v++) {
      const r = ri + u - 1
      const c = rj + v - 1
      if (ri === rj && c > r) continue
      values[base[Math.max(r, c)]! + Math.min(r, c)]! += sign * block[u * wide + v]!
    }
  }
}
