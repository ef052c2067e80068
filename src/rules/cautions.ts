/** What must be said about a sign beyond its figures: the most pressing first. */
import type { LeadBody } from '../geometry/conductors.js'
import type { CloseRun } from '../geometry/runs.js'
import type { Layout, Supply } from '../layout/layout.js'
import type { CircuitLead } from '../wiring/leads.js'
import { commonPractice } from './common-practice.js'
import type { Caution, CircuitFinding, FloatingFinding, PairFinding } from './findings.js'

export interface CautionContext {
  readonly layout: Layout
  readonly leads: readonly LeadBody[]
  readonly places: readonly CircuitLead[]
  readonly supplies: readonly Supply[]
  readonly circuits: readonly CircuitFinding[]
  readonly pairs: readonly PairFinding[]
  readonly floating: readonly FloatingFinding[]
  readonly leadRuns: readonly CloseRun[]
  /** the sign may go dark: the upper end of the gradient band is not lit */
  readonly mayGoDark: readonly string[]
}

const order: Record<Caution['level'], number> = { danger: 0, fix: 1, watch: 2, note: 3 }

export function cautions(context: CautionContext): Caution[] {
  const found = [
    ...darkCircuits(context),
    ...floatingMetal(context),
    ...overloads(context),
    ...notModelled(context),
    ...missingRules(context),
    ...crossings(context),
    ...leadCautions(context),
    ...supplyCautions(context),
  ]
  return found.sort((a, b) => order[a.level] - order[b.level])
}

const kv = (volts: number): string => `${(volts / 1000).toFixed(volts < 9950 ? 2 : 1)} kV`
const ma = (amperes: number): string => `${(amperes * 1000).toFixed(1)} mA`
const mm = (metres: number): string => `${Math.round(metres * 1000)} mm`
const some = (names: readonly string[], most = 4): string =>
  names.length <= most
    ? names.join(', ')
    : `${names.slice(0, most).join(', ')} and ${names.length - most} more`

function darkCircuits({ circuits, mayGoDark }: CautionContext): Caution[] {
  const dark = circuits
    .filter((c) => c.solved && !c.lit)
    .map((c): Caution => {
      const which =
        c.dark.length > 0
          ? ` ${c.dark[0]} goes dark first${c.dark.length > 1 ? ` (then ${some(c.dark.slice(1))})` : ''}.`
          : ''
      return {
        level: 'fix',
        code: 'dark',
        text: `${c.supply} cannot light its whole string: ${whyDark(c)}.${which} Its pairs are judged on nameplate.`,
      }
    })
  const near = mayGoDark.map(
    (supply): Caution => ({
      level: 'watch',
      code: 'may-go-dark',
      text: `${supply} lights the string by the default gradient law, but not if the glass takes 30 % more: the sign may go dark.`,
    }),
  )
  return [...dark, ...near]
}

function whyDark(c: CircuitFinding): string {
  if (c.why === 'needs-more-than-no-load' && c.neededVoltage !== undefined)
    return `it takes ${kv(c.neededVoltage)} rms and the supply has ${kv(c.noLoadVoltage)} at no load`
  if (c.why === 'not-enough-current')
    return 'stray capacitance takes the current before it reaches the far tubes'
  return 'there is no stable operating point'
}

const floatingMetal = ({ floating }: CautionContext): Caution[] =>
  floating.map(({ id, voltage, touch }) => ({
    level: 'danger',
    code: 'floating-metal',
    text: `Metal "${id}" is not grounded: it floats to ${kv(voltage)} rms, and ${ma(touch)} would flow through a person touching it. Bond it to ground.`,
  }))

function overloads({ circuits }: CautionContext): Caution[] {
  return circuits.flatMap((c) =>
    c.loadings.flatMap((l): Caution[] => {
      if (l.verdict === 'within' || (l.by === 'voltage' && !c.lit)) return []
      const percent = `${Math.round(l.share * 100)} %`
      const text = {
        voltage: `${c.supply} runs at ${percent} of its no-load voltage (${kv(l.value)} of ${kv(l.limit)} rms)`,
        chart: `${c.supply} carries ${percent} of the maker's chart (${l.value.toFixed(1)} of ${l.limit.toFixed(1)} m with electrode pairs)`,
        mains: `${c.supply} draws ${percent} of its rated input (about ${Math.round(l.value)} of ${Math.round(l.limit)} VA)`,
        residual: `${c.supply} returns ${ma(l.value)} through ground: ${percent} of the ${ma(l.limit)} that trips it`,
        lead: `${c.supply} has a ${mm(l.value)} output lead; its leads allow ${mm(l.limit)}`,
      }[l.by]
      return [{ level: l.verdict, code: 'loading', text: `${text}.` }]
    }),
  )
}

