/** What the cursor is on and how it moves: over the worst list, and freely over the map. */
import { pointAt } from '../geometry/polyline.js'
import type { BodyRef } from '../geometry/runs.js'
import type { PairFinding } from '../rules/findings.js'
import { probeFinding } from '../rules/pairs.js'
import { bodyOf, partName } from '../rules/passing.js'
import { mapScene, sceneBounds } from '../view/map-scene.js'
import {
  type Bounds,
  cellAt,
  fitWindow,
  type MapWindow,
  placeAt,
  resized,
  revealed,
  turnedOver,
  zoomed,
} from '../view/map-window.js'
import { bodiesNear, type Near, passesCell } from '../view/sight.js'
import { frameOf } from './frame.js'
import type { Action } from './keys.js'
import { type Foot, listedPairs, type Next, type State, say, selectedPair } from './state.js'

/** cells round the cursor in which it still catches a conductor */
const reachInCells = 1.6

/** The part of the sign on the map: the user's window, or the whole sign fitted. */
export function mapWindow(state: State): MapWindow {
  const whole = wholeWindow(state)
  const { window, behind } = state.view
  const base = window ? resized(window, whole.columns, whole.rows) : whole
  return base.mirrored === behind ? base : turnedOver(base)
}

function wholeWindow(state: State): MapWindow {
  const { map } = frameOf(state)
  return fitWindow(signBounds(state), map.width, map.height)
}

/** of each inspection, by its leads: asked for several times at every key */
const bounds = new WeakMap<object, Bounds>()

/** The rectangle round all that the map draws: glass, leads, metal, face and terminals. */
function signBounds({ inspection: { context } }: State): Bounds {
  const known = bounds.get(context.leads)
  const found = known ?? sceneBounds(mapScene(context.layout, [...context.bodies, ...context.leads]))
  if (!known) bounds.set(context.leads, found)
  return found
}

/** The two places of the pair the cursor is on. */
export function footsOfPair(state: State): { a: Foot; b: Foot } | undefined {
  if (state.cursor.on !== 'pair') return undefined
  const found = selectedPair(state)
  return (
    found && {
      a: { body: found.pair.a.body, at: found.pair.a.at },
      b: { body: found.pair.b.body, at: found.pair.b.at },
    }
  )
}

/**
 * Bodies under a free cursor, the one it has picked first. Those that pass through the cursor's own cell come before
 * others near it: what the map shows there is what is read out.
 */
export function underCursor(state: State): readonly Near[] {
  const { cursor, inspection } = state
  if (cursor.on !== 'map') return []
  const { bodies, leads } = inspection.context
  const window = mapWindow(state)
  const cell = cellAt(window, cursor.x, cursor.y)
  const near = bodiesNear(bodies, leads, cursor.x, cursor.y, reachInCells * window.step * 2)
  const shown = near.filter(({ body }) => passesCell(bodyOf(inspection.context, body), window, cell))
  const towards = window.mirrored ? -1 : 1
  const found = [
    ...shown.sort((a, b) => (b.z - a.z) * towards),
    ...near.filter((one) => !shown.includes(one)),
  ]
  const first = found.length > 0 ? cursor.pick % found.length : 0
  return [...found.slice(first), ...found.slice(0, first)]
}

/** The place on a conductor that the cursor is on. */
export function footUnderCursor(state: State): Foot | undefined {
  const pair = footsOfPair(state)
  if (pair && state.cursor.on === 'pair') return pair[state.cursor.side]
  return underCursor(state)[0]
}

/** Where the cursor is in the drawing, m. */
export function placeOfCursor(state: State): { x: number; y: number } | undefined {
  if (state.cursor.on === 'map') return { x: state.cursor.x, y: state.cursor.y }
  const found = selectedPair(state)
  if (!found) return undefined
  const spot = state.cursor.side === 'a' ? found.pair.a : found.pair.b
  // the face has no place of its own: stay with the part in front of it
  const [x, y] = (spot.kind === 'face' ? found.pair.a : spot).point
  return { x, y }
}

/** The finding between mark and cursor, or of the pair the cursor is on. */
export function findingInView(state: State): PairFinding | undefined {
  if (state.cursor.on === 'pair') return selectedPair(state)?.pair
  const here = footUnderCursor(state)
  if (!state.mark || !here) return undefined
  return findingBetween(state, state.mark, here)
}

function findingBetween(state: State, a: Foot, b: Foot): PairFinding | undefined {
  const { context } = state.inspection
  const [one, two] = [bodyOf(context, a.body), bodyOf(context, b.body)]
  if (!one || !two) return undefined
  const [p, q] = [pointAt(one.line, a.at), pointAt(two.line, b.at)]
  const apart = Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2])
  return probeFinding(context, {
    a: a.body,
    b: b.body,
    atA: Float64Array.of(a.at),
    atB: Float64Array.of(b.at),
    gap: Float64Array.of(Math.max(0, apart - one.outerRadius - two.outerRadius)),
    pointA: Float64Array.from(p),
    pointB: Float64Array.from(q),
  })
}

