/** Two bodies at the place where they pass each other, in the words of rules: part bits, supplies, metal. */
import type { Surface } from '../gaps/facing-line.js'
import type { Body, FixedBody, LeadBody, SheetBody } from '../geometry/conductors.js'
import type { BodyRef, CloseRun } from '../geometry/runs.js'
import { partOf } from '../layout/ends.js'
import type { Face, LeadDefaults, Supply } from '../layout/layout.js'
import type { PartKind } from './findings.js'
import { partBits } from './rule-set.js'

/** The sign as the rules see it. */
export interface Parts {
  readonly layout: { readonly face: Face; readonly lead: Pick<LeadDefaults, 'conductor'> }
  readonly bodies: readonly FixedBody[]
  readonly sheets: readonly SheetBody[]
  readonly leads: readonly LeadBody[]
  /** circuit of each lead and of each tube (−1: none), and the leads that are feeds */
  readonly circuitOfLead: readonly number[]
  readonly circuitOfTube: readonly number[]
  readonly feeds: ReadonlySet<number>
  /** the supply of each circuit */
  readonly supplies: readonly Supply[]
}

/** part of a tube next to its electrode that counts as the electrode, bare where there is no boot, m (ours) */
const electrodeReach = 0.01

export function bodyOf(parts: Parts, ref: BodyRef): Body | undefined {
  if (ref.kind === 'fixed') return parts.bodies[ref.index]
  return ref.kind === 'lead' ? parts.leads[ref.index] : undefined
}

export function partKind(parts: Parts, ref: BodyRef): PartKind {
  if (ref.kind === 'sheet') return 'metal'
  const part = bodyOf(parts, ref)
  return !part ? 'face' : part.kind === 'bar' ? 'metal' : part.kind
}

export const partName = (parts: Parts, ref: BodyRef): string =>
  (ref.kind === 'sheet' ? parts.sheets[ref.index] : bodyOf(parts, ref))?.name ?? 'face'

export function circuitOf(parts: Parts, body: BodyRef): number {
  if (body.kind === 'lead') return parts.circuitOfLead[body.index] ?? -1
  if (body.kind === 'fixed') return parts.circuitOfTube[body.index] ?? -1
  return -1
}

const atEnd = (at: number, length: number): boolean => at < electrodeReach || at > length - electrodeReach

/** The words that fit the places of a body, as bits: at its two ends and between them. */
interface BodyBits {
  readonly first: number
  readonly between: number
  readonly last: number
  /** m; no ends where it is 0 */
  readonly length: number
}

const uniform = (bits: number): BodyBits => ({ first: bits, between: bits, last: bits, length: 0 })
const metalBits = (grounded: boolean): number =>
  partBits.any | partBits.metal | (grounded ? partBits.grounded : partBits.floating)

export function bodyBits(parts: Parts, ref: BodyRef): BodyBits {
  if (ref.kind === 'sheet') return uniform(metalBits(parts.sheets[ref.index]?.grounded === true))
  const part = bodyOf(parts, ref)
  if (!part) return uniform(metalBits(parts.layout.face.metal === 'grounded') | partBits.face)
  if (part.kind === 'bar') return uniform(metalBits(part.grounded))
  const { length } = part.line
  if (part.kind === 'tube') {
    const tube = partBits.any | partBits.tube
    const end = tube | partBits.electrode | (part.boots ? 0 : partBits.bare)
    return { first: end, between: tube | partBits.glass, last: end, length }
  }
  const role = ref.kind === 'lead' && parts.feeds.has(ref.index) ? partBits.feed : partBits.jumper
  const lead = partBits.any | partBits.lead | role
  const end = (name: string) => lead | (onBareElectrode(parts, name) ? partBits.bare : 0)
  return { first: end(part.between[0]), between: lead, last: end(part.between[1]), length }
}

/** The bits at a path length of the body. */
export function bitsAt({ first, between, last, length }: BodyBits, at: number): number {
  if (at < electrodeReach) return first
  return at > length - electrodeReach ? last : between
}

/** Does the lead's end `K.a` sit on an electrode without a boot? Its last bit is then bare as well. */
const onBareElectrode = ({ bodies }: Parts, end: string): boolean => bootless(bodies).has(partOf(end))

/** tubes without boots, listed once for the glass of a sign */
const bare = new WeakMap<readonly FixedBody[], ReadonlySet<string>>()
function bootless(bodies: readonly FixedBody[]): ReadonlySet<string> {
  const known =
    bare.get(bodies) ??
    new Set(bodies.flatMap((body) => (body.kind === 'tube' && !body.boots ? [body.name] : [])))
  bare.set(bodies, known)
  return known
}

/** What the air meets at a place; plates, walls and the face are planes. */
export function surface(parts: Parts, ref: BodyRef, at: number): Surface {
  const part = bodyOf(parts, ref)
  if (!part) return { kind: 'plane', outerRadius: 0, wall: 0, permittivity: 1 }
  const { outerRadius, coreRadius, permittivity } = part
  const wall = outerRadius - coreRadius
  const bare: Surface = { kind: 'bare', outerRadius, wall: 0, permittivity: 1 }
  if (part.kind === 'bar') return bare
  if (part.kind === 'lead') return { kind: 'insulated', outerRadius, wall, permittivity }
  // without a boot the connection is a bare wire, much sharper than the glass it leads into
  return atEnd(at, part.line.length) && !part.boots
    ? { ...bare, outerRadius: parts.layout.lead.conductor / 2 }
    : { kind: 'glass', outerRadius, wall, permittivity }
}

/** Indices of the circuits that two bodies belong to: none, one or two. */
export function circuitsOf(parts: Parts, { a, b }: Pick<CloseRun, 'a' | 'b'>): number[] {
  const [one, two] = [circuitOf(parts, a), circuitOf(parts, b)]
  return one === two ? (one < 0 ? [] : [one]) : [one, two].filter((circuit) => circuit >= 0)
}
