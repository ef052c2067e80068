/** Edits asked for by a key, a typed value or a choice: each makes a new sign, says what it did and asks for a solution. */
import { inspection, preparedAgain } from '../inspection.js'
import { enteringEnd, leavingEnd } from '../layout/ends.js'
import type { Fill, Layout, Wiring } from '../layout/layout.js'
import { kv as kvText, length as lengthText, ma } from '../view/words.js'
import type { Edit, Sign } from '../wiring/edit.js'
import {
  feedFromOtherEnd,
  joinEnds,
  moveFeed,
  placeOf,
  sameWiring,
  shiftTube,
  swapTerminals,
  turnTube,
  wiringChange,
  withVariant,
} from '../wiring/edits.js'
import {
  type SupplyFigures,
  withSupply,
  withSupplyAt,
  withTubeFill,
  withTubeHeight,
} from '../wiring/figure-edits.js'
import { footsOfPair, footUnderCursor, placeOfCursor } from './aim.js'
import type { Action } from './keys.js'
import { refusalText } from './refusal-text.js'
import { type Foot, type Next, type State, type Step, say, selectedPair, unsaved } from './state.js'

/** Shows a sign: the wiring is in force at once, its figures follow when the solution is there. */
function shown(
  state: State,
  present: Step,
  past: readonly Step[],
  future: readonly Step[],
  said = present.said,
): Next {
  const prepared = preparedAgain(state.prepared, present.sign.layout)
  const moved = prepared !== state.prepared
  const { mark, solved, ...rest } = state
  const next: State = {
    ...rest,
    cursor: pinned(state),
    // a lead that is marked may be another one in the new wiring
    ...(mark && mark.body.kind !== 'lead' && { mark }),
    // a solution of the old glass must not be read with the new
    ...(solved && !moved && { solved }),
    present,
    past,
    future,
    prepared,
    // new glass makes the old picture wrong: show the new one on paper until it is solved
    inspection: moved
      ? inspection(prepared, present.sign.wiring, undefined, state.condition)
      : state.inspection,
    solving: true,
    revision: state.revision + 1,
    pending: { said, before: state.pending?.before ?? state.inspection },
    message: { text: `${said} – solving`, level: 'plain' },
  }
  return { state: next, effects: [{ do: 'solve' }] }
}

/** The cursor stays on the pair it is on, so that a second key acts on the same tube whatever is worst now. */
function pinned(state: State): State['cursor'] {
  const { cursor } = state
  return cursor.on === 'pair' ? { ...cursor, key: cursor.key ?? selectedPair(state)?.pair.key } : cursor
}

function commit(state: State, sign: Sign, said: string): Next {
  const { present, past } = state
  return shown(state, { sign, said }, [...past, present], [])
}

export const withWiring = (state: State, edit: Edit<Wiring>, said: string): Next =>
  edit.ok
    ? commit(state, { ...state.present.sign, wiring: edit.value }, withChange(state, edit.value, said))
    : say(state, refusalText(edit.why), 'bad')

const withLayout = (state: State, edit: Edit<Layout>, said: string): Next =>
  edit.ok
    ? commit(state, { ...state.present.sign, layout: edit.value }, said)
    : say(state, refusalText(edit.why), 'bad')

/** how many joints had to change besides what was asked for */
function withChange(state: State, wiring: Wiring, said: string): string {
  const { off, on } = wiringChange(state.present.sign.wiring, wiring)
  return on.length > 2 ? `${said} (${on.length} leads change: ${off.length} off, ${on.length} on)` : said
}

export function undo(state: State): Next {
  const last = state.past[state.past.length - 1]
  if (!last) return say(state, 'Nothing to undo.')
  const { present, past, future } = state
  return shown(state, last, past.slice(0, -1), [present, ...future], `undone: ${present.said}`)
}

