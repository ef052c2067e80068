/** One lead on its route, solved against the fixed bodies: what is worth keeping between edits. */
import type { LeadBody } from '../geometry/conductors.js'
import { type CutRules, crossingWindows, cutPlaces, type Segments, segmentsAt } from '../geometry/segments.js'
import { rowGram, rowProducts, solveLowerRows } from '../math/dense.js'
import { type ChargeSystem, chargeSystem } from './charge-system.js'
import { conduitCapacitance } from './conduit.js'
import { denseColumns } from './couplings.js'
import {
  bareCross,
  type CrossHarmonics,
  crossHarmonics,
  crossOrders,
  type Extra,
  type Joint,
  segmentLength,
} from './cross-system.js'
import type { FixedField } from './fixed-field.js'
import { followCharges, subtract } from './follow.js'
import { harmonicSelf, leadDipoleReach } from './harmonics.js'
import { type LocalField, localField } from './local-field.js'
import { middleDistance } from './near-pairs.js'
import { barePatchCross, couplePatches, raiseOrders } from './patch-system.js'
import { solveSkyline, solveSkylineTransposed } from './skyline.js'

/** In metal conduit: only a capacitance to ground. F */
export interface ConduitField {
  readonly kind: 'conduit'
  readonly lead: LeadBody
  readonly capacitance: number
}

/** In the open. Matrices over K = 1/4πε0; l counts the lead's segments, f the fixed ones. */
export interface OpenField {
  readonly kind: 'open'
  readonly lead: LeadBody
  readonly system: ChargeSystem
  /** P_hh⁻¹ P_hq of the lead's own harmonics, a row for each charge */
  readonly response: Float64Array
  /** reduced coefficients to the fixed charges, l × f */
  readonly toFixed: Float64Array
  /** L⁻¹ of those rows */
  readonly solved: Float64Array
  /** nodes × l: Wᵀ P_ff⁻¹ P_fl */
  readonly toNodes: Float64Array
  /** l × l: own coefficients with all harmonics and the fixed charges eliminated */
  readonly schur: Float64Array
  /** L_h⁻¹ P_hl of the fixed harmonics: l × h, zero outside these components */
  readonly woken: Float64Array
  readonly components: ReadonlySet<number>
  /** uneven charge of sheets that only this lead wakes */
  readonly local?: LocalField
  /** the same of harmonics that only leads wake: l × 2 (to − from + 1) */
  readonly extras: ReadonlyMap<number, Extra & { readonly columns: Float64Array }>
}
export type LeadField = ConduitField | OpenField

/** harmonics a lead has anyway, ready for another lead that comes to lie on it */
const leadHarmonics = 2

/** The lead cut into segments, finer where it crosses glass or bars closely. */
function cutLead(fixed: FixedField, lead: LeadBody): Segments {
  const { options, plane } = fixed
  const rules: CutRules = { usual: options.tubeSegment, least: options.least, plane }
  const usual = options.leadSegment * lead.equivalentRadius
  const cut = (windows: Parameters<typeof cutPlaces>[4]): Segments =>
    segmentsAt([lead], [cutPlaces(lead.line, lead.equivalentRadius, usual, rules, windows)], rules)
  const coarse = cut([])
  const windows = crossingWindows(coarse, fixed.system.segments, 1, rules)[0]!
  return windows.length > 0 ? cut(windows) : coarse
}

/** Path length from the lead's start at which it is joined to each tube it names, with the end of that tube. */
function jointsOf(fixed: FixedField, lead: LeadBody): { body: number; leadAt: number; tubeAt: number }[] {
  return lead.between.flatMap((name, end) => {
    const dot = name.lastIndexOf('.')
    const body = fixed.bodies.findIndex((b) => b.kind === 'tube' && b.name === name.slice(0, dot))
    if (body < 0) return []
    const tubeAt = name.slice(dot + 1) === 'a' ? 0 : fixed.bodies[body]!.line.length
    return [{ body, leadAt: end === 0 ? 0 : lead.line.length, tubeAt }]
  })
}

/** A lead continues the tube it is joined to where the path through the joint is under 3 × the axis distance. */
function jointRule(fixed: FixedField, lead: LeadBody, segments: Segments): Joint {
  const joints = jointsOf(fixed, lead)
  const glass = fixed.system.segments
  return (i, j) => {
    for (const { body, leadAt, tubeAt } of joints) {
      if (glass.body[j] !== body) continue
      const path = Math.abs(segments.at[i]! - leadAt) + Math.abs(glass.at[j]! - tubeAt)
      if (path < 3 * middleDistance(segments, i, glass, j))
        return Math.max(segments.radius[i]!, glass.radius[j]!) ** 2
      // right at the joint the two meet, however the lead turns away
      if (path < 3 * (segments.outer[i]! + glass.outer[j]!))
        return Math.max(segments.radius[i]!, glass.radius[j]!) ** 2
    }
    return 0
  }
}

/** P_hh⁻¹ P_hq of a system, charge by charge: count × harmonics. */
function ownResponse(system: ChargeSystem): Float64Array {
  const { components, hh, segments } = system
  const out = new Float64Array(segments.count * hh.count)
  for (let c = 0; c + 1 < components.length; c++) {
    const from = components[c]!
    const size = components[c + 1]! - from
    const { touched, columns } = denseColumns(system.couplings, from, from + size)
    touched.forEach((i, k) => {
      solveSkyline(hh, from, from + size, columns, k * size)
      solveSkylineTransposed(hh, from, from + size, columns, k * size)
      out.set(columns.subarray(k * size, (k + 1) * size), i * hh.count + from)
    })
  }
  return out
}