/** Keys that move the cursor or the view; undefined where the key does something else. */
export function aimByKey(state: State, action: Action): State | undefined {
  switch (action) {
    case 'next-pair':
      return stepped(state, 1)
    case 'previous-pair':
      return stepped(state, -1)
    case 'next-page':
      return stepped(state, 10, false)
    case 'previous-page':
      return stepped(state, -10, false)
    case 'worst-pair':
      return onPair(state, 0)
    case 'other-side':
      return otherSide(state)
    case 'left':
      return moved(state, -1, 0)
    case 'right':
      return moved(state, 1, 0)
    case 'up':
      return moved(state, 0, -1)
    case 'down':
      return moved(state, 0, 1)
    case 'far-left':
      return moved(state, -10, 0)
    case 'far-right':
      return moved(state, 10, 0)
    case 'far-up':
      return moved(state, 0, -5)
    case 'far-down':
      return moved(state, 0, 5)
    case 'zoom-in':
      return zoomedBy(state, 1.5)
    case 'zoom-out':
      return zoomedBy(state, 1 / 1.5)
    default:
      return undefined
  }
}

/** Steps along the list; round its ends with a single step, not with a page. */
function stepped(state: State, by: number, round = true): State {
  const count = listedPairs(state).length
  if (count === 0) return state
  // coming back from the map, the first step goes to the worst pair
  if (state.cursor.on === 'map') return onPair(state, 0)
  const index = (selectedPair(state)?.index ?? 0) + by
  return onPair(state, round ? ((index % count) + count) % count : Math.min(count - 1, Math.max(0, index)))
}

export function onPair(state: State, index: number): State {
  const pair = listedPairs(state)[index]
  const { mark: _, ...unmarked } = state
  return inView({ ...unmarked, cursor: { on: 'pair', key: pair?.key, side: 'a' } })
}

function otherSide(state: State): State {
  const { cursor } = state
  return cursor.on === 'pair'
    ? inView({ ...state, cursor: { ...cursor, side: cursor.side === 'a' ? 'b' : 'a' } })
    : { ...state, cursor: { ...cursor, pick: cursor.pick + 1 } }
}

function moved(state: State, columns: number, rows: number): State {
  const from = placeOfCursor(state) ?? { x: mapWindow(state).x, y: mapWindow(state).y }
  const window = mapWindow(state)
  const cell = cellAt(window, from.x, from.y)
  const to = onDrawing(state, placeAt(window, { column: cell.column + columns, row: cell.row + rows }))
  return inView({ ...state, cursor: { on: 'map', x: to.x, y: to.y, pick: 0 } })
}

/** The cursor does not leave what the fitted map shows. */
function onDrawing(state: State, { x, y }: { x: number; y: number }): { x: number; y: number } {
  const whole = wholeWindow(state)
  const across = ((whole.columns - 1) / 2) * whole.step
  const down = ((whole.rows - 1) / 2) * whole.step * whole.aspect
  return {
    x: Math.min(whole.x + across, Math.max(whole.x - across, x)),
    y: Math.min(whole.y + down, Math.max(whole.y - down, y)),
  }
}

/** A zoomed view follows the cursor. */
export function inView(state: State): State {
  const place = placeOfCursor(state)
  if (!state.view.window || !place) return state
  return { ...state, view: { ...state.view, window: revealed(mapWindow(state), place.x, place.y) } }
}

function zoomedBy(state: State, factor: number): State {
  const window = mapWindow(state)
  const place = placeOfCursor(state) ?? { x: window.x, y: window.y }
  const next = zoomed(window, factor, cellAt(window, place.x, place.y))
  const { window: _, ...fitted } = state.view
  // zoomed out as far as the whole sign: fitted again
  if (next.step >= wholeWindow(state).step * (1 - 1e-9)) return { ...state, view: fitted }
  return { ...state, view: { ...fitted, window: next } }
}

/** Marks the place under the cursor, or takes the mark away when it is there already. */
export function marked(state: State): Next {
  const foot = footUnderCursor(state)
  if (
    state.mark &&
    (!foot || (sameBody(foot.body, state.mark.body) && Math.abs(foot.at - state.mark.at) < 1e-6))
  ) {
    const { mark: _, ...rest } = state
    return say(rest, 'Mark taken away.')
  }
  if (!foot) return say(state, 'Nothing to mark here: move the cursor onto glass, a lead or metal.')
  const name = partName(state.inspection.context, foot.body)
  const place = placeOfCursor(state)
  const cursor: State['cursor'] =
    state.cursor.on === 'map' || !place ? state.cursor : { on: 'map', x: place.x, y: place.y, pick: 0 }
  return say(
    { ...state, cursor, mark: { body: foot.body, at: foot.at } },
    `Marked ${name}. Move the cursor to probe from here; m or Esc ends it.`,
  )
}

const sameBody = (a: BodyRef, b: BodyRef): boolean =>
  a.kind === b.kind && (a.kind === 'face' || (b.kind !== 'face' && a.index === b.index))
