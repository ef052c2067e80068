/** Which potentials are on the screen: the fields of the condition, at the instant chosen. */
import type { BodyRef } from '../geometry/runs.js'
import type { Inspection } from '../inspection.js'
import { brokenField } from '../network/broken.js'
import { instantPotential, type NodeMix } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import { openTube } from './conditions.js'
import type { State } from './state.js'

type Shown = Pick<State, 'condition' | 'inspection' | 'instant' | 'open'>

/** Lit fields where they are solved, the snapshot of the break that is shown, else the nameplate condition. */
export function fieldsShown(
  state: Pick<State, 'condition' | 'inspection' | 'open'>,
): readonly PotentialField[] {
  const { condition, inspection } = state
  if (condition === 'broken') return breakShown(state)
  return condition === 'lit' && inspection.lit ? inspection.lit : inspection.nameplate
}

/** the break last shown of each inspection: its fields are read for every cell of the map */
const breaks = new WeakMap<Inspection, BreakShown>()
interface BreakShown {
  /** `open` of the state it was made for */
  readonly asked: string | undefined
  readonly fields: readonly PotentialField[]
}

function breakShown(state: Pick<State, 'inspection' | 'open'>): readonly PotentialField[] {
  const { inspection, open: asked } = state
  const known = breaks.get(inspection)
  if (known && known.asked === asked) return known.fields
  const { context, probe, leads, wiring, nameplate } = inspection
  const tubes = context.bodies.filter((body) => body.kind === 'tube')
  const open = openTube(state)
  const fields =
    open === undefined
      ? nameplate
      : brokenField(context.layout, wiring, tubes, probe.nodes, leads.length, open)
  breaks.set(inspection, { asked, fields })
  return fields
}

/** The fields on the screen and the phase at which they are read: taken once for all cells of a map. */
export interface InstantShown {
  readonly fields: readonly PotentialField[]
  /** radians: the instant counts from the peak of terminal 1 of the first supply that has a field */
  readonly phase: number
}

export function instantShown(state: Shown): InstantShown {
  const fields = fieldsShown(state)
  const zero = fields[0] ? phaseOfTerminal(state.inspection, fields[0]) : 0
  return { fields, phase: (state.instant * Math.PI) / 6 - zero }
}

/** Does the part belong to a circuit that is not lit? */
export const isUnlit = ({ inspection }: Pick<State, 'inspection'>, ref: BodyRef): boolean =>
  ref.kind === 'fixed'
    ? inspection.unlitBodies.has(ref.index)
    : ref.kind === 'lead' && inspection.unlitBodies.has(inspection.context.bodies.length + ref.index)

/**
 * What to read out of these parts: as on the screen, but on paper where a circuit of theirs does not light. Its supply
 * is on all the same, so 0 V would be a dangerous answer.
 */
export function instantOf(
  state: Shown,
  refs: readonly BodyRef[],
): InstantShown & { readonly onPaper: boolean } {
  const onPaper = state.condition === 'lit' && refs.some((ref) => isUnlit(state, ref))
  return onPaper
    ? { fields: state.inspection.nameplate, phase: (state.instant * Math.PI) / 6, onPaper }
    : { ...instantShown(state), onPaper }
}

/** the first lead of a circuit hangs on terminal 1 of its supply */
function phaseOfTerminal({ wiring, places, probe }: Inspection, field: PotentialField): number {
  if (field.frequency === 0) return 0
  const circuit = wiring.circuits.findIndex(({ supply }) => supply === field.supply)
  const node = probe.nodes.count + places.findIndex((place) => place.circuit === circuit)
  return Math.atan2(field.im[node] ?? 0, field.re[node] ?? 0)
}

/** the highest potential of the sign at any instant, V peak: what the scale must hold */
export function peakPotential(state: Shown): number {
  const fields = fieldsShown(state)
  let peak = 0
  for (let i = 0; i < (fields[0]?.re.length ?? 0); i++) {
    let sum = 0
    for (const { re, im } of fields) sum += Math.hypot(re[i]!, im[i]!)
    peak = Math.max(peak, sum)
  }
  return peak * Math.SQRT2
}

/** V at the instant shown */
export const instantAt = ({ fields, phase }: InstantShown, mix: NodeMix): number =>
  instantPotential(fields, mix, phase)