export function redo(state: State): Next {
  const [first, ...rest] = state.future
  if (!first) return say(state, 'Nothing to redo.')
  return shown(state, first, [...state.past, state.present], rest, `again: ${first.said}`)
}

export function asFiled(state: State): Next {
  const { sign } = state.opened
  if (!unsaved(state)) return say(state, "This is the file's wiring already.")
  return commit(state, sign, "back to the file's wiring")
}

/** Edits that need no more than the cursor. */
export function editByKey(state: State, action: Action): Next | undefined {
  const { wiring } = state.present.sign
  switch (action) {
    case 'feed-other-end':
      return onTube(state, (tube) =>
        withWiring(state, feedFromOtherEnd(wiring, tube), `fed ${tube} from its other end`),
      )
    case 'turn-tube':
      return onTube(state, (tube) => withWiring(state, turnTube(wiring, tube), `turned ${tube} end for end`))
    case 'earlier':
      return onTube(state, (tube) =>
        withWiring(state, shiftTube(wiring, tube, -1), `${tube} one place earlier`),
      )
    case 'later':
      return onTube(state, (tube) => withWiring(state, shiftTube(wiring, tube, 1), `${tube} one place later`))
    case 'swap-terminals':
      return withWiring(state, swapTerminals(wiring, circuitUnderCursor(state)), 'swapped the two terminals')
    case 'join-ends':
      return joinAtCursor(state)
    case 'supply-here':
      return supplyHere(state)
    default:
      return undefined
  }
}

export function onTube(state: State, act: (tube: string) => Next): Next {
  const tube = tubeUnderCursor(state)
  return tube === undefined ? say(state, 'No tube under the cursor. Move it onto glass.', 'bad') : act(tube)
}

/** The tube the cursor is on; on a pair with one tube only, that one. */
export function tubeUnderCursor(state: State): string | undefined {
  const foot = footUnderCursor(state)
  const pair = footsOfPair(state)
  for (const candidate of [foot, pair?.a, pair?.b]) {
    const tube = tubeOf(state, candidate)
    if (tube !== undefined) return tube
  }
  return undefined
}

function tubeOf(state: State, foot: Foot | undefined): string | undefined {
  if (foot?.body.kind !== 'fixed') return undefined
  return state.prepared.tubes[foot.body.index]?.name
}

export function circuitUnderCursor(state: State): number {
  const tube = tubeUnderCursor(state)
  return (tube === undefined ? undefined : placeOf(state.present.sign.wiring, tube)?.circuit) ?? 0
}

/** Joins the tube ends nearest to the two places: of the pair, or of mark and cursor. */
function joinAtCursor(state: State): Next {
  const here = footUnderCursor(state)
  const pair = footsOfPair(state)
  const [first, second] =
    state.mark && here ? [state.mark, here] : pair ? [pair.a, pair.b] : [undefined, undefined]
  const ends = [endNear(state, first), endNear(state, second)] as const
  if (ends[0] === undefined || ends[1] === undefined)
    return say(
      state,
      'A jumper needs two tube ends: a pair of tubes, or a mark (m) on one and the cursor on the other.',
      'bad',
    )
  return withWiring(
    state,
    joinEnds(state.present.sign.wiring, ends[0], ends[1]),
    `jumper ${ends[0]}–${ends[1]}`,
  )
}

export function endNear(state: State, foot: Foot | undefined): string | undefined {
  const tube = tubeOf(state, foot)
  if (tube === undefined || foot?.body.kind !== 'fixed') return undefined
  const { line } = state.prepared.tubes[foot.body.index]!
  return `${tube}.${foot.at <= line.length / 2 ? 'a' : 'b'}`
}

function supplyHere(state: State): Next {
  const place = placeOfCursor(state)
  const circuit = state.present.sign.wiring.circuits[circuitUnderCursor(state)]
  if (!place || !circuit) return say(state, 'Move the cursor to where the supply shall be.', 'bad')
  return withLayout(
    state,
    withSupplyAt(state.present.sign.layout, circuit.supply, place.x, place.y),
    `${circuit.supply} moved to the cursor`,
  )
}

