/** How loaded each supply is and what each tube and lead of its circuit takes. V, A, W rms; m. */
import type { FixedBody, LeadBody } from '../geometry/conductors.js'
import type { CircuitWiring, Layout, Supply, Tube, Wiring } from '../layout/layout.js'
import { type Complex, magnitude, minus } from '../math/complex.js'
import type { MeasuredCircuit } from '../network/calibration.js'
import { nodeMix, type Probe, readIm, readRe } from '../network/potentials.js'
import type { CircuitOutcome, CircuitSolution, ColumnCurrents, PotentialField } from '../network/solution.js'
import type { StrayShare, StrayShares } from '../network/stray.js'
import { noLoadVoltage } from '../network/supplies.js'
import type { CircuitLead } from '../wiring/leads.js'
import { type CircuitFacts, circuitRuleFindings, efficiency } from './circuit-rules.js'
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
export const electrodePair = 0.3

export const circuitFindings = (context: CircuitContext): CircuitFinding[] =>
  context.wiring.circuits.map((circuit, index) => circuitFinding(context, circuit, index))

function circuitFinding(context: CircuitContext, circuit: CircuitWiring, index: number): CircuitFinding {
  const supply = supplyOf(context.layout, circuit)
  const outcome = context.outcomes?.[index]
  const tubes = circuit.string.map(({ tube }) => context.layout.tubes.findIndex((t) => t.id === tube))
  const field = context.fields?.find((f) => f.supply === supply.id)
  const facts = circuitFacts(context, supply, outcome, tubes, index)
  const rules = circuitRuleFindings(context.ruleSets, facts)
  const loadings = loadingsOf(facts).map((loading) => ruledLoading(loading, rules))
  const lit = outcome?.lit === true
  const measured = context.measured?.[index]
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
      stray: strayOf(outcome),
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
    tubes: tubes.map((t) => tubeFinding(context, t, outcome?.lit ? outcome : undefined, field)),
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

export function supplyOf(layout: Layout, circuit: CircuitWiring): Supply {
  const supply = layout.supplies.find((s) => s.id === circuit.supply)
  if (!supply) throw new Error(`the layout names no supply ${circuit.supply}`)
  return supply
}

/** larger terminal current minus the least current of the string, as phasors */
function strayOf(outcome: CircuitOutcome & { readonly lit: true }): number {
  const [one, two] = outcome.terminalCurrent
  const larger = magnitude(one) >= magnitude(two) ? one : { re: -two.re, im: -two.im }
  let least: Complex = larger
  for (const column of outcome.columns.values())
    for (let k = 0; k < column.re.length; k++)
      if (Math.hypot(column.re[k]!, column.im[k]!) < magnitude(least))
        least = { re: column.re[k]!, im: column.im[k]! }
  // a tube entered at b counts its current from a to b: against the direction of the string
  const along = larger.re * least.re + larger.im * least.im >= 0 ? least : { re: -least.re, im: -least.im }
  return magnitude(minus(larger, along))
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
  if (outcome?.lit && supply.ratedPower) add('mains', outcome.power / efficiency, supply.ratedPower, 0.9, 1)
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

/** Footage against the maker's chart: a pair counts as 0.3 m, each kind of tube as its share of its own chart. */
function footage(supply: Supply, tubes: readonly Tube[], lengths: readonly number[]): Footage | undefined {
  let metres = 0
  let share = 0
  for (const [i, tube] of tubes.entries()) {
    const limit = supply.chart.get(`${tube.fill}-${Math.round(tube.diameter * 1000)}`)
    if (limit === undefined) return undefined
    metres += lengths[i]! + electrodePair
    share += (lengths[i]! + electrodePair) / limit
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
  const at = (f: PotentialField, s: number): Complex => {
    const mix = nodeMix(probe, { kind: 'fixed', index: tube }, s)
    return { re: readRe(f, mix), im: readIm(f, mix) }
  }
  const own = nameplate[0]
  const base = {
    id: layout.tubes[tube]!.id,
    length,
    nameplateA: own ? signedNameplate(nameplate, probe, tube, 0) : 0,
    nameplateB: own ? signedNameplate(nameplate, probe, tube, length) : 0,
  }
  if (!outcome || !column || !field) return base
  const a: EndState = { voltage: at(field, 0), current: column.atA }
  const b: EndState = { voltage: at(field, length), current: column.atB }
  const share = stray?.tubes[tube]
  return {
    ...base,
    a,
    b,
    drop: magnitude(minus(a.voltage, b.voltage)),
    stray: magnitude(minus(a.current, b.current)),
    least: leastCurrent(column, length),
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
  fields.reduce((sum, f) => sum + readRe(f, nodeMix(probe, { kind: 'fixed', index: tube }, at)), 0)

/** the dimmest place: magnitude and path length (middle of the stretch of column) */
function leastCurrent({ re, im }: ColumnCurrents, length: number): { current: number; at: number } {
  let current = Infinity
  let k = 0
  for (let i = 0; i < re.length; i++) {
    const here = Math.hypot(re[i]!, im[i]!)
    if (here < current) {
      current = here
      k = i
    }
  }
  return { current, at: ((k + 0.5) / re.length) * length }
}

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
        nameplate: nameplate.reduce((sum, f) => sum + readRe(f, mix), 0),
        ...(outcome && field && { voltage: Math.hypot(readRe(field, mix), readIm(field, mix)) }),
        ...(outcome && share && { stray: share.total, ...strayWords(share, outcome.residual) }),
      },
    ]
  })
}
