/** What must be said about a sign beyond its figures, as facts: the most pressing first. */
import type { LeadBody } from '../geometry/conductors.js'
import type { CloseRun } from '../geometry/runs.js'
import type { Layout, Supply } from '../layout/layout.js'
import { lawBand } from '../network/lit.js'
import type { CircuitLead } from '../wiring/leads.js'
import { shownAs } from './circuits.js'
import { sameDistance } from './distance-table.js'
import type {
  Caution,
  CautionLevel,
  CircuitFinding,
  CircuitRuleFinding,
  FloatingFinding,
  Loading,
  PairFinding,
} from './findings.js'
import { spacer } from './lead-savings.js'
import type { MissingRules } from './rule-set.js'

export interface CautionContext {
  readonly layout: Layout
  readonly missingRules: readonly MissingRules[]
  readonly leads: readonly LeadBody[]
  readonly places: readonly CircuitLead[]
  readonly supplies: readonly Supply[]
  readonly circuits: readonly CircuitFinding[]
  /** worst first */
  readonly pairs: readonly PairFinding[]
  readonly floating: readonly FloatingFinding[]
  readonly leadRuns: readonly CloseRun[]
  /** the sign may go dark: the upper end of the gradient band is not lit */
  readonly mayGoDark: readonly string[]
  /** parts drawn so far into others that capacitances there are rough */
  readonly strained: readonly string[]
}

/** share of the short-circuit current under which the dimmest place is worth a word (ours) */
const dim = 0.85
/** V: above it two smaller supplies are the better choice (ours; the trade says 6 kV rather than 12) */
const highVoltage = 9000
/** Hz: electronic supplies run at 20–30 kHz; what lies far outside is perhaps a slip (ours) */
const usualFrequency = [15_000, 50_000] as const
/** m: a route drawn to a terminal's neighbour still fits, one drawn to where the supply was before does not (ours) */
const mostOff = 0.1
/** Hz: core-and-coil transformers run on the mains */
const mostMains = 400

const order: Record<CautionLevel, number> = { danger: 0, fix: 1, watch: 2, note: 3 }

export function cautions(context: CautionContext): Caution[] {
  const found = [
    ...darkCircuits(context),
    ...worstPair(context),
    ...floatingMetal(context),
    ...context.circuits.flatMap(circuitCautions),
    ...missingRules(context),
    ...crossings(context),
    ...strained(context),
    ...openTube(context),
    ...leadCautions(context),
    ...supplyCautions(context),
  ]
  return found.sort((a, b) => order[a.level] - order[b.level])
}

function darkCircuits({ circuits, mayGoDark }: CautionContext): Caution[] {
  const dark = circuits.flatMap((c): Caution[] =>
    c.solved && !c.lit
      ? [
          {
            level: 'fix',
            code: 'dark',
            supply: c.supply,
            why: c.why ?? 'no-stable-point',
            ...(c.neededVoltage !== undefined && { neededVoltage: c.neededVoltage }),
            noLoadVoltage: c.noLoadVoltage,
            dark: c.dark,
          },
        ]
      : [],
  )
  const unsure = circuits.flatMap(({ supply, measured }): Caution[] =>
    mayGoDark.includes(supply)
      ? [{ level: 'watch', code: 'may-go-dark', supply, band: lawBand(measured?.factor) }]
      : [],
  )
  return [...dark, ...unsure]
}

/** One entry for all pairs: the worst, and how many more. */
function worstPair({ pairs }: CautionContext): Caution[] {
  const [pair] = pairs
  if (!pair || pair.verdict === 'within') return []
  const more = (verdict: PairFinding['verdict']) =>
    pairs.filter((p) => p !== pair && p.verdict === verdict).length
  return [{ level: pair.verdict, code: 'pairs', pair, fix: more('fix'), watch: more('watch') }]
}

const floatingMetal = ({ floating }: CautionContext): Caution[] =>
  floating.map((metal) => ({ level: 'danger', code: 'floating-metal', ...metal }))

/** Loadings and circuit rules; of two on one quantity the worse, the rule's where they are equal. */
function circuitCautions({ supply, lit, loadings, rules }: CircuitFinding): Caution[] {
  const shown = (finding: CircuitRuleFinding): Loading | undefined =>
    finding.kind === 'limit' ? loadings.find((l) => l.by === shownAs[finding.quantity]) : undefined
  const said = rules.filter((r) => r.verdict !== 'within' && (shown(r)?.verdict ?? r.verdict) === r.verdict)
  const byLoading = loadings.flatMap((loading): Caution[] => {
    const { verdict } = loading
    if (verdict === 'within' || (loading.by === 'voltage' && !lit)) return []
    return said.some((r) => shown(r) === loading)
      ? []
      : [{ level: verdict, code: 'loading', supply, loading }]
  })
  return [...byLoading, ...said.flatMap((finding) => ruleCaution(supply, finding))]
}

