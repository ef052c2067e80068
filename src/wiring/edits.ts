/**
 * Edits of the wiring: pure functions from one wiring to the next. An edit that cannot be made says why and changes
 * nothing. Edits of figures are in figure-edits.ts, those between circuits in circuit-edits.ts.
 *
 * A circuit is a closed loop: supply – tube – jumper – tube – … – supply. Links are counted along it: link 0 is the
 * lead at terminal 1, link i the jumper in front of string[i], link n the lead at terminal 2.
 */
import { enteringEnd, leavingEnd, partOf } from '../layout/ends.js'
import type { CircuitWiring, EndName, Layout, StringEntry, Variant, Wiring } from '../layout/layout.js'
import { done, type Edit, refused } from './edit.js'

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
  const { supply } = wiring.circuits[circuit]!
  if (partOf(first) === partOf(second))
    return refused(
      partOf(first) === supply
        ? { code: 'both-terminals', supply }
        : { code: 'same-tube', tube: partOf(first) },
    )

  // hold the loop so that it leaves the first end, and start it right behind that end
  const loop = loopOf(wiring.circuits[circuit]!)
  const running = loop.some((l) => l.leaves === first) ? loop : backwards(loop)
  const start = running.findIndex((l) => l.leaves === first)
  const rest = [...running.slice(start + 1), ...running.slice(0, start)]
  const head = running[start]!
  const at = rest.findIndex((l) => partOf(second) === l.id)
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
