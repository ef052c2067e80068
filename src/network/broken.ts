/**
 * The broken condition: each tube open in turn, no current. Leads and whole tubes on either side of the break stand at
 * their terminal's potential: ±V_oc/2 (midpoint), V_oc and 0 (one-end); without grounding V_oc to ground on either
 * side, and between the sides. The open tube takes the worse side at each of its places.
 *
 * A joint that goes back to the midpoint stays at 0 V, so the string falls into two sections, from a terminal to the
 * joint each: a break leaves V_oc/2 on its terminal's side and 0 V on the joint's. Sections break without each other,
 * as circuits do: between two sections (of one circuit or of two) the difference is |V_a| + |V_b|, each at its worst.
 *
 * So the worst over all breaks follows from where two places stand in their strings: within a section any tube from
 * the one place to the other, open, puts the whole voltage of the section between them.
 */
import type { TubeBody } from '../geometry/conductors.js'
import type { FixedNodes } from '../geometry/nodes.js'
import type { Layout, Supply, Wiring } from '../layout/layout.js'
import { nameplateField } from './nameplate.js'
import { type CircuitString, type StringLadders, stringLadders } from './network.js'
import type { NodeMix } from './potentials.js'
import type { PotentialField } from './solution.js'
import { noLoadVoltage } from './supplies.js'

/** A stretch of string between two places that keep their potential. V rms. */
interface Section {
  readonly circuit: number
  readonly supply: Supply
  /** its tubes from terminal 1 on; the k-th has place 2k + 1 of the string, counted from `first` = 2k of its first lead */
  readonly tubes: readonly string[]
  readonly first: number
  /** signed potentials of the two sides of a break; without grounding one of the cases that may be */
  readonly sides: readonly [number, number]
  /** the most that each side may have to ground, and what lies between them */
  readonly toGround: readonly [number, number]
  readonly across: number
}

/** All breaks of a wiring at once. */
export interface Broken {
  readonly sections: readonly Section[]
  /** of each node: its section; −1 for metal, for tubes without circuit and for a joint at the midpoint */
  readonly section: Int32Array
  /** of each node: its place in the string, 2k for the lead in front of the k-th tube, 2k + 1 for that tube */
  readonly place: Int32Array
}

/** Refuses nothing; nodes as in geometry/nodes.ts with `leadCount` leads behind the fixed ones. */
export function brokenStrings(
  layout: Layout,
  wiring: Wiring,
  tubes: readonly TubeBody[],
  nodes: FixedNodes,
  leadCount: number,
): Broken {
  const ladders = stringLadders(layout, wiring, tubes, nodes)
  const section = new Int32Array(nodes.count + leadCount).fill(-1)
  const place = new Int32Array(nodes.count + leadCount)
  const sections: Section[] = []
  for (const [c, circuit] of ladders.circuits.entries()) {
    const names = circuit.tubes.map(({ tube }) => tubes[tube]!.name)
    const joint = jointPlace(circuit)
    const from = sections.length
    sections.push(...sectionsOf(circuit.supply, c, names, joint))
    eachNode(ladders, circuit, (node, at) => {
      place[node] = at
      // a joint at the midpoint has no side
      section[node] = at === joint ? -1 : from + (joint !== undefined && at > joint ? 1 : 0)
    })
  }
  return { sections, section, place }
}

/** place (2k) of the lead that goes back to the supply's midpoint */
function jointPlace({ supply, midpointReturn, tubes }: CircuitString): number | undefined {
  if (midpointReturn === undefined || supply.grounding !== 'midpoint') return undefined
  return 2 * tubes.filter(({ to }) => to < midpointReturn).length
}

function eachNode(
  { node }: StringLadders,
  { from, tubes }: CircuitString,
  visit: (node: number, place: number) => void,
): void {
  visit(node[from]!, 0)
  for (const [k, along] of tubes.entries()) {
    for (let p = along.from; p <= along.to; p++) visit(node[p]!, 2 * k + 1)
    visit(node[along.to + 1]!, 2 * k + 2)
  }
}

function sectionsOf(
  supply: Supply,
  circuit: number,
  tubes: readonly string[],
  joint: number | undefined,
): Section[] {
  const volts = noLoadVoltage(supply)
  const whole = { circuit, supply, tubes, first: 0 }
  switch (supply.grounding) {
    case 'one-end':
      return [{ ...whole, sides: [volts, 0], toGround: [volts, 0], across: volts }]
    case 'none':
      return [{ ...whole, sides: [volts, 0], toGround: [volts, volts], across: volts }]
    case 'midpoint': {
      const half = volts / 2
      if (joint === undefined)
        return [{ ...whole, sides: [half, -half], toGround: [half, half], across: volts }]
      const [near, far] = [tubes.slice(0, joint / 2), tubes.slice(joint / 2)]
      return [
        { ...whole, tubes: near, sides: [half, 0], toGround: [half, 0], across: half },
        { ...whole, tubes: far, first: joint, sides: [0, -half], toGround: [0, half], across: half },
      ]
    }
  }
}

/** Worst rms difference between two places over all breaks, V. */
export function brokenDifference(broken: Broken, a: NodeMix, b: NodeMix): number {
  const [one, two] = [sectionAt(broken, a), sectionAt(broken, b)]
  if (one >= 0 && one === two) {
    const [p, q] = [broken.place[a.low]!, broken.place[b.low]!]
    // two places of one lead; places of one tube may stand on different sides of its break
    return p === q && p % 2 === 0 ? 0 : broken.sections[one]!.across
  }
  return brokenPotential(broken, a) + brokenPotential(broken, b)
}