function ruleCaution(supply: string, finding: CircuitRuleFinding): Caution[] {
  const { verdict } = finding
  if (verdict === 'within') return []
  if (finding.kind === 'limit' && finding.inMetalConduit && finding.limit === 0)
    return [
      {
        level: verdict,
        code: 'conduit',
        supply,
        leads: finding.parts,
        governs: `${finding.set}: ${finding.clause}`,
      },
    ]
  return [{ level: verdict, code: 'rule', supply, finding }]
}

const missingRules = ({ missingRules: missing }: CautionContext): Caution[] =>
  missing.length === 0 ? [] : [{ level: 'fix', code: 'rules-missing', missing }]

/** Glass that meets in the drawing: which stroke is in front must come from its heights. */
function crossings({ pairs }: CautionContext): Caution[] {
  const meeting = pairs.filter((p) => p.kind === 'tube-tube' && p.gap < sameDistance)
  const tubes = new Map(
    meeting.map((p): [string, readonly [string, string]] => [
      `${p.a.part} ${p.b.part}`,
      [p.a.part, p.b.part],
    ]),
  )
  return tubes.size === 0 ? [] : [{ level: 'fix', code: 'glass-meets', tubes: [...tubes.values()] }]
}

/** Where only open-circuit protection keeps an open tube from starting a discharge. */
function openTube({ pairs }: CautionContext): Caution[] {
  const margin = ({ air }: PairFinding) => (air.open ? air.open.peak / air.startsAt : 0)
  const found = pairs.filter((pair) => pair.air.open?.counted === false && margin(pair) > 1)
  if (found.length === 0) return []
  const pair = found.reduce((worst, one) => (margin(one) > margin(worst) ? one : worst))
  return [{ level: 'note', code: 'open-tube', pair, places: found.length }]
}

const strained = ({ strained: parts }: CautionContext): Caution[] =>
  parts.length === 0 ? [] : [{ level: 'watch', code: 'strained', parts }]

function leadCautions({ layout, leads, places, supplies, leadRuns }: CautionContext): Caution[] {
  const meets = new Set(
    leadRuns.flatMap((run) => [run.a, run.b].flatMap((r) => (r.kind === 'lead' ? [r.index] : []))),
  )
  const names = (fits: (lead: LeadBody, i: number) => boolean) => leads.filter(fits).map((lead) => lead.name)
  const assumed = names((lead, i) => lead.assumed && meets.has(i))
  const low = names((lead, i) => {
    const { role, circuit } = places[i]!
    return role === 'feed' && supplies[circuit]?.type === 'electronic' && nearMetal(layout, lead)
  })
  const misfits = leads.filter(({ off }) => off > mostOff).map(({ name, off }) => ({ name, off }))
  const found: Caution[] = []
  if (misfits.length > 0) found.push({ level: 'watch', code: 'route-misfit', leads: misfits })
  if (assumed.length > 0) found.push({ level: 'watch', code: 'route-assumed', leads: assumed })
  if (low.length > 0) found.push({ level: 'note', code: 'off-metal', leads: low })
  return found
}

function nearMetal({ face }: Layout, { line, outerRadius, conduit }: LeadBody): boolean {
  if (face.metal === 'none' || conduit === 'metal') return false
  // half of the run or more lies lower than the spacer
  let low = 0
  for (let i = 1; i < line.at.length; i++) {
    const z = Math.abs(line.points[3 * i + 2]! + line.points[3 * i - 1]!) / 2
    if (z - outerRadius < spacer) low += line.at[i]! - line.at[i - 1]!
  }
  return low > line.length / 2
}

function supplyCautions({ supplies, circuits, layout }: CautionContext): Caution[] {
  return supplies.flatMap(({ id, type, noLoadVoltage, frequency, shortCircuitCurrent }, i) => {
    const found: Caution[] = []
    if (noLoadVoltage > highVoltage) found.push({ level: 'note', code: 'lower-voltage', supply: id })
    const circuit = circuits[i]
    const dimmest = circuit?.dimmest
    if (type === 'electronic' && circuit && dimmest && dimmest.current < dim * shortCircuitCurrent)
      found.push({
        level: 'watch',
        code: 'stray',
        supply: id,
        tube: dimmest.tube,
        least: dimmest.current,
        given: shortCircuitCurrent,
        tubeLength: circuit.tubeLength,
        onMetal: layout.face.metal !== 'none',
      })
    if (type === 'electronic' && (frequency < usualFrequency[0] || frequency > usualFrequency[1]))
      found.push({ level: 'note', code: 'frequency', supply: id, type, frequency })
    if (type === 'core-and-coil' && frequency > mostMains)
      found.push({ level: 'watch', code: 'frequency', supply: id, type, frequency })
    return found
  })
}
