/** How loaded each supply is and what each tube and lead of its circuit takes. V, A, W rms; m. */

import type { FixedBody, LeadBody } from '../geometry/conductors.js'
import { enteringEnd, leavingEnd } from '../layout/ends.js'
import type { ChartEntry, CircuitWiring, Layout, Supply, Tube, Wiring } from '../layout/layout.js'
import { supplyOf } from '../layout/parts.js'
import { type Complex, magnitude, minus } from '../math/complex.js'
import type { MeasuredCircuit } from '../network/calibration.js'
import { leastOf, leastOfString } from '../network/least-current.js'
import { type NodeMix, nodeMix, type Probe, potentialAt } from '../network/potentials.js'
import type { CircuitOutcome, CircuitSolution, PotentialField } from '../network/solution.js'
import type { StrayShare, StrayShares } from '../network/stray.js'
import { noLoadVoltage, supplyEfficiency } from '../network/supplies.js'
import type { CircuitLead } from '../wiring/leads.js'
import { type CircuitFacts, circuitRuleFindings } from './circuit-rules.js'
import type {
  CircuitFinding,
  CircuitRuleFinding,
  EndState,
  LeadFinding,
  Loading,
  TubeFinding,
  Verdict,
} from './findings.js'
import type { Quantity, RuleSet } from './rule-set.js'

export interface CircuitContext {
  readonly layout: Layout
  readonly ruleSets: readonly RuleSet[]
  readonly wiring: Wiring
  readonly bodies: readonly FixedBody[]
  readonly leads: readonly LeadBody[]
  readonly places: readonly CircuitLead[]
  readonly probe: Probe
  readonly nameplate: readonly PotentialField[]
  /** absent until the lit solution is there */
  readonly outcomes?: readonly CircuitOutcome[]
  readonly fields?: readonly PotentialField[]
  readonly stray?: StrayShares
  readonly measured?: readonly (MeasuredCircuit | undefined)[]
}

/** m of chart that an electrode pair counts as (common practice, no published source) */
const electrodePair = 0.3

export const circuitFindings = (context: CircuitContext): CircuitFinding[] =>
  context.wiring.circuits.map((circuit, index) => circuitFinding(context, circuit, index))

function circuitFinding(context: CircuitContext, circuit: CircuitWiring, index: number): CircuitFinding {
  const supply = supplyOf(context.layout, circuit.supply)
  const outcome = context.outcomes?.[index]
  const tubes = circuit.string.map(({ tube }) => context.layout.tubes.findIndex((t) => t.id === tube))
  const field = context.fields?.find((f) => f.supply === supply.id)
  const facts = circuitFacts(context, supply, outcome, tubes, index)
  const rules = circuitRuleFindings(context.ruleSets, facts)
  const loadings = loadingsOf(facts).map((loading) => ruledLoading(loading, rules))
  const lit = outcome?.lit === true
  const measured = context.measured?.[index]
  const tubesFound = tubes.map((t) => tubeFinding(context, t, outcome?.lit ? outcome : undefined, field))
  const dimmest = dimmestOf(tubesFound)
  return {
    supply: supply.id,
    solved: outcome !== undefined,
    lit,
    dark: outcome && !outcome.lit ? outcome.dark.map((t) => context.layout.tubes[t]!.id) : [],
    ...(outcome && !outcome.lit && { why: outcome.why }),
    ...(outcome?.neededVoltage !== undefined && {
      neededVoltage: outcome.neededVoltage,
      load: outcome.neededVoltage / noLoadVoltage(supply),
    }),
    noLoadVoltage: noLoadVoltage(supply),
    ...(outcome?.lit && {
      power: outcome.power,
      stray: strayOf(outcome, circuit, tubes),
      residual: magnitude(outcome.residual),
    }),
    ...(measured && { measured }),
    tubeLength: facts.tubeLength,
    electrodePairs: tubes.length,
    terminals: outcome?.lit
      ? [0, 1].map((k) => ({
          end: `${supply.id}.${k + 1}`,
          voltage: outcome.terminalVoltage[k]!,
          current: outcome.terminalCurrent[k]!,
        }))
      : [],
    loadings,
    rules,
    tubes: tubesFound,
    ...(dimmest && { dimmest }),
    leads: leadFindings(context, index, outcome?.lit ? outcome : undefined, field),
    verdict: worst([
      ...(outcome && !outcome.lit ? (['fix'] as const) : []),
      ...loadings.map((l) => l.verdict),
      ...rules.map((r) => r.verdict),
    ]),
  }
}

const worst = (verdicts: readonly Verdict[]): Verdict =>
  verdicts.includes('fix') ? 'fix' : verdicts.includes('watch') ? 'watch' : 'within'

