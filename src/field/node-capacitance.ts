/** The capacitance matrix of a wiring: fixed bodies and all its leads. */
import { leadNode } from '../geometry/nodes.js'
import { rowGram, rowProducts, solveLowerRows } from '../math/dense.js'
import { fourPiEpsilon } from './constants.js'
import { bareCross, crossHarmonics, noJoint } from './cross-system.js'
import { definiteFactor } from './definite.js'
import type { NodeCapacitance } from './field.js'
import type { FixedField } from './fixed-field.js'
import { followCharges, subtract } from './follow.js'
import type { LeadField, OpenField } from './lead-field.js'
import { localAnswer } from './local-field.js'
import { solveSkyline } from './skyline.js'

/** What two open leads do to each other; over K = 1/4πε0. */
export interface LeadPair {
  /** a × b: coefficients with all harmonics and the fixed charges eliminated */
  readonly schur: Float64Array
  /** change of a × a and of b × b: each has the other's harmonics near it. Absent: none */
  readonly onA?: Float64Array
  readonly onB?: Float64Array
}

/** P_qh P_hh⁻¹ P_hq with the harmonics of `lead` and the charges of another; `toCharges`: harmonics × charges. */
function answerOfLead(
  { system }: OpenField,
  toCharges: Float64Array,
  charges: number,
): Float64Array | undefined {
  if (toCharges.every((x) => x === 0)) return undefined
  const h = system.hh.count
  const rows = new Float64Array(charges * h)
  for (let r = 0; r < h; r++) for (let i = 0; i < charges; i++) rows[i * h + r] = toCharges[r * charges + i]!
  for (let i = 0; i < charges; i++) solveSkyline(system.hh, 0, h, rows, i * h)
  return rowGram(rows, charges, h)
}

function transposed(a: Float64Array, rows: number, columns: number): Float64Array {
  const out = new Float64Array(a.length)
  for (let r = 0; r < rows; r++) for (let c = 0; c < columns; c++) out[c * rows + r] = a[r * columns + c]!
  return out
}

/** between −= A Bᵀ over columns from … to of rows of width n: what two leads share is a few components, not all */
function takeProducts(
  between: Float64Array,
  a: Float64Array,
  na: number,
  b: Float64Array,
  nb: number,
  n: number,
  from: number,
  to: number,
): void {
  for (let i = 0; i < na; i++)
    for (let k = 0; k < nb; k++) {
      let sum = 0
      for (let h = from; h < to; h++) sum += a[i * n + h]! * b[k * n + h]!
      between[i * nb + k]! -= sum
    }
}

/** Takes off what both leads share through fixed charges and fixed harmonics. */
function shareFixed({ system }: FixedField, a: OpenField, b: OpenField, between: Float64Array): void {
  const na = a.system.segments.count
  const nb = b.system.segments.count
  subtract(between, rowProducts(a.solved, na, b.solved, nb, system.charges))
  for (const c of a.components)
    if (b.components.has(c))
      takeProducts(
        between,
        a.woken,
        na,
        b.woken,
        nb,
        system.hh.count,
        system.components[c]!,
        system.components[c + 1]!,
      )
  for (const [j, extra] of a.extras) {
    const other = b.extras.get(j)
    if (!other) continue
    const sizeA = extra.columns.length / na
    const sizeB = other.columns.length / nb
    for (let i = 0; i < na; i++)
      for (let k = 0; k < nb; k++)
        for (let h = 0; h < Math.min(sizeA, sizeB); h++)
          between[i * nb + k]! -= extra.columns[i * sizeA + h]! * other.columns[k * sizeB + h]!
  }
}

/**
 * Takes off what both leads share through the uneven charge of sheets. Where both wake it, each does so with parts of
 * its own: the mean of the two answers counts.
 */
function shareSheets(a: OpenField, b: OpenField, between: Float64Array): void {
  const nb = b.system.segments.count
  const ofA = localAnswer(a, b)
  const ofB = localAnswer(b, a)
  if (ofA) for (let k = 0; k < between.length; k++) between[k]! -= ofA[k]! / 2
  if (ofB)
    subtract(
      between,
      transposed(ofB, nb, between.length / nb).map((x) => x / 2),
    )
}

