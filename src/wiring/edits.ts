/**
 * Edits of the wiring and of the few figures that may be changed by hand: pure functions from one Sign to the next.
 * An edit that cannot be made says why and changes nothing.
 *
 * A circuit is a closed loop: supply – tube – jumper – tube – … – supply. Links are counted along it: link 0 is the
 * lead at terminal 1, link i the jumper in front of string[i], link n the lead at terminal 2.
 */
import type {
  CircuitWiring,
  EndName,
  Fill,
  Layout,
  PathPoint,
  StringEntry,
  Supply,
  Variant,
  Wiring,
} from '../layout/layout.js'
import { done, type Edit, refused } from './edit.js'

export type { Edit, Refusal, Sign } from './edit.js'

export const enteringEnd = ({ tube, reversed }: StringEntry): EndName => `${tube}.${reversed ? 'b' : 'a'}`
export const leavingEnd = ({ tube, reversed }: StringEntry): EndName => `${tube}.${reversed ? 'a' : 'b'}`
const turned = (entry: StringEntry): StringEntry => ({ tube: entry.tube, reversed: !entry.reversed })

/** Circuit and place in the string of a tube. */
export function placeOf(wiring: Wiring, tube: string): { circuit: number; place: number } | undefined {
  for (const [circuit, { string }] of wiring.circuits.entries()) {
    const place = string.findIndex((entry) => entry.tube === tube)
    if (place >= 0) return { circuit, place }
  }
  return undefined
}

const withString = (wiring: Wiring, circuit: number, string: readonly StringEntry[]): Wiring => ({
  circuits: wiring.circuits.map((c, i) => (i === circuit ? restrung(c, string) : c)),
})

/** The way back to the midpoint stays at its tube end, as long as that lies inside the string and not at the feed. */
export function restrung(
  { midpointReturn, ...rest }: CircuitWiring,
  string: readonly StringEntry[],
): CircuitWiring {
  const inside = [...string.slice(0, -1).map(leavingEnd), ...string.slice(1).map(enteringEnd)]
  const stays = midpointReturn !== undefined && inside.includes(midpointReturn)
  return stays ? { ...rest, string, midpointReturn } : { ...rest, string }
}

/** Turns the link in front of string[link] into the feed, and the old feed into a jumper. */
export function moveFeed(wiring: Wiring, circuit: number, link: number): Edit<Wiring> {
  const string = wiring.circuits[circuit]?.string
  if (string === undefined) return refused({ code: 'no-such-part', part: `circuit ${circuit + 1}` })
  const n = string.length
  const start = ((link % n) + n) % n
  if (start === 0) return refused({ code: 'nothing-to-change', what: 'the feed is there already' })
  return done(withString(wiring, circuit, [...string.slice(start), ...string.slice(0, start)]))
}

/**
 * Feeds a tube from its other end: the feed moves to the link at the far end of the tube. The near end is the one
 * that the feed joins now, or, for a tube inside the string, the end it is entered at.
 */
export function feedFromOtherEnd(wiring: Wiring, tube: string): Edit<Wiring> {
  const found = placeOf(wiring, tube)
  if (!found) return refused({ code: 'no-such-part', part: tube })
  const { string, supply } = wiring.circuits[found.circuit]!
  if (string.length === 1) return refused({ code: 'only-tube', supply })
  // the last tube hangs on terminal 2 by its leaving end: its other end is the one it is entered at
  const last = found.place === string.length - 1
  return moveFeed(wiring, found.circuit, last ? found.place : found.place + 1)
}

/** Turns one tube end for end: the lead at its end a goes to b, and the one at b to a. */
export function turnTube(wiring: Wiring, tube: string): Edit<Wiring> {
  const found = placeOf(wiring, tube)
  if (!found) return refused({ code: 'no-such-part', part: tube })
  const { string } = wiring.circuits[found.circuit]!
  return done(
    withString(
      wiring,
      found.circuit,
      string.map((entry, i) => (i === found.place ? turned(entry) : entry)),
    ),
  )
}

/** Terminal 1 takes the lead of terminal 2 and the other way round: the whole string runs backwards. */
export function swapTerminals(wiring: Wiring, circuit: number): Edit<Wiring> {
  const string = wiring.circuits[circuit]?.string
  if (string === undefined) return refused({ code: 'no-such-part', part: `circuit ${circuit + 1}` })
  return done(withString(wiring, circuit, string.map(turned).reverse()))
}