const dimmestOf = (tubes: readonly TubeFinding[]): CircuitFinding['dimmest'] =>
  tubes
    .flatMap(({ id, least }) => (least ? [{ tube: id, ...least }] : []))
    .reduce<CircuitFinding['dimmest']>(
      (dimmest, one) => (dimmest && dimmest.current <= one.current ? dimmest : one),
      undefined,
    )

/**
 * Larger terminal current minus the least current of the string, as phasors. A midpoint return parts the string in two
 * halves with a terminal each, whose currents need not be equal: each half counts by itself, the worse one is told.
 */
function strayOf(
  outcome: CircuitOutcome & { readonly lit: true },
  { string, midpointReturn }: CircuitWiring,
  tubes: readonly number[],
): number {
  const [one, two] = outcome.terminalCurrent
  const into = { re: -two.re, im: -two.im }
  const joint = string.findIndex((e) => [leavingEnd(e), enteringEnd(e)].some((end) => end === midpointReturn))
  if (joint < 0) return strayBetween(magnitude(one) >= magnitude(two) ? one : into, outcome, tubes)
  // the joint is told by the end left or by the end entered: the first half ends in front of the tube entered there
  const second = leavingEnd(string[joint]!) === midpointReturn ? joint + 1 : joint
  return Math.max(
    strayBetween(one, outcome, tubes.slice(0, second)),
    strayBetween(into, outcome, tubes.slice(second)),
  )
}

/** |terminal − least| over these tubes, both in the direction of the string */
function strayBetween(
  terminal: Complex,
  { columns }: CircuitOutcome & { readonly lit: true },
  tubes: readonly number[],
): number {
  const least = leastOfString({ columns: new Map([...columns].filter(([tube]) => tubes.includes(tube))) })
  if (least.current >= magnitude(terminal)) return 0
  // a tube entered at b counts its current from a to b: against the direction of the string
  const { phasor } = least
  const along =
    terminal.re * phasor.re + terminal.im * phasor.im >= 0 ? phasor : { re: -phasor.re, im: -phasor.im }
  return magnitude(minus(terminal, along))
}

function circuitFacts(
  { layout, bodies, leads, places }: CircuitContext,
  supply: Supply,
  outcome: CircuitOutcome | undefined,
  tubes: readonly number[],
  index: number,
): CircuitFacts & { readonly chart?: Footage } {
  const used = tubes.map((t) => layout.tubes[t]!)
  const lengths = tubes.map((t) => bodies[t]!.line.length)
  const chart = footage(supply, used, lengths)
  return {
    supply,
    tubes: used,
    tubeLength: lengths.reduce((sum, length) => sum + length, 0),
    leads: places.flatMap((p, i) =>
      p.circuit === index ? [{ body: leads[i]!, feed: p.role === 'feed' }] : [],
    ),
    ...(outcome && { outcome }),
    ...(chart && { chart, chartShare: chart.share }),
  }
}

/** Each way of looking at the load of a supply that the layout gives figures for. */
function loadingsOf({
  supply,
  tubes,
  leads,
  outcome,
  chart,
}: CircuitFacts & { readonly chart?: Footage }): Loading[] {
  const loadings: Loading[] = []
  const add = (by: Loading['by'], value: number, limit: number, watch: number, fix: number) => {
    const share = value / limit
    loadings.push({
      by,
      value,
      limit,
      share,
      verdict: share > fix ? 'fix' : share > watch ? 'watch' : 'within',
    })
  }
  if (outcome?.neededVoltage !== undefined) {
    const fix = outcome.lit ? Infinity : 0
    add('voltage', outcome.neededVoltage, noLoadVoltage(supply), voltageWatch(supply, tubes), fix)
  }
  // never over the maker's chart; how much of it is common practice comes with that rule set
  if (chart) add('chart', chart.metres, chart.metres / chart.share, 1, 1)
  if (outcome?.lit && supply.ratedPower)
    add('mains', outcome.power / supplyEfficiency, supply.ratedPower, 0.9, 1)
  if (outcome?.lit && supply.groundFaultTrip)
    add('residual', magnitude(outcome.residual), supply.groundFaultTrip, 0.8, 1)
  if (supply.maxLead) {
    const feeds = leads.flatMap(({ body, feed }) => (feed ? [body.line.length] : []))
    add('lead', Math.max(...feeds), supply.maxLead, 1, 1)
  }
  return loadings
}

/** the quantity of rules that a way of looking at the load shows */
export const shownAs: Partial<Record<Quantity, Loading['by']>> = { load: 'voltage', 'chart-share': 'chart' }

/** A loading with the verdict of the rules on the same quantity where that is worse. */
const ruledLoading = (loading: Loading, rules: readonly CircuitRuleFinding[]): Loading => ({
  ...loading,
  verdict: worst([
    loading.verdict,
    ...rules.flatMap((r) => (r.kind === 'limit' && shownAs[r.quantity] === loading.by ? [r.verdict] : [])),
  ]),
})