export const feedAt = (state: State, circuit: number, link: number): Next =>
  withWiring(
    state,
    moveFeed(state.present.sign.wiring, circuit, link),
    `feed moved to ${linkName(state, circuit, link)}`,
  )

/** `K.b–I.a`: the ends that a link of the loop joins */
export function linkName(state: State, circuit: number, link: number): string {
  const { string, supply } = state.present.sign.wiring.circuits[circuit]!
  const before = string[link - 1]
  const after = string[link]
  return `${before ? leavingEnd(before) : `${supply}.1`}–${after ? enteringEnd(after) : `${supply}.2`}`
}

export const heightTyped = (state: State, tube: string, metres: number): Next =>
  withLayout(
    state,
    withTubeHeight(state.present.sign.layout, tube, metres),
    `${tube} at height ${lengthText(metres, state.present.sign.layout.units)}`,
  )

export const fillChosen = (state: State, tube: string, fill: Fill): Next =>
  withLayout(state, withTubeFill(state.present.sign.layout, tube, fill), `${tube} filled with ${fill}`)

export function figureTyped(state: State, supply: string, figures: SupplyFigures): Next {
  const said = [
    figures.noLoadVoltage !== undefined ? kvText(figures.noLoadVoltage) : '',
    figures.shortCircuitCurrent !== undefined ? ma(figures.shortCircuitCurrent) : '',
    figures.frequency !== undefined ? `${figures.frequency} Hz` : '',
    figures.type ?? '',
    figures.grounding ? `grounding ${figures.grounding}` : '',
  ].filter((text) => text !== '')
  return withLayout(
    state,
    withSupply(state.present.sign.layout, supply, figures),
    `${supply}: ${said.join(', ')}`,
  )
}

export function variantChosen(state: State, name: string): Next {
  const variant = state.present.sign.layout.variants.find((v) => v.name === name)
  if (!variant) return say(state, `There is no variant "${name}".`, 'bad')
  if (sameWiring(variant, state.present.sign.wiring)) return say(state, `"${name}" is on the screen already.`)
  return commit(state, { ...state.present.sign, wiring: { circuits: variant.circuits } }, `variant "${name}"`)
}

/**
 * Before a save: where a variant takes the place of the file's wiring, and nothing else keeps that, it is kept as a
 * variant itself. What a shop had filed must not go for looking at something else.
 */
export function filedKept(state: State): State {
  const { layout, wiring } = state.present.sign
  const filed = state.opened.sign.wiring
  const kept = (one: Wiring) => layout.variants.some((v) => sameWiring(v, one))
  if (sameWiring(filed, wiring) || !kept(wiring) || kept(filed)) return state
  const names = new Set(layout.variants.map((v) => v.name))
  let name = 'filed before'
  for (let k = 2; names.has(name); k++) name = `filed before ${k}`
  const sign: Sign = { layout: withVariant(layout, name, filed), wiring }
  return {
    ...state,
    present: { sign, said: `${state.present.said}; the wiring filed before kept as "${name}"` },
    prepared: preparedAgain(state.prepared, sign.layout),
  }
}

export function variantKept(state: State, name: string): Next {
  const { layout, wiring } = state.present.sign
  const text = name.trim()
  if (text === '') return say(state, 'A variant needs a name.', 'bad')
  const sign: Sign = { layout: withVariant(layout, text, wiring), wiring }
  // nothing electrical changed: no new solution is needed
  const { present, past } = state
  return say(
    {
      ...state,
      present: { sign, said: `kept as "${text}"` },
      past: [...past, present],
      future: [],
      prepared: preparedAgain(state.prepared, sign.layout),
    },
    `Kept as variant "${text}" (the wiring only, no figures or places). Save (s) writes it into the file.`,
    'good',
  )
}
