/** What cutting an output lead to length, or lifting it off the metal, would give back. A, m. */
import type { LeadBody } from '../geometry/conductors.js'
import { laidStraight, lifted, liftFor, straightLength } from '../geometry/relaid.js'
import type { Layout } from '../layout/layout.js'
import { magnitude } from '../math/complex.js'
import { leastOfString } from '../network/least-current.js'
import type { CircuitOutcome } from '../network/solution.js'
import type { StrayShares } from '../network/stray.js'
import type { CircuitLead } from '../wiring/leads.js'
import type { PairFinding } from './findings.js'

/** air between an output lead and metal that helps much (common practice, no published source), m */
export const spacer = 0.025
/** what is not worth a cut, m (ours) */
const leastCut = 0.01

/** Gains; negative where it makes things worse. */
export interface Saving {
  /** current that leaves the lead sideways, less */
  readonly stray: number
  /** current at the dimmest place of the string, more */
  readonly least: number
  /** current back through ground, less */
  readonly residual: number
}

export interface LeadSaving {
  readonly circuit: number
  readonly between: readonly [string, string]
  /** with the straight length; absent where the lead is straight already */
  readonly cut?: Saving & { readonly length: number }
  /** with how far it is lifted; absent where it has its 25 mm already, and in metal conduit */
  readonly lift?: Saving & { readonly by: number }
}

export interface LaidSign {
  readonly layout: Layout
  readonly leads: readonly LeadBody[]
  readonly places: readonly CircuitLead[]
  readonly pairs: readonly PairFinding[]
}

/** What a solution must tell. */
export interface SolvedLeads {
  readonly outcomes: readonly CircuitOutcome[]
  readonly stray: StrayShares
}

/** One solution more for each way of each output lead of a lit circuit. `solve`: of the same wiring, laid otherwise. */
export function leadSavings(
  sign: LaidSign,
  now: SolvedLeads,
  solve: (layout: Layout) => SolvedLeads,
): LeadSaving[] {
  return sign.places.flatMap(({ circuit, role, between }, index): LeadSaving[] => {
    if (role !== 'feed' || !now.outcomes[circuit]?.lit) return []
    const lead = sign.leads[index]!
    const savingOf = (layout: Layout) => saving(now, solve(layout), circuit, index)
    const length = straightLength(lead)
    const cut = lead.line.length - length > leastCut ? savingOf(laidStraight(sign.layout, lead)) : undefined
    const by = lead.conduit === 'metal' ? 0 : liftOf(sign.pairs, index)
    const lift = by === 0 ? undefined : savingOf(lifted(sign.layout, lead, by))
    return [
      { circuit, between, ...(cut && { cut: { ...cut, length } }), ...(lift && { lift: { ...lift, by } }) },
    ]
  })
}

/** The farthest that any place near metal has to go. */
function liftOf(pairs: readonly PairFinding[], lead: number): number {
  let most = 0
  for (const { a, b, gap } of pairs) {
    const [own, other] = a.body.kind === 'lead' && a.body.index === lead ? [a, b] : [b, a]
    if (own.body.kind !== 'lead' || own.body.index !== lead) continue
    if (other.kind !== 'metal' && other.kind !== 'face') continue
    const by = liftFor(own.point, other.point, gap, spacer)
    if (Math.abs(by) > Math.abs(most)) most = by
  }
  return most
}

/** Nothing where the sign would not be lit then. */
function saving(now: SolvedLeads, then: SolvedLeads, circuit: number, lead: number): Saving | undefined {
  const [is, would] = [now.outcomes[circuit], then.outcomes[circuit]]
  const [takes, left] = [now.stray.leads[lead], then.stray.leads[lead]]
  if (!is?.lit || !would?.lit || !takes || !left) return undefined
  return {
    stray: takes.total - left.total,
    least: leastOfString(would).current - leastOfString(is).current,
    residual: magnitude(is.residual) - magnitude(would.residual),
  }
}