/**
 * Share of no-load voltage from which to watch. Electronic: 0.8 (ours). Core-and-coil: the room to relight each
 * half-cycle, √(2/(π²/4 + ρ²)): 0.76 with mercury (ρ = 1), 0.65 neon (ρ = 1.5), after J. J. Wilting 1959/60 [C].
 */
export function voltageWatch({ type }: Supply, tubes: readonly Pick<Tube, 'fill'>[]): number {
  if (type === 'electronic') return 0.8
  return tubes.some((t) => t.fill === 'neon') ? 0.65 : 0.76
}

interface Footage {
  readonly metres: number
  readonly share: number
}

/** diameters that differ by no more are the same glass, m: charts and layouts round to 0.1 mm */
const sameGlass = 5e-5

const isOf = (entry: ChartEntry, { fill, diameter }: Pick<Tube, 'fill' | 'diameter'>): boolean =>
  entry.fill === fill && Math.abs(entry.diameter - diameter) <= sameGlass * (1 + 1e-9)

/** Footage against the maker's chart: a pair counts as 0.3 m, each kind of tube as its share of its own chart. */
function footage(supply: Supply, tubes: readonly Tube[], lengths: readonly number[]): Footage | undefined {
  let metres = 0
  let share = 0
  for (const [i, tube] of tubes.entries()) {
    const own = supply.chart.find((entry) => isOf(entry, tube))
    if (own === undefined) return undefined
    metres += lengths[i]! + electrodePair
    share += (lengths[i]! + electrodePair) / own.length
  }
  return share > 0 ? { metres, share } : undefined
}

function tubeFinding(
  { layout, bodies, probe, nameplate, stray }: CircuitContext,
  tube: number,
  outcome: CircuitSolution | undefined,
  field: PotentialField | undefined,
): TubeFinding {
  const column = outcome?.columns.get(tube)
  const length = bodies[tube]!.line.length
  const at = (f: PotentialField, s: number): Complex =>
    potentialAt(f, nodeMix(probe, { kind: 'fixed', index: tube }, s))
  const base = {
    id: layout.tubes[tube]!.id,
    length,
    nameplateA: signedNameplate(nameplate, probe, tube, 0),
    nameplateB: signedNameplate(nameplate, probe, tube, length),
  }
  if (!outcome || !column || !field) return base
  const a: EndState = { voltage: at(field, 0), current: column.atA }
  const b: EndState = { voltage: at(field, length), current: column.atB }
  const share = stray?.tubes[tube]
  // in the middle of the stretch that it flows in
  const dimmest = leastOf(column)
  return {
    ...base,
    a,
    b,
    drop: magnitude(minus(a.voltage, b.voltage)),
    stray: magnitude(minus(a.current, b.current)),
    least: { current: dimmest.current, at: ((dimmest.stretch + 0.5) / column.re.length) * length },
    ...(share && strayWords(share, outcome.residual)),
  }
}

const strayWords = (
  { toGround, toNeighbours, ground }: StrayShare,
  residual: Complex,
): Pick<TubeFinding, 'toGround' | 'toNeighbours' | 'ofResidual'> => {
  const all = magnitude(residual)
  const inStep = (ground.re * residual.re + ground.im * residual.im) / all
  return { toGround, toNeighbours, ...(all > 0 && { ofResidual: inStep }) }
}

const signedNameplate = (fields: readonly PotentialField[], probe: Probe, tube: number, at: number): number =>
  summed(fields, nodeMix(probe, { kind: 'fixed', index: tube }, at))

/** snapshots of all supplies on top of each other, V */
const summed = (fields: readonly PotentialField[], mix: NodeMix): number =>
  fields.reduce((sum, field) => sum + potentialAt(field, mix).re, 0)

function leadFindings(
  context: CircuitContext,
  circuit: number,
  outcome: CircuitSolution | undefined,
  field: PotentialField | undefined,
): LeadFinding[] {
  const { places, leads, probe, nameplate, stray } = context
  return places.flatMap((place, i): LeadFinding[] => {
    if (place.circuit !== circuit) return []
    const mix = nodeMix(probe, { kind: 'lead', index: i }, 0)
    const lead = leads[i]!
    const share = stray?.leads[i]
    return [
      {
        between: place.between,
        role: place.role,
        length: lead.line.length,
        assumed: lead.assumed,
        nameplate: summed(nameplate, mix),
        ...(outcome && field && { voltage: magnitude(potentialAt(field, mix)) }),
        ...(outcome && share && { stray: share.total, ...strayWords(share, outcome.residual) }),
      },
    ]
  })
}
