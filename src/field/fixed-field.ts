/** What does not depend on the wiring: glass, bars and the face, with their coefficients factored. */
import type { FixedBody, SheetBody } from '../geometry/conductors.js'
import type { FixedNodes } from '../geometry/nodes.js'
import { type CutRules, crossingWindows, cutPlaces, type Segments, segmentsAt } from '../geometry/segments.js'
import type { Face } from '../layout/layout.js'
import { rowGram, solveLowerRows } from '../math/dense.js'
import { type ChargeSystem, chargeSystem } from './charge-system.js'
import { definiteFactor } from './definite.js'
import { plateCapacitance } from './face-plate.js'
import type { LeadField } from './lead-field.js'
import type { LeadPair } from './node-capacitance.js'
import { sources } from './patch-sources.js'
import { patchesOf } from './patches.js'

/** How finely the field is resolved. */
export interface FieldOptions {
  /** length of segments in equivalent radii: of tubes, and of leads */
  readonly tubeSegment: number
  readonly leadSegment: number
  /** least length of a segment, radii */
  readonly least: number
  /** most harmonics around a segment */
  readonly harmonics: number
  /** size of a sheet's patch over the distance to the nearest conductor, and most patches of all sheets */
  readonly patch: number
  readonly mostPatches: number
}

export const usualField: FieldOptions = {
  tubeSegment: 5,
  leadSegment: 48,
  least: 1.1,
  harmonics: 6,
  patch: 0.8,
  mostPatches: 800,
}
/** A quarter of the usual lengths and twice the harmonics: slow, to see how far the usual choice is off. */
export const fineField: FieldOptions = {
  tubeSegment: 1.25,
  leadSegment: 12,
  least: 0.8,
  harmonics: 12,
  patch: 0.4,
  mostPatches: 2000,
}

export interface FixedField {
  readonly bodies: readonly FixedBody[]
  readonly nodes: FixedNodes
  readonly face: Face
  readonly options: FieldOptions
  /** there is metal at z = 0, grounded or floating */
  readonly plane: boolean
  readonly system: ChargeSystem
  /** Cholesky factor L of the reduced coefficients (lower triangle) */
  readonly factor: Float64Array
  /** node weights W, node by node: row n holds the share of node n in the potential of each segment */
  readonly weights: Float64Array
  /** L⁻¹ applied to the rows of W */
  readonly solvedWeights: Float64Array
  /** Wᵀ P⁻¹ W over K = 1/4πε0 */
  readonly nodeMatrix: Float64Array
  /** F; of the floating face's sheet to the surroundings, otherwise 0 */
  readonly plate: number
  /** names of bodies drawn so far into others, or so sharply bent back on themselves, that the self terms there were raised */
  readonly strained: readonly string[]
  /** what was worked out between two leads before */
  readonly pairs: WeakMap<LeadField, WeakMap<LeadField, LeadPair>>
}

/** beyond this many segments their lengths grow, since time grows with the cube */
const comfortable = 1600

/** Usual segment length of a fixed body, m. Thin bars are cut as coarsely as the thickest tube. */
function usualLength(body: FixedBody, thickest: number, options: FieldOptions): number {
  const own = options.tubeSegment * body.equivalentRadius
  if (body.kind === 'tube') return own
  return Math.max(own, Math.min(options.tubeSegment * thickest, options.leadSegment * body.equivalentRadius))
}

/** Cuts all fixed bodies: once coarsely to find the steep crossings, then with those refined. */
function cutFixed(
  bodies: readonly FixedBody[],
  nodes: FixedNodes,
  rules: CutRules,
  options: FieldOptions,
): Segments {
  const thickest = bodies.reduce((a, b) => (b.kind === 'tube' ? Math.max(a, b.equivalentRadius) : a), 0)
  const usual = bodies.map((body) => usualLength(body, thickest, options))
  const expected = bodies.reduce((sum, body, b) => sum + body.line.length / usual[b]!, 0)
  const stretch = Math.max(1, expected / comfortable)
  // no tube may have fewer segments than nodes, or a node might hold no charge
  let tube = 0
  const lengths = bodies.map((body, b) => {
    const pieces = body.kind === 'tube' ? nodes.tubes[tube++]!.at.length : 1
    return Math.min(stretch * usual[b]!, body.line.length / pieces)
  })
  const cut = (windows: (b: number) => Parameters<typeof cutPlaces>[4]): Segments =>
    segmentsAt(
      bodies,
      bodies.map((body, b) => cutPlaces(body.line, body.equivalentRadius, lengths[b]!, rules, windows(b))),
      rules,
    )
  const coarse = cut(() => [])
  const windows = crossingWindows(coarse, coarse, bodies.length, rules)
  return windows.some((list) => list.length > 0) ? cut((b) => windows[b]!) : coarse
}