/** Moves a tube one place earlier (−1) or later (+1) in its string. */
export function shiftTube(wiring: Wiring, tube: string, by: -1 | 1): Edit<Wiring> {
  const found = placeOf(wiring, tube)
  if (!found) return refused({ code: 'no-such-part', part: tube })
  const string = [...wiring.circuits[found.circuit]!.string]
  const to = found.place + by
  const [entry, other] = [string[found.place], string[to]]
  if (entry === undefined || other === undefined)
    return refused({
      code: 'nothing-to-change',
      what: `${tube} is ${by < 0 ? 'first' : 'last'} in the string already`,
    })
  string[to] = entry
  string[found.place] = other
  return done(withString(wiring, found.circuit, string))
}

/** One piece of the loop with the end the loop enters it by and the end it leaves by. The supply is one of them. */
interface Link {
  readonly id: string
  readonly enters: EndName
  readonly leaves: EndName
  readonly entry?: StringEntry
}
const backwards = (loop: readonly Link[]): Link[] =>
  loop
    .map((l) => ({ ...l, enters: l.leaves, leaves: l.enters, ...(l.entry && { entry: turned(l.entry) }) }))
    .reverse()

function loopOf({ supply, string }: CircuitWiring): Link[] {
  return [
    { id: supply, enters: `${supply}.2`, leaves: `${supply}.1` },
    ...string.map((entry) => ({
      id: entry.tube,
      enters: enteringEnd(entry),
      leaves: leavingEnd(entry),
      entry,
    })),
  ]
}

function stringOf(loop: readonly Link[]): StringEntry[] {
  const at = loop.findIndex((l) => l.entry === undefined)
  const cut = [...loop.slice(at), ...loop.slice(0, at)]
  // the string is told from terminal 1: a supply that the loop enters at 1 means we hold the loop backwards
  const forwards = cut[0]!.leaves.endsWith('.1') ? cut : backwards([...cut.slice(1), cut[0]!])
  return forwards.flatMap((l) => l.entry ?? [])
}

/**
 * Joins two ends (of tubes or of the supply) by a jumper and closes the loop again with the least change:
 * two ends that the loop leaves (or enters) are joined by running the stretch between them backwards; where that
 * would cut a stretch out of the loop, the stretch is put back behind the second tube.
 */
export function joinEnds(wiring: Wiring, first: EndName, second: EndName): Edit<Wiring> {
  const holds = (end: EndName) =>
    wiring.circuits.findIndex((c) => loopOf(c).some((l) => l.enters === end || l.leaves === end))
  const circuit = holds(first)
  if (circuit < 0) return refused({ code: 'no-such-part', part: first })
  if (holds(second) < 0) return refused({ code: 'no-such-part', part: second })
  if (holds(second) !== circuit) return refused({ code: 'other-circuit', ends: [first, second] })
  const part = (end: EndName) => end.slice(0, end.lastIndexOf('.'))
  const { supply } = wiring.circuits[circuit]!
  if (part(first) === part(second))
    return refused(
      part(first) === supply ? { code: 'both-terminals', supply } : { code: 'same-tube', tube: part(first) },
    )

  // hold the loop so that it leaves the first end, and start it right behind that end
  const loop = loopOf(wiring.circuits[circuit]!)
  const running = loop.some((l) => l.leaves === first) ? loop : backwards(loop)
  const start = running.findIndex((l) => l.leaves === first)
  const rest = [...running.slice(start + 1), ...running.slice(0, start)]
  const head = running[start]!
  const at = rest.findIndex((l) => part(second) === l.id)
  const target = rest[at]!
  if (at === 0 && target.enters === second)
    return refused({ code: 'nothing-to-change', what: `${first} and ${second} are joined already` })
  const next =
    target.leaves === second
      ? [head, ...backwards(rest.slice(0, at + 1)), ...rest.slice(at + 1)]
      : [head, target, ...rest.slice(0, at), ...rest.slice(at + 1)]
  return done(withString(wiring, circuit, stringOf(next)))
}

/** What a bench worker takes off and puts on to get from one wiring to the other: joined ends, in string order. */
export function wiringChange(
  before: Wiring,
  after: Wiring,
): { off: [EndName, EndName][]; on: [EndName, EndName][] } {
  const joints = (wiring: Wiring) =>
    wiring.circuits.flatMap((c) => {
      const loop = loopOf(c)
      return loop.map((l, i): [EndName, EndName] => [l.leaves, loop[(i + 1) % loop.length]!.enters])
    })
  const name = ([a, b]: readonly [EndName, EndName]) => (a < b ? `${a} ${b}` : `${b} ${a}`)
  const had = new Set(joints(before).map(name))
  const has = new Set(joints(after).map(name))
  return {
    off: joints(before).filter((j) => !has.has(name(j))),
    on: joints(after).filter((j) => !had.has(name(j))),
  }
}