/** Worst rms potential to ground of a place over all breaks, V. */
export function brokenPotential(broken: Broken, at: NodeMix): number {
  const k = sectionAt(broken, at)
  if (k < 0) return 0
  const { toGround } = broken.sections[k]!
  const [before, behind] = breaksAbout(broken, k, at)
  return Math.max(behind.length > 0 ? toGround[0] : 0, before.length > 0 ? toGround[1] : 0)
}

/** Which tubes, open, make the worst difference: one, or one of each section. Empty where no break makes any. */
export function openTubes(broken: Broken, a: NodeMix, b: NodeMix): readonly string[] {
  const [one, two] = [sectionAt(broken, a), sectionAt(broken, b)]
  if (one < 0 || one !== two)
    return [a, b].flatMap((at) => (sectionAt(broken, at) < 0 ? [] : openAt(broken, at)))
  const { tubes, first } = broken.sections[one]!
  const [p, q] = [broken.place[a.low]!, broken.place[b.low]!].sort((x, y) => x - y)
  const between = tubes.filter((_, k) => first + 2 * k + 1 >= p! && first + 2 * k + 1 <= q!)
  // a break apart from both places is the plainest to tell of
  const apart = tubes.find((_, k) => first + 2 * k + 1 > p! && first + 2 * k + 1 < q!)
  return apart !== undefined ? [apart] : between.slice(0, 1)
}

/** The break that gives a place the most to ground: the nearest tube apart from the place, else its own. */
function openAt(broken: Broken, at: NodeMix): readonly string[] {
  const k = sectionAt(broken, at)
  const { toGround } = broken.sections[k]!
  const [before, behind] = breaksAbout(broken, k, at)
  const own = broken.place[at.low]! % 2 === 1 ? 1 : 0
  const high = behind.length > 0 ? toGround[0] : 0
  const low = before.length > 0 ? toGround[1] : 0
  if (Math.max(high, low) === 0) return []
  if (high >= low && behind.length > own) return [behind[own]!]
  if (low >= high && before.length > own) return [before.at(-1 - own)!]
  return high >= low ? behind.slice(0, 1) : before.slice(-1)
}

/** Does every supply that takes part at these places have open-circuit protection? */
export const isProtected = ({ sections, section }: Broken, ...places: readonly NodeMix[]): boolean =>
  places.every(({ low }) => {
    const own = low < 0 ? undefined : sections[section[low]!]
    return own === undefined || own.supply.openCircuitProtection
  })

const sectionAt = ({ section }: Broken, { low }: NodeMix): number => (low < 0 ? -1 : section[low]!)

/** Tubes of the section up to a place and from it on, its own among both: breaks in them leave it on that side. */
function breaksAbout(
  { sections, place }: Broken,
  section: number,
  { low }: NodeMix,
): [readonly string[], readonly string[]] {
  const { tubes, first } = sections[section]!
  const within = place[low]! - first
  // places up to 2k + 1 hold k + 1 tubes; a lead stands between two
  const upTo = Math.ceil(within / 2)
  return [tubes.slice(0, upTo), tubes.slice(Math.floor(within / 2))]
}

/** One break of a wiring. */
export interface Break {
  readonly circuit: number
  readonly tube: string
}

/** Every tube in turn, circuit after circuit, from terminal 1 on. */
export const breaksOf = ({ circuits }: Wiring): Break[] =>
  circuits.flatMap(({ string }, circuit) => string.map(({ tube }) => ({ circuit, tube })))

/**
 * A snapshot with one tube open, for a map: one field for each circuit, V rms with sign. What the break does not
 * reach (other circuits, the other half of one with a midpoint return) stands as the nameplate condition has it. The
 * open tube has the potential of the side that is worse to ground; where both are alike, each half of it its own.
 * Without grounding: the case in which all of V_oc stands on terminal 1's side.
 */
export function brokenField(
  layout: Layout,
  wiring: Wiring,
  tubes: readonly TubeBody[],
  nodes: FixedNodes,
  leadCount: number,
  open: string,
): readonly PotentialField[] {
  const whole = nameplateField(layout, wiring, tubes, nodes, leadCount)
  const broken = brokenStrings(layout, wiring, tubes, nodes, leadCount)
  const s = broken.sections.findIndex(({ tubes: own }) => own.includes(open))
  const section = broken.sections[s]
  if (!section) return whole
  const [one, two] = section.sides
  const at = section.first + 2 * section.tubes.indexOf(open) + 1
  return whole.map((field, c) => {
    if (c !== section.circuit) return field
    const re = field.re.slice()
    for (let i = 0; i < re.length; i++) {
      if (broken.section[i] !== s) continue
      const place = broken.place[i]!
      if (place !== at) re[i] = place < at ? one : two
      else if (Math.abs(one) !== Math.abs(two)) re[i] = Math.abs(one) > Math.abs(two) ? one : two
    }
    if (Math.abs(one) === Math.abs(two)) halves(layout, wiring, nodes, open, re, section.sides)
    return { ...field, re }
  })
}

/** The half of an open tube towards terminal 1 at one potential, the other half at the other. */
function halves(
  layout: Layout,
  { circuits }: Wiring,
  nodes: FixedNodes,
  open: string,
  re: Float64Array,
  [one, two]: readonly [number, number],
): void {
  const { first, at } = nodes.tubes[layout.tubes.findIndex(({ id }) => id === open)]!
  const reversed = circuits.some(({ string }) => string.some((e) => e.tube === open && e.reversed))
  const length = at[at.length - 1]!
  for (let k = 0; k < at.length; k++) re[first + k] = at[k]! <= length / 2 === reversed ? two : one
}