function makePair(fixed: FixedField, a: OpenField, b: OpenField): LeadPair {
  const na = a.system.segments.count
  const nb = b.system.segments.count
  const bare = bareCross(a.system.segments, b.system.segments, b.system.images, noJoint)
  const between = bare.charges
  const ab = crossHarmonics(a.system, b.system, bare, 0)
  // harmonics of a follow the charges of a and act on b, and the other way round
  followCharges(between, ab.toCharges, nb, a.response, na)
  const harmonicsOfB = transposed(ab.toHarmonics.subarray(0, na * ab.width), na, ab.width)
  const turned = transposed(between, na, nb)
  followCharges(turned, harmonicsOfB, na, b.response, nb)
  const schur = transposed(turned, nb, na)
  shareFixed(fixed, a, b, schur)
  shareSheets(a, b, schur)
  const onB = answerOfLead(a, ab.toCharges, nb)
  const onA = answerOfLead(b, harmonicsOfB, na)
  return { schur, ...(onA && { onA }), ...(onB && { onB }) }
}

/** The same pair seen from b. */
function turnedPair({ schur, onA, onB }: LeadPair, na: number, nb: number): LeadPair {
  return {
    schur: transposed(schur, na, nb),
    ...(onB && { onA: onB }),
    ...(onA && { onB: onA }),
  }
}

/** The pair of two leads, worked out once. */
export function leadPair(fixed: FixedField, a: OpenField, b: OpenField): LeadPair {
  const known = fixed.pairs.get(a)?.get(b)
  if (known) return known
  const pair = makePair(fixed, a, b)
  keepPair(fixed, a, b, pair)
  keepPair(fixed, b, a, turnedPair(pair, a.system.segments.count, b.system.segments.count))
  return pair
}

function keepPair({ pairs }: FixedField, a: OpenField, b: OpenField, pair: LeadPair): void {
  const kept = pairs.get(a) ?? new WeakMap<LeadField, LeadPair>()
  pairs.set(a, kept)
  kept.set(b, pair)
}

/** The lead blocks put together: coefficients between all lead charges, the fixed ones eliminated. */
function assembled(
  fixed: FixedField,
  leads: readonly OpenField[],
): { matrix: Float64Array; starts: number[]; count: number } {
  const starts: number[] = []
  let count = 0
  for (const lead of leads) {
    starts.push(count)
    count += lead.system.segments.count
  }
  const matrix = new Float64Array(count * count)
  const add = (rows: Float64Array, p: number, q: number, sign: number): void => {
    const n = leads[p]!.system.segments.count
    const m = leads[q]!.system.segments.count
    for (let i = 0; i < n; i++)
      for (let j = 0; j < m; j++)
        matrix[(starts[p]! + i) * count + starts[q]! + j]! += sign * rows[i * m + j]!
  }
  leads.forEach((a, p) => {
    add(a.schur, p, p, 1)
    for (let q = 0; q < p; q++) {
      const pair = leadPair(fixed, a, leads[q]!)
      add(pair.schur, p, q, 1)
      if (pair.onA) add(pair.onA, p, p, -1)
      if (pair.onB) add(pair.onB, q, q, -1)
    }
  })
  for (let i = 0; i < count; i++) for (let j = 0; j < i; j++) matrix[j * count + i] = matrix[i * count + j]!
  return { matrix, starts, count }
}

