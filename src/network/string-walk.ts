/**
 * The way along a string to two of its places, as phasors: what each lead and each stretch of tube drops, and the
 * difference that comes of it. V rms phasors of one field, m.
 */
import type { BodyRef } from '../geometry/runs.js'
import type { Wiring } from '../layout/layout.js'
import { type Complex, minus, plus } from '../math/complex.js'
import { nodeMix, type Probe, potentialAt } from './potentials.js'
import type { PotentialField } from './solution.js'

export interface BodyPlace {
  readonly body: BodyRef
  /** path length from end a (tube) or the first end (lead), m */
  readonly at: number
}

/** One lead, or one tube or a part of it, in the direction from terminal 1 to terminal 2. */
export interface WalkStep {
  readonly body: BodyRef
  /** path lengths on the tube where the stretch begins and ends; 0 on a lead, which has one potential */
  readonly from: number
  readonly to: number
  readonly drop: Complex
  /** what of the drop lies at the electrodes that were passed */
  readonly electrodes: Complex
  /** potential where the step ends */
  readonly reached: Complex
}

export interface Leg {
  readonly start: Complex
  readonly steps: readonly WalkStep[]
  readonly end: Complex
}

/** The difference between two places in the field of one supply, with the way there where it lies on its string. */
export interface DifferenceSteps {
  readonly supply: string
  /** index among the wiring's circuits */
  readonly circuit: number
  /** which of the two the string meets first; absent where neither place is on it */
  readonly first?: 'a' | 'b'
  /** from terminal 1 to the first place, and on to the second where that is on the string too */
  readonly toFirst?: Leg
  readonly onward?: Leg
  readonly atA: Complex
  readonly atB: Complex
  /** atA − atB */
  readonly difference: Complex
}

/** What is walked on. `tubeIds` in the order of the layout. */
export interface WalkedSign {
  readonly wiring: Wiring
  readonly tubeIds: readonly string[]
  readonly probe: Probe
}

/** Place along a string: which of its parts (lead, tube, lead, …), and how far into that part in its direction. */
interface Station {
  readonly part: number
  readonly along: number
}
interface StringPart {
  readonly body: Exclude<BodyRef, { kind: 'face' }>
  readonly reversed: boolean
  readonly length: number
}

export function differenceSteps(
  sign: WalkedSign,
  field: PotentialField,
  a: BodyPlace,
  b: BodyPlace,
): DifferenceSteps {
  const circuit = sign.wiring.circuits.findIndex((c) => c.supply === field.supply)
  const parts = stringParts(sign, circuit)
  const [stationA, stationB] = [stationOf(parts, a), stationOf(parts, b)]
  const [atA, atB] = [atPlace(sign, field, a), atPlace(sign, field, b)]
  const bFirst =
    stationB !== undefined && (stationA === undefined || inOrder(stationB, stationA) < 0) ? 'b' : 'a'
  const [first, second] = bFirst === 'b' ? [stationB, stationA] : [stationA, stationB]
  const walked = (from: Station, to: Station) => leg(sign, field, parts, from, to)
  return {
    supply: field.supply,
    circuit,
    ...(first && { first: bFirst, toFirst: walked(terminal, first) }),
    ...(first && second && { onward: walked(first, second) }),
    atA,
    atB,
    difference: minus(atA, atB),
  }
}

/** in front of the first lead, which is then walked too */
const terminal: Station = { part: 0, along: -1 }

const inOrder = (one: Station, other: Station): number => one.part - other.part || one.along - other.along

/** Lead, tube, lead, … of a circuit. Leads are numbered over all circuits. */
function stringParts({ wiring, tubeIds, probe }: WalkedSign, circuit: number): StringPart[] {
  let lead = 0
  for (const { string } of wiring.circuits.slice(0, Math.max(0, circuit))) lead += string.length + 1
  const leadPart = (index: number): StringPart => ({
    body: { kind: 'lead', index },
    reversed: false,
    length: 0,
  })
  const parts = [leadPart(lead)]
  for (const { tube, reversed } of wiring.circuits[circuit]?.string ?? []) {
    const index = tubeIds.indexOf(tube)
    const length = probe.nodes.tubes[index]!.at.at(-1)!
    parts.push({ body: { kind: 'fixed', index }, reversed, length }, leadPart(++lead))
  }
  return parts
}

function stationOf(parts: readonly StringPart[], { body, at }: BodyPlace): Station | undefined {
  if (body.kind === 'face') return undefined
  const part = parts.findIndex((p) => p.body.kind === body.kind && p.body.index === body.index)
  if (part < 0) return undefined
  const { reversed, length } = parts[part]!
  return { part, along: body.kind === 'lead' ? 0 : reversed ? length - at : at }
}

function leg(
  sign: WalkedSign,
  field: PotentialField,
  parts: readonly StringPart[],
  from: Station,
  to: Station,
): Leg {
  const steps: WalkStep[] = []
  for (let k = from.part; k <= to.part; k++) {
    const part = parts[k]!
    const begins = k === from.part ? from.along : 0
    const ends = k === to.part ? to.along : part.length
    // the lead one stands on is not walked, nor a tube of which nothing lies between the two
    if (part.body.kind === 'lead' ? k === from.part && begins >= 0 : ends <= begins) continue
    steps.push(step(sign, field, part, begins, ends))
  }
  return { start: potentialOn(sign, field, parts, from), steps, end: potentialOn(sign, field, parts, to) }
}

const onBody = ({ body, reversed, length }: StringPart, along: number): BodyPlace => ({
  body,
  at: reversed ? length - along : along,
})

const potentialOn = (
  sign: WalkedSign,
  field: PotentialField,
  parts: readonly StringPart[],
  { part, along }: Station,
): Complex => atPlace(sign, field, onBody(parts[part]!, along))

const atPlace = ({ probe }: WalkedSign, field: PotentialField, { body, at }: BodyPlace): Complex =>
  potentialAt(field, nodeMix(probe, body, at))

function step(
  sign: WalkedSign,
  field: PotentialField,
  part: StringPart,
  begins: number,
  ends: number,
): WalkStep {
  const [one, two] = [onBody(part, begins), onBody(part, ends)]
  const reached = atPlace(sign, field, two)
  return {
    body: part.body,
    from: one.at,
    to: two.at,
    drop: minus(atPlace(sign, field, one), reached),
    electrodes: electrodeDrops(sign, field, part, begins, ends),
    reached,
  }
}

/** Between an electrode and the end of the column at it, for each end of the tube that the stretch begins or ends at. */
function electrodeDrops(
  sign: WalkedSign,
  field: PotentialField,
  part: StringPart,
  begins: number,
  ends: number,
): Complex {
  let sum: Complex = { re: 0, im: 0 }
  if (part.body.kind === 'lead') return sum
  const { first, at } = sign.probe.nodes.tubes[part.body.index]!
  const last = first + at.length - 1
  const column = (along: number): Complex => {
    const node = along <= 0 === part.reversed ? last : first
    return { re: field.re[node]!, im: field.im[node]! }
  }
  for (const along of [begins, ends]) {
    if (along > 0 && along < part.length) continue
    const away = minus(atPlace(sign, field, onBody(part, along)), column(along))
    sum = along <= 0 ? plus(sum, away) : minus(sum, away)
  }
  return sum
}