export const sameWiring = (one: Wiring, other: Wiring): boolean =>
  one.circuits.length === other.circuits.length &&
  one.circuits.every((c, i) => {
    const d = other.circuits[i]!
    return (
      c.supply === d.supply &&
      c.midpointReturn === d.midpointReturn &&
      c.string.length === d.string.length &&
      c.string.every(
        (entry, k) => entry.tube === d.string[k]!.tube && entry.reversed === d.string[k]!.reversed,
      )
    )
  })

/** The figures of a supply that can be typed in. SI. */
export type SupplyFigures = Partial<
  Pick<
    Supply,
    | 'noLoadVoltage'
    | 'shortCircuitCurrent'
    | 'frequency'
    | 'ratedPower'
    | 'groundFaultTrip'
    | 'maxLead'
    | 'grounding'
    | 'type'
  >
>

const within = (value: number | undefined, low: number, high: number): boolean =>
  value === undefined || (Number.isFinite(value) && value >= low && value <= high)

/** Changes nameplate figures of a supply. */
export function withSupply(layout: Layout, id: string, figures: SupplyFigures): Edit<Layout> {
  if (!layout.supplies.some((s) => s.id === id)) return refused({ code: 'no-such-part', part: id })
  const limits: [
    keyof SupplyFigures & ('noLoadVoltage' | 'shortCircuitCurrent' | 'frequency'),
    number,
    number,
    string,
  ][] = [
    ['noLoadVoltage', 100, 30_000, '0.1 to 30 kV'],
    ['shortCircuitCurrent', 0.001, 1, '1 to 1000 mA'],
    ['frequency', 10, 200_000, '10 to 200000 Hz'],
  ]
  for (const [key, low, high, allowed] of limits)
    if (!within(figures[key], low, high)) return refused({ code: 'out-of-range', what: key, allowed })
  return done({ ...layout, supplies: layout.supplies.map((s) => (s.id === id ? { ...s, ...figures } : s)) })
}

/** Puts the supply at another place; its two terminals keep their distance and height. */
export function withSupplyAt(layout: Layout, id: string, x: number, y: number): Edit<Layout> {
  const supply = layout.supplies.find((s) => s.id === id)
  if (!supply) return refused({ code: 'no-such-part', part: id })
  const [one, two] = supply.terminals
  const [cx, cy] = [(one.x + two.x) / 2, (one.y + two.y) / 2]
  const moved = (p: PathPoint): PathPoint => ({ ...p, x: p.x - cx + x, y: p.y - cy + y })
  const terminals: [PathPoint, PathPoint] = [moved(one), moved(two)]
  return done({ ...layout, supplies: layout.supplies.map((s) => (s.id === id ? { ...s, terminals } : s)) })
}

/** Lifts (or lowers) the centre-line of a tube to this height, m; places drawn with their own z stay. */
export function withTubeHeight(layout: Layout, id: string, height: number): Edit<Layout> {
  if (!layout.tubes.some((t) => t.id === id)) return refused({ code: 'no-such-part', part: id })
  if (!within(height, -2, 2))
    return refused({ code: 'out-of-range', what: 'height', allowed: '-2000 to 2000 mm' })
  return done({ ...layout, tubes: layout.tubes.map((t) => (t.id === id ? { ...t, height } : t)) })
}

/** Refills a tube: another gas, another gradient. */
export function withTubeFill(layout: Layout, id: string, fill: Fill): Edit<Layout> {
  const tube = layout.tubes.find((t) => t.id === id)
  if (!tube) return refused({ code: 'no-such-part', part: id })
  if (tube.fill === fill)
    return refused({ code: 'nothing-to-change', what: `${id} is filled with ${fill} already` })
  return done({ ...layout, tubes: layout.tubes.map((t) => (t.id === id ? { ...t, fill } : t)) })
}

/** Keeps a wiring under a name; a variant of the same name is replaced. */
export function withVariant(layout: Layout, name: string, wiring: Wiring): Layout {
  const variant: Variant = { name, circuits: wiring.circuits }
  const known = layout.variants.some((v) => v.name === name)
  return {
    ...layout,
    variants: known
      ? layout.variants.map((v) => (v.name === name ? variant : v))
      : [...layout.variants, variant],
  }
}
