/**
 * The whole path from a layout and a wiring to the answers. Start reading here.
 *
 *   prepare(layout)                    what the wiring does not move: bodies, nodes, close runs       once per file
 *   solver(prepared)                   capacitances of the glass, kept; gives solve(wiring)           once per file
 *   inspection(prepared, wiring)       potentials as shared out on paper, and what follows            at once
 *   inspection(prepared, wiring, s)    the same with the lit solution s = solve(wiring)               per edit
 */
import type { LeadBody } from './geometry/conductors.js'
import type { Wiring } from './layout/layout.js'
import { supplyOf } from './layout/parts.js'
import { brokenStrings } from './network/broken.js'
import { nameplateField } from './network/nameplate.js'
import { type Probe, probe } from './network/potentials.js'
import type { PotentialField } from './network/solution.js'
import { type Prepared, placedLead, runsOfLeads } from './prepared.js'
import { cautions } from './rules/cautions.js'
import { circuitFindings } from './rules/circuits.js'
import type { Caution, CircuitFinding, Condition, FloatingFinding, PairFinding } from './rules/findings.js'
import { type PairContext, pairFindings } from './rules/pairs.js'
import type { Solved } from './solver.js'
import { type CircuitLead, circuitLeads } from './wiring/leads.js'

export { type Prepared, prepare, preparedAgain } from './prepared.js'
export { networkSolver, type Solved, type SolvedNetwork, solver } from './solver.js'

/** Everything that is known of a wiring. Without a solution only the nameplate condition is. */
export interface Inspection {
  readonly wiring: Wiring
  readonly leads: readonly LeadBody[]
  readonly places: readonly CircuitLead[]
  readonly probe: Probe
  readonly nameplate: readonly PotentialField[]
  /** lit fields of the nominal law, of the circuits that burn */
  readonly lit?: readonly PotentialField[]
  /** bodies (fixed, then leads) that belong to a circuit that is not lit */
  readonly unlitBodies: ReadonlySet<number>
  readonly context: PairContext
  readonly solved: boolean
  readonly circuits: readonly CircuitFinding[]
  /** worst first */
  readonly pairs: readonly PairFinding[]
  readonly floating: readonly FloatingFinding[]
  readonly cautions: readonly Caution[]
}

/** Findings on a wiring, judged by a condition, with the lit solution where it is known. */
export function inspection(
  prepared: Prepared,
  wiring: Wiring,
  solved?: Solved,
  condition: Condition = 'lit',
): Inspection {
  const { layout, bodies, tubes, nodes } = prepared
  const places = circuitLeads(wiring)
  const placed = places.map(({ between }) => placedLead(prepared, between))
  const leads = placed.map(({ body }) => body)
  const context = pairContext(prepared, wiring, places, leads, solved, condition)
  const runs = runsOfLeads(prepared, placed)
  const { rules } = prepared
  const circuits = circuitFindings({
    layout,
    ruleSets: rules.sets,
    wiring,
    bodies,
    leads,
    places,
    probe: context.probe,
    nameplate: context.nameplate,
    ...(solved && {
      outcomes: solved.outcomes,
      fields: solved.lit.nominal,
      stray: solved.stray,
      measured: solved.measured,
    }),
  })
  const pairs = pairFindings(context, [...prepared.runs, ...runs])
  const floating = solved?.floating ?? []
  return {
    wiring,
    leads,
    places,
    probe: context.probe,
    nameplate: context.nameplate,
    ...(solved && { lit: solved.lit.nominal }),
    unlitBodies: unlitBodies(context, tubes.length, nodes.bars),
    context,
    solved: solved !== undefined,
    circuits,
    pairs,
    floating,
    cautions: cautions({
      layout,
      missingRules: rules.missing,
      leads,
      places,
      supplies: context.supplies,
      circuits,
      pairs,
      floating,
      leadRuns: runs,
      mayGoDark: solved?.mayGoDark ?? [],
      strained: solved?.strained ?? [],
    }),
  }
}

function pairContext(
  { layout, bodies, tubes, sheets, nodes, rules, air }: Prepared,
  wiring: Wiring,
  places: readonly CircuitLead[],
  leads: readonly LeadBody[],
  solved: Solved | undefined,
  condition: Condition,
): PairContext {
  const ids = tubes.map((tube) => tube.name)
  const supplies = wiring.circuits.map((circuit) => supplyOf(layout, circuit.supply))
  return {
    layout,
    ruleSets: rules.sets,
    bodies,
    sheets,
    leads,
    circuitOfLead: places.map((place) => place.circuit),
    circuitOfTube: ids.map((id) => wiring.circuits.findIndex((c) => c.string.some((e) => e.tube === id))),
    feeds: new Set(places.flatMap((place, i) => (place.role === 'feed' ? [i] : []))),
    supplies,
    probe: probe(wiring, ids, nodes),
    nameplate: nameplateField(layout, wiring, tubes, nodes, leads.length),
    broken: brokenStrings(layout, wiring, tubes, nodes, leads.length),
    air,
    condition,
    ...(solved && { lit: solved.lit }),
    unlit: new Set(solved?.outcomes.flatMap((outcome, i) => (outcome.lit ? [] : [i]))),
  }
}

function unlitBodies(
  { unlit, circuitOfTube, circuitOfLead }: PairContext,
  tubes: number,
  bars: number,
): Set<number> {
  const dark = (circuit: number | undefined) => circuit !== undefined && unlit.has(circuit)
  return new Set([
    ...circuitOfTube.flatMap((circuit, tube) => (dark(circuit) ? [tube] : [])),
    ...circuitOfLead.flatMap((circuit, lead) => (dark(circuit) ? [tubes + bars + lead] : [])),
  ])
}
