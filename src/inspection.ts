/**
 * The whole path from a layout and a wiring to the answers. Start reading here.
 *
 *   prepare(layout)                    what the wiring does not move: bodies, nodes, close runs       once per file
 *   solver(prepared)                   capacitances of the glass, kept; gives solve(wiring)           once per file
 *   inspection(prepared, wiring)       potentials as shared out on paper, and what follows            at once
 *   inspection(prepared, wiring, s)    the same with the lit solution s = solve(wiring)               per edit
 */
import { type FieldOptions, prepareField, usualField } from './field/fixed-field.js'
import { type LeadField, leadField } from './field/lead-field.js'
import { nodeCapacitance } from './field/node-capacitance.js'
import type { StartMode } from './gaps/air.js'
import { fixedBodies } from './geometry/bodies.js'
import { fixedRuns, leadLeadRuns, leadRuns, withLeadIndex } from './geometry/close-runs.js'
import type { FixedBody, LeadBody, SheetBody, TubeBody } from './geometry/conductors.js'
import { leadBody } from './geometry/leads.js'
import { type FixedNodes, fixedNodes, nodeSpacing } from './geometry/nodes.js'
import type { CloseRun } from './geometry/runs.js'
import { fixedSheetRuns, leadSheetRuns } from './geometry/sheet-runs.js'
import { sheetBodies } from './geometry/sheets.js'
import { partOf } from './layout/ends.js'
import type { EndName, Layout, Wiring } from './layout/layout.js'
import { supplyOf } from './layout/parts.js'
import { brokenStrings } from './network/broken.js'
import { type MeasuredCircuit, measuredLaw } from './network/calibration.js'
import { solveBand } from './network/lit.js'
import { nameplateField } from './network/nameplate.js'
import { type Network, network } from './network/network.js'
import { type Probe, probe } from './network/potentials.js'
import type { CircuitOutcome, LitState, PotentialField } from './network/solution.js'
import { type StrayShares, strayShares } from './network/stray.js'
import { noLoadVoltage } from './network/supplies.js'
import { cautions } from './rules/cautions.js'
import { circuitFindings } from './rules/circuits.js'
import type { Caution, CircuitFinding, Condition, FloatingFinding, PairFinding } from './rules/findings.js'
import { type PairContext, pairFindings } from './rules/pairs.js'
import { type ResolvedRules, resolveRules } from './rules/resolve.js'
import type { LitFields } from './rules/voltages.js'
import { type CircuitLead, circuitLeads } from './wiring/leads.js'

/** A lead in its place with where it passes glass and metal. Depends on its two ends only: kept between edits. */
interface PlacedLead {
  readonly body: LeadBody
  /** the same for a lead told the other way round: its charges are kept by this */
  readonly conductor: object
  readonly runs: readonly CloseRun[]
}

export interface Prepared {
  readonly layout: Layout
  readonly bodies: readonly FixedBody[]
  readonly tubes: readonly TubeBody[]
  /** plates and upright walls */
  readonly sheets: readonly SheetBody[]
  readonly nodes: FixedNodes
  readonly runs: readonly CloseRun[]
  /** memo of leads and of where pairs of leads pass each other, by name */
  readonly leads: Map<string, PlacedLead>
  readonly crossings: Map<string, readonly CloseRun[]>
  /** what the sign is judged by */
  readonly rules: ResolvedRules
  readonly air: StartMode
}

/** `rules`: what `layout.rules` names, with the files beside it; without it the shipped sets of those names. */
export function prepare(
  layout: Layout,
  rules: ResolvedRules = resolveRules(layout.rules),
  air: StartMode = 'cautious',
): Prepared {
  const bodies = fixedBodies(layout)
  const sheets = sheetBodies(layout)
  return {
    layout,
    bodies,
    tubes: bodies.filter((body) => body.kind === 'tube'),
    sheets,
    nodes: fixedNodes(bodies, layout.face.metal === 'floating', nodeSpacing, sheets.length),
    runs: [...fixedRuns(bodies, layout), ...fixedSheetRuns(bodies, sheets)],
    leads: new Map(),
    crossings: new Map(),
    rules,
    air,
  }
}

