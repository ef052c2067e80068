/** Two bodies at the place where they pass each other, in the words of rules: part bits, supplies, metal. */
import type { Surface } from '../gaps/gap-stress.js'
import type { Body, FixedBody, LeadBody } from '../geometry/conductors.js'
import type { BodyRef, CloseRun } from '../geometry/runs.js'
import type { Face, Supply } from '../layout/layout.js'
import type { PartKind } from './findings.js'
import { partBits } from './rule-set.js'

/** The sign as the rules see it. */
export interface Parts {
  readonly layout: { readonly face: Face }
  readonly bodies: readonly FixedBody[]
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
  const part = bodyOf(parts, ref)
  return !part ? 'face' : part.kind === 'bar' ? 'metal' : part.kind
}

export const partName = (parts: Parts, ref: BodyRef): string => bodyOf(parts, ref)?.name ?? 'face'

export function circuitOf(parts: Parts, body: BodyRef): number {
  if (body.kind === 'lead') return parts.circuitOfLead[body.index] ?? -1
  if (body.kind === 'fixed') return parts.circuitOfTube[body.index] ?? -1
  return -1
}

const atEnd = (at: number, length: number): boolean => at < electrodeReach || at > length - electrodeReach

/** The words that fit a place of a body, as bits. */
export function placeBits(parts: Parts, ref: BodyRef, at: number): number {
  const part = bodyOf(parts, ref)
  if (!part) {
    const grounded = parts.layout.face.metal === 'grounded'
    return partBits.any | partBits.metal | partBits.face | (grounded ? partBits.grounded : partBits.floating)
  }
  if (part.kind === 'bar')
    return partBits.any | partBits.metal | (part.grounded ? partBits.grounded : partBits.floating)
  if (part.kind === 'tube') {
    const place = !atEnd(at, part.line.length)
      ? partBits.glass
      : partBits.electrode | (part.boots ? 0 : partBits.bare)
    return partBits.any | partBits.tube | place
  }
  const role = ref.kind === 'lead' && parts.feeds.has(ref.index) ? partBits.feed : partBits.jumper
  return partBits.any | partBits.lead | role | (bareLead(parts, part, at) ? partBits.bare : 0)
}

/** The end of a lead on an electrode without a boot. */
function bareLead({ bodies }: Parts, { between, line }: LeadBody, at: number): boolean {
  if (!atEnd(at, line.length)) return false
  const end = between[at < electrodeReach ? 0 : 1]
  const tube = end.slice(0, end.lastIndexOf('.'))
  return bodies.some((body) => body.kind === 'tube' && body.name === tube && !body.boots)
}

/** What the air meets at a place. */
export function surface(parts: Parts, ref: BodyRef, at: number): Surface {
  const part = bodyOf(parts, ref)
  if (!part) return { kind: 'plane', outerRadius: 0, wall: 0, permittivity: 1 }
  const { outerRadius, coreRadius, permittivity } = part
  const wall = outerRadius - coreRadius
  const bare: Surface = { kind: 'bare', outerRadius, wall: 0, permittivity: 1 }
  if (part.kind === 'bar') return bare
  if (part.kind === 'lead') return { kind: 'insulated', outerRadius, wall, permittivity }
  return atEnd(at, part.line.length) && !part.boots ? bare : { kind: 'glass', outerRadius, wall, permittivity }
}

/** Indices of the circuits that two bodies belong to: none, one or two. */
export function circuitsOf(parts: Parts, { a, b }: Pick<CloseRun, 'a' | 'b'>): number[] {
  const [one, two] = [circuitOf(parts, a), circuitOf(parts, b)]
  return one === two ? (one < 0 ? [] : [one]) : [one, two].filter((circuit) => circuit >= 0)
}