/** The whole reduced matrix of coefficients of potential, fixed charges first, over K: for tests and for study. */
export function reducedPotential(
  fixed: FixedField,
  leads: readonly OpenField[],
): { count: number; matrix: Float64Array } {
  const f = fixed.system.charges
  const block = assembled(fixed, leads)
  const count = f + block.count
  const matrix = new Float64Array(count * count)
  for (let i = 0; i < f; i++)
    for (let j = 0; j < f; j++) matrix[i * count + j] = fixed.system.potential[i * f + j]!
  leads.forEach((lead, p) => {
    for (let l = 0; l < lead.system.segments.count; l++)
      for (let j = 0; j < f; j++) {
        const row = f + block.starts[p]! + l
        matrix[row * count + j] = lead.toFixed[l * f + j]!
        matrix[j * count + row] = lead.toFixed[l * f + j]!
      }
  })
  // what the elimination of the fixed charges took off the leads is given back
  const solved = new Float64Array(block.count * f)
  leads.forEach((lead, p) => {
    solved.set(lead.solved, block.starts[p]! * f)
  })
  const taken = rowGram(solved, block.count, f)
  for (let i = 0; i < block.count; i++)
    for (let j = 0; j < block.count; j++) {
      const k = i * block.count + j
      matrix[(f + i) * count + f + j] = block.matrix[k]! + taken[k]!
    }
  return { count, matrix }
}

/** Rows of Gᵀ: for every fixed node and every lead, how it drives the lead charges once the fixed ones are gone. */
function leadDrives(
  fixed: FixedField,
  leads: readonly OpenField[],
  starts: readonly number[],
  count: number,
): Float64Array {
  const nodes = fixed.nodes.count
  const rows = new Float64Array((nodes + leads.length) * count)
  leads.forEach((lead, p) => {
    const n = lead.system.segments.count
    for (let v = 0; v < nodes; v++) {
      for (let l = 0; l < n; l++) rows[v * count + starts[p]! + l] = -lead.toNodes[v * n + l]!
    }
    rows.fill(1, (nodes + p) * count + starts[p]!, (nodes + p) * count + starts[p]! + n)
  })
  return rows
}

/**
 * Maxwell matrix of all nodes for these leads, in the order of the wiring; F. Only the lead charges are solved here:
 * with the fixed charges eliminated, S = P_ll − P_lf P_ff⁻¹ P_fl, C = C_fixed + Gᵀ S⁻¹ G.
 */
export function nodeCapacitance(fixed: FixedField, leads: readonly LeadField[]): NodeCapacitance {
  const open = leads.filter((lead) => lead.kind === 'open')
  const { matrix: schur, starts, count: charges } = assembled(fixed, open)
  const { factor } = definiteFactor(schur, charges)
  const drives = leadDrives(fixed, open, starts, charges)
  const rows = fixed.nodes.count + open.length
  solveLowerRows(factor, charges, drives, rows)
  const solved = rowGram(drives, rows, charges)
  // from fixed nodes and open leads to the order of the wiring
  const count = fixed.nodes.count + leads.length
  const matrix = new Float64Array(count * count)
  const place: number[] = Array.from({ length: fixed.nodes.count }, (_, v) => v)
  leads.forEach((lead, k) => {
    if (lead.kind === 'open') place.push(leadNode(fixed.nodes, k))
  })
  const f = fixed.nodes.count
  for (let i = 0; i < rows; i++) {
    const row = place[i]! * count
    for (let j = 0; j < rows; j++) {
      const base = i < f && j < f ? fixed.nodeMatrix[i * f + j]! : 0
      matrix[row + place[j]!] = fourPiEpsilon * (base + solved[i * rows + j]!)
    }
  }
  if (fixed.nodes.face !== undefined) floatFace(matrix, count, fixed.nodes.face, fixed.plate)
  // conduit counts as grounded, whatever the face does
  leads.forEach((lead, k) => {
    if (lead.kind === 'conduit') matrix[leadNode(fixed.nodes, k) * (count + 1)] = lead.capacitance
  })
  return { count, matrix }
}

/** The floating face takes the place of ground for all that sees it, and has its own capacitance to ground. */
function floatFace(matrix: Float64Array, count: number, face: number, plate: number): void {
  let total = 0
  for (let i = 0; i < count; i++) {
    let sum = 0
    for (let j = 0; j < count; j++) sum += matrix[i * count + j]!
    if (i === face) continue
    matrix[i * count + face] = -sum
    matrix[face * count + i] = -sum
    total += sum
  }
  matrix[face * count + face] = total + plate
}