/** What solving the network gives: plain numbers that can cross from a worker thread. */
export interface Solved {
  readonly outcomes: readonly CircuitOutcome[]
  readonly lit: LitFields
  readonly stray: StrayShares
  readonly floating: readonly FloatingFinding[]
  readonly measured: readonly (MeasuredCircuit | undefined)[]
  /** supplies whose string is lit by the nominal law and not at the upper end of its band */
  readonly mayGoDark: readonly string[]
  /** parts drawn so far into others that capacitances there are rough */
  readonly strained: readonly string[]
}

/** The same for an edited layout: what did not move is kept. */
export function preparedAgain(prepared: Prepared, layout: Layout): Prepared {
  const was = prepared.layout
  if (layout === was) return prepared
  const sameGlass = layout.tubes === was.tubes && layout.metal === was.metal && layout.face === was.face
  if (!sameGlass) return prepare(layout, prepared.rules, prepared.air)
  const moved = movedLeads(was, layout)
  if (!moved) return { ...prepared, layout }
  const leads = new Map([...prepared.leads].filter(([, { body }]) => !moved(body.between)))
  return { ...prepared, layout, leads, crossings: new Map() }
}

/** Which leads run otherwise in another layout of the same glass: by their routes, or by their supply's place. */
function movedLeads(
  was: Layout,
  now: Layout,
): ((between: readonly [EndName, EndName]) => boolean) | undefined {
  const had = new Set(was.routes)
  const has = new Set(now.routes)
  // a route serves both terminals of its supply
  const supplies = new Set(now.supplies.map(({ id }) => id))
  const named = (end: EndName) => (supplies.has(partOf(end)) ? partOf(end) : end)
  const joint = (between: readonly [EndName, EndName]) => between.map(named).sort().join(' ')
  const rerouted = new Set(
    [...was.routes.filter((r) => !has.has(r)), ...now.routes.filter((r) => !had.has(r))].map((r) =>
      joint(r.between),
    ),
  )
  const terminals = now.supplies.flatMap((s, i) =>
    s.terminals === was.supplies[i]?.terminals ? [] : [`${s.id}.1`, `${s.id}.2`],
  )
  if (rerouted.size === 0 && terminals.length === 0) return undefined
  return (between) => rerouted.has(joint(between)) || between.some((end) => terminals.includes(end))
}

/** leads and crossings kept beyond what a wiring uses; each lead holds about half a megabyte of charges */
const mostLeads = 200
const mostCrossings = 20_000

/** A lead by its two ends, from the memo. */
function placedLead(
  { layout, bodies, sheets, tubes, leads }: Prepared,
  between: readonly [EndName, EndName],
): PlacedLead {
  const name = between.join(' ')
  const known = leads.get(name)
  const placed = known ?? newLead()
  // the ones used last stand at the end: the first is the one to forget
  leads.delete(name)
  leads.set(name, placed)
  const [oldest] = leads.keys()
  if (leads.size > mostLeads + 3 * tubes.length && oldest !== undefined) leads.delete(oldest)
  return placed

  function newLead(): PlacedLead {
    const body = leadBody(layout, between)
    // a lead is at one potential: with itself it makes no pair
    const own = leadRuns(body, bodies, layout).filter((run) => run.b.kind !== 'lead')
    const runs = [...own, ...leadSheetRuns(body, sheets)]
    return { body, runs, conductor: leads.get([...between].reverse().join(' '))?.conductor ?? body }
  }
}

/** Where the leads of a wiring pass glass, metal and each other. */
function runsOfLeads(prepared: Prepared, placed: readonly PlacedLead[]): CloseRun[] {
  const runs = placed.flatMap(({ runs: own }, i) => withLeadIndex(own, i))
  if (prepared.crossings.size > mostCrossings + placed.length ** 2) prepared.crossings.clear()
  for (const [i, a] of placed.entries())
    for (const [j, b] of placed.entries()) {
      if (j <= i) continue
      const name = `${a.body.name}|${b.body.name}`
      const known = prepared.crossings.get(name) ?? leadLeadRuns(a.body, b.body)
      prepared.crossings.set(name, known)
      runs.push(...withLeadIndex(known, i, j))
    }
  return runs
}