/** What this version reads but cannot compute. */
function notModelled({ layout }: CautionContext): Caution[] {
  const sheets = layout.metal.filter((m) => m.kind !== 'bar').map((m) => m.id)
  const found: Caution[] = []
  const say = (text: string) => found.push({ level: 'fix', code: 'not-modelled', text })
  if (sheets.length > 0)
    say(`Not modelled yet, so its capacitance and gaps are missing: ${some(sheets)} (plate or wall).`)
  if (layout.wiring.circuits.some((c) => c.midpointReturn))
    say('Not modelled yet: the midpoint return is left out of the solution.')
  return found
}

function missingRules({ layout }: CautionContext): Caution[] {
  const missing = layout.rules.filter((name) => name !== commonPractice.id)
  return missing.length === 0
    ? []
    : [
        {
          level: 'fix',
          code: 'rules-missing',
          text: `Rule set not available, so not judged by it: ${some(missing)}.`,
        },
      ]
}

/** Glass that meets in the drawing: which stroke is in front must come from its heights. */
function crossings({ pairs }: CautionContext): Caution[] {
  const meeting = pairs.filter((p) => p.kind === 'tube-tube' && p.gap <= 0)
  if (meeting.length === 0) return []
  const names = meeting.map((p) =>
    p.a.part === p.b.part ? `${p.a.part} with itself` : `${p.a.part} and ${p.b.part}`,
  )
  return [
    {
      level: 'fix',
      code: 'glass-meets',
      text: `Glass meets in the drawing: ${some([...new Set(names)])}. Which is in front? Give their heights (z).`,
    },
  ]
}

function leadCautions({ layout, leads, places, supplies, leadRuns }: CautionContext): Caution[] {
  const found: Caution[] = []
  const name = (i: number) => leads[i]!.name
  const electronicFeeds = places.flatMap((p, i) =>
    p.role === 'feed' && supplies[p.circuit]?.type === 'electronic' ? [i] : [],
  )
  const conduit = leads.flatMap((lead, i) =>
    lead.conduit === 'metal' && supplies[places[i]!.circuit]?.type === 'electronic' ? [i] : [],
  )
  if (conduit.length > 0)
    found.push({
      level: 'fix',
      code: 'conduit',
      text: `Never run an electronic supply's lead in metal conduit: ${some(conduit.map(name))} (common practice).`,
    })
  const meets = new Set(
    leadRuns.flatMap((run) => [run.a, run.b].flatMap((r) => (r.kind === 'lead' ? [r.index] : []))),
  )
  const assumed = leads.flatMap((lead, i) => (lead.assumed && meets.has(i) ? [i] : []))
  if (assumed.length > 0)
    found.push({
      level: 'watch',
      code: 'route-assumed',
      text: `Route assumed where it passes glass or metal: ${some(assumed.map(name))}. Give the real route in the file.`,
    })
  const low = electronicFeeds.filter((i) => nearMetal(layout, leads[i]!))
  if (low.length > 0)
    found.push({
      level: 'note',
      code: 'off-metal',
      text: `Output leads near the metal face: ${some(low.map(name))}. ${commonPractice.offMetal.advice} (common practice).`,
    })
  return found
}

function nearMetal({ face }: Layout, { line, outerRadius, conduit }: LeadBody): boolean {
  if (face.metal === 'none' || conduit === 'metal') return false
  // half of the run or more lies lower than the spacer
  let low = 0
  for (let i = 1; i < line.at.length; i++) {
    const z = Math.abs(line.points[3 * i + 2]! + line.points[3 * i - 1]!) / 2
    if (z - outerRadius < commonPractice.offMetal.gap) low += line.at[i]! - line.at[i - 1]!
  }
  return low > line.length / 2
}

function supplyCautions({ supplies, circuits, layout }: CautionContext): Caution[] {
  const found: Caution[] = []
  for (const [i, supply] of supplies.entries()) {
    if (supply.noLoadVoltage > 9000)
      found.push({
        level: 'note',
        code: 'lower-voltage',
        text: `${supply.id}: lower voltage is better – two 6 kV supplies rather than one 12 kV (common practice).`,
      })
    const length = circuits[i]?.tubeLength ?? 0
    const stray = circuits[i]?.stray ?? 0
    if (
      supply.type === 'electronic' &&
      layout.face.metal !== 'none' &&
      stray > 0.2 * supply.shortCircuitCurrent
    )
      found.push({
        level: 'watch',
        code: 'stray',
        text: `${supply.id} loses ${ma(stray)} of ${ma(supply.shortCircuitCurrent)} to stray capacitance over ${length.toFixed(1)} m of glass; electronic supplies are not for long runs on metal (common practice).`,
      })
    if (supply.type === 'electronic' && (supply.frequency < 15_000 || supply.frequency > 50_000))
      found.push({
        level: 'note',
        code: 'frequency',
        text: `${supply.id}: electronic supplies run at 20–30 kHz; the layout says ${supply.frequency / 1000} kHz.`,
      })
  }
  return found
}