/**
 * The fixed harmonics answer the lead: turns the coefficients to them (l rows) into L_h⁻¹ P_hl and takes
 * P_fh P_hh⁻¹ P_hl off the coefficients to the fixed charges.
 */
function wakeFixed(
  { system }: FixedField,
  cross: CrossHarmonics,
  rows: Float64Array,
  l: number,
  toFixed: Float64Array,
): Float64Array {
  const { hh, components, couplings, charges } = system
  const half = new Float64Array(l * hh.count)
  for (let i = 0; i < l; i++)
    half.set(rows.subarray(i * cross.width, i * cross.width + hh.count), i * hh.count)
  // charges in rows here, so that the innermost loop runs along the lead
  const change = new Float64Array(charges * l)
  const full = new Float64Array(l)
  for (const c of cross.components) {
    const from = components[c]!
    const to = components[c + 1]!
    const answer = new Float64Array(l * (to - from))
    for (let i = 0; i < l; i++) {
      const place = i * hh.count + from
      solveSkyline(hh, from, to, half, place)
      answer.set(half.subarray(place, place + to - from), i * (to - from))
      solveSkylineTransposed(hh, from, to, answer, i * (to - from))
    }
    for (let r = from; r < to; r++) {
      for (let i = 0; i < l; i++) full[i] = answer[i * (to - from) + r - from]!
      for (let k = couplings.starts[r]!; k < couplings.starts[r + 1]!; k++) {
        const value = couplings.values[k]!
        const row = couplings.charges[k]! * l
        for (let i = 0; i < l; i++) change[row + i]! += value * full[i]!
      }
    }
  }
  for (let i = 0; i < l; i++)
    for (let j = 0; j < charges; j++) toFixed[i * charges + j]! -= change[j * l + i]!
  return half
}

/** Coefficients to the harmonics that only this lead wakes, over the roots of their self terms. */
function extraColumns(
  { system }: FixedField,
  cross: CrossHarmonics,
  rows: Float64Array,
  l: number,
): OpenField['extras'] {
  const extras = new Map<number, Extra & { columns: Float64Array }>()
  for (const [j, extra] of cross.extras) {
    const size = 2 * (extra.to - extra.from + 1)
    const columns = new Float64Array(l * size)
    for (let k = 0; k < size; k++) {
      const m = extra.from + (k >> 1)
      const scale = 1 / Math.sqrt(harmonicSelf(m, segmentLength(system.segments, j)))
      for (let i = 0; i < l; i++) columns[i * size + k] = scale * rows[i * cross.width + extra.column + k]!
    }
    extras.set(j, { ...extra, columns })
  }
  return extras
}

/** Rows of two matrices one behind the other. */
function sideBySide(a: Float64Array, b: Float64Array, rows: number): Float64Array {
  if (b.length === 0) return a
  const [n, m] = [a.length / rows, b.length / rows]
  const out = new Float64Array(a.length + b.length)
  for (let i = 0; i < rows; i++) {
    out.set(a.subarray(i * n, (i + 1) * n), i * (n + m))
    out.set(b.subarray(i * m, (i + 1) * m), i * (n + m) + n)
  }
  return out
}

/** The lead alone against glass, bars, sheets and face. Its own harmonics follow its own charges. */
export function leadField(fixed: FixedField, lead: LeadBody): LeadField {
  if (lead.conduit === 'metal') {
    return { kind: 'conduit', lead, capacitance: conduitCapacitance(lead) * lead.line.length }
  }
  const { options, system: glass } = fixed
  const segments = cutLead(fixed, lead)
  const bare = bareCross(segments, glass.segments, glass.images, jointRule(fixed, lead, segments))
  const patched = barePatchCross(segments, glass.sheets)
  const toFixed = sideBySide(bare.charges, patched.charges, segments.count)
  const least = new Int32Array(segments.count).fill(Math.min(leadHarmonics, options.harmonics))
  const orders = crossOrders(segments, glass.segments, bare.near, least, options.harmonics)
  raiseOrders(orders, segments, patched, options.harmonics)
  const system = chargeSystem(segments, fixed.plane, orders, options.harmonics)
  const response = ownResponse(system)
  const cross = crossHarmonics(system, glass, bare, options.harmonics)
  const l = segments.count
  const f = glass.charges
  couplePatches(segments, system.orders, glass.sheets, patched, leadDipoleReach, (i, h, j, value) => {
    cross.toCharges[(system.rows[i]! + h) * f + glass.segments.count + j]! += value
  })
  followCharges(toFixed, cross.toCharges, f, response, l)
  const rows = cross.toHarmonics.subarray(0, l * cross.width)
  followCharges(rows, cross.toHarmonics.subarray(l * cross.width), cross.width, response, l)
  const woken = wakeFixed(fixed, cross, rows, l, toFixed)
  const extras = extraColumns(fixed, cross, rows, l)
  const solved = toFixed.slice()
  solveLowerRows(fixed.factor, f, solved, l)
  const schur = system.potential.slice()
  subtract(schur, rowGram(solved, l, f))
  subtract(schur, rowGram(woken, l, glass.hh.count))
  for (const { columns } of extras.values()) subtract(schur, rowGram(columns, l, columns.length / l))
  const toNodes = rowProducts(fixed.solvedWeights, fixed.nodes.count, solved, l, f)
  const local = localField(fixed, system, response, solved)
  if (local) {
    subtract(schur, rowGram(local.solved, l, local.count))
    subtract(toNodes, rowProducts(local.toNodes, fixed.nodes.count, local.solved, l, local.count))
  }
  return {
    kind: 'open',
    lead,
    system,
    response,
    toFixed,
    solved,
    toNodes,
    schur,
    woken,
    components: new Set(cross.components),
    extras,
    ...(local && { local }),
  }
}