/** The network of a wiring and its lit states: with the nominal law, and at the ends of its band. */
export interface SolvedNetwork {
  readonly net: Network
  readonly nominal: LitState
  readonly others: readonly LitState[]
  /** of each circuit, what was measured beside what the law has */
  readonly measured: readonly (MeasuredCircuit | undefined)[]
  /** parts drawn so far into others that capacitances there are rough */
  readonly strained: readonly string[]
}

/** Prepares the capacitances of the glass (the slow part) and gives the function that solves the network of a wiring. */
export function networkSolver(
  prepared: Prepared,
  options: FieldOptions = usualField,
): (wiring: Wiring, layout?: Layout) => SolvedNetwork {
  const { bodies, tubes, sheets, nodes } = prepared
  const metal = [...bodies.filter((body) => body.kind === 'bar'), ...sheets]
  const fixed = prepareField(bodies, nodes, prepared.layout.face, options, sheets)
  const { strained } = fixed
  const known = new WeakMap<object, LeadField>()
  const fieldOf = ({ body, conductor }: PlacedLead): LeadField => {
    const field = known.get(conductor) ?? leadField(fixed, body)
    known.set(conductor, field)
    return field
  }
  const networkOf = (placed: Prepared, wiring: Wiring): Network => {
    const leads = circuitLeads(wiring).map(({ between }) => placedLead(placed, between))
    const capacitance = nodeCapacitance(fixed, leads.map(fieldOf))
    return network(placed.layout, wiring, tubes, metal, nodes, capacitance)
  }
  const lawOf = (placed: Prepared) => measuredLaw(placed.layout, (wiring) => networkOf(placed, wiring))
  let now = prepared
  let law = lawOf(now)
  let lawFor = now.layout.supplies
  return (wiring, layout = prepared.layout) => {
    now = preparedAgain(now, layout)
    // what was measured is set against the supply's figures as they stand now
    if (layout.supplies !== lawFor) {
      law = lawOf(now)
      lawFor = layout.supplies
    }
    const net = networkOf(now, wiring)
    const measured = law(wiring)
    const factors = measured.map((circuit) => circuit?.factor)
    return { net, measured, strained, ...solveBand(net, factors) }
  }
}

/** The same with what the findings need of the solution. */
export function solver(
  prepared: Prepared,
  options: FieldOptions = usualField,
): (wiring: Wiring, layout?: Layout) => Solved {
  const solveNetwork = networkSolver(prepared, options)
  return (wiring, layout = prepared.layout) => {
    const { net, nominal, others, measured, strained } = solveNetwork(wiring, layout)
    const noLoads = wiring.circuits.map((circuit) => noLoadVoltage(supplyOf(layout, circuit.supply)))
    return {
      ...litFields(nominal, others, noLoads),
      outcomes: nominal.circuits,
      measured,
      strained,
      ...strayShares(net, nominal),
    }
  }
}

/** The band of the lit fields. Where its upper end does not burn, the nominal one scaled to no-load stands for it. */
function litFields(
  nominal: LitState,
  others: readonly LitState[],
  noLoads: readonly number[],
): Pick<Solved, 'lit' | 'mayGoDark'> {
  const burns = (state: LitState) => state.circuits.every((c, i) => c.lit === nominal.circuits[i]?.lit)
  const mayGoDark = nominal.circuits.flatMap((c, i) =>
    c.lit && others.some((o) => !o.circuits[i]?.lit) ? [c.supply] : [],
  )
  const band = others.filter(burns).map((o) => o.fields)
  const room = nominal.circuits.flatMap((c, i) =>
    c.lit && mayGoDark.includes(c.supply) ? [noLoads[i]! / c.neededVoltage] : [],
  )
  const lit = { nominal: nominal.fields, band, ...(room.length > 0 && { ceiling: Math.max(...room) }) }
  return { lit, mayGoDark }
}

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