/**
 * Node weights (rows: nodes, columns: charges): hats of a tube's nodes at the middle of each segment; bars and
 * patches of sheets 1.
 */
function nodeWeights(bodies: readonly FixedBody[], nodes: FixedNodes, system: ChargeSystem): Float64Array {
  const { segments, charges } = system
  const { patches } = system.sheets
  const weights = new Float64Array(nodes.count * charges)
  for (let k = 0; k < patches.count; k++)
    weights[(nodes.firstSheet + patches.sheet[k]!) * charges + segments.count + k] = 1
  const place = new Int32Array(bodies.length)
  let tubes = 0
  let bars = 0
  bodies.forEach((body, b) => {
    place[b] = body.kind === 'tube' ? tubes++ : bars++
  })
  for (let i = 0; i < segments.count; i++) {
    const b = segments.body[i]!
    if (bodies[b]!.kind === 'bar') {
      weights[(nodes.firstBar + place[b]!) * charges + i] = 1
      continue
    }
    const { first, at } = nodes.tubes[place[b]!]!
    let k = 0
    while (k + 2 < at.length && at[k + 1]! <= segments.at[i]!) k++
    const share = Math.min(1, Math.max(0, (segments.at[i]! - at[k]!) / (at[k + 1]! - at[k]!)))
    weights[(first + k) * charges + i] = 1 - share
    weights[(first + k + 1) * charges + i] = share
  }
  return weights
}

/** Size of the face, or of everything fixed where the layout does not say. */
function faceSize(face: Face, segments: Segments): readonly [number, number] {
  if (face.size) return face.size
  const low = [Infinity, Infinity]
  const high = [-Infinity, -Infinity]
  for (let i = 0; i < segments.count; i++) {
    for (const k of [0, 1]) {
      low[k] = Math.min(low[k]!, segments.lines[7 * i + k]!)
      high[k] = Math.max(high[k]!, segments.lines[7 * i + k]!)
    }
  }
  return [Math.max(0.01, high[0]! - low[0]!), Math.max(0.01, high[1]! - low[1]!)]
}

/**
 * Prepares glass, bars, sheets and face. A metal face is an infinite plane z = 0 seen through mirror images; conductors on
 * opposite sides of it do not see each other. A floating one is the same plane at an unknown potential: every
 * conductor has its capacitance to the plane, and the plane that of a thin sheet of the face's size to the
 * surroundings. So conductors near the rim of a floating face, or wider than it, are shielded too well.
 */
export function prepareField(
  bodies: readonly FixedBody[],
  nodes: FixedNodes,
  face: Face,
  options: FieldOptions = usualField,
  sheets: readonly SheetBody[] = [],
): FixedField {
  const plane = face.metal !== 'none'
  const rules: CutRules = { usual: options.tubeSegment, least: options.least, plane }
  const segments = cutFixed(bodies, nodes, rules, options)
  const least = new Int32Array(segments.count).fill(1)
  const patches = patchesOf(sheets, sources(segments, sheets, plane), {
    size: options.patch,
    stretch: 3,
    most: options.mostPatches,
    plane,
  })
  const system = chargeSystem(segments, plane, least, options.harmonics, patches)
  const count = system.charges
  const { factor, raised } = definiteFactor(system.potential, count)
  const nameOf = (i: number): string =>
    i < segments.count ? bodies[segments.body[i]!]!.name : sheets[patches.sheet[i - segments.count]!]!.name
  const strained = [...new Set(raised.map(nameOf))]
  const weights = nodeWeights(bodies, nodes, system)
  const solvedWeights = weights.slice()
  solveLowerRows(factor, count, solvedWeights, nodes.count)
  const nodeMatrix = rowGram(solvedWeights, nodes.count, count)
  const plate = face.metal === 'floating' ? plateCapacitance(...faceSize(face, segments)) : 0
  return {
    bodies,
    nodes,
    face,
    options,
    plane,
    system,
    factor,
    weights,
    solvedWeights,
    nodeMatrix,
    plate,
    strained,
    pairs: new WeakMap(),
  }
}
