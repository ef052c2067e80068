/** The cursor on the list and on the map, the mark, the view. */
import { expect, test } from 'vitest'
import { pointAt } from '../../src/geometry/polyline.js'
import { probeFinding } from '../../src/rules/pairs.js'
import { findingInView, footUnderCursor, mapWindow, placeOfCursor } from '../../src/screen/aim.js'
import { mapShown } from '../../src/screen/map-pane.js'
import { listedPairs, selectedPair } from '../../src/screen/state.js'
import { mapRaster } from '../../src/view/map-raster.js'
import { mapScene } from '../../src/view/map-scene.js'
import { cellAt, columnAt, inside, placeAt, rowAt } from '../../src/view/map-window.js'
import { type Session, session } from './session.js'

const indexOf = (s: Session) => selectedPair(s.state())?.index
const countOf = (s: Session) => listedPairs(s.state()).length

test('single steps go round the ends of the list, pages stop at them', () => {
  const s = session('open-window')
  s.keys('shift-tab')
  expect(indexOf(s)).toBe(countOf(s) - 1)
  s.keys('tab')
  expect(indexOf(s)).toBe(0)
  s.keys('pageup')
  expect(indexOf(s)).toBe(0)
  s.keys(...Array<string>(20).fill('pagedown'))
  expect(indexOf(s)).toBe(countOf(s) - 1)
})

test('a whole turn with Tab meets every pair once', () => {
  const s = session('script-word')
  const met = new Set<string | undefined>()
  for (let i = 0; i < countOf(s); i++) {
    met.add(selectedPair(s.state())?.pair.key)
    s.keys('tab')
  }
  expect(met.size).toBe(countOf(s))
  expect(indexOf(s)).toBe(0)
})

test('from the map Tab goes back to the worst pair', () => {
  const s = session('open-window')
  s.keys('tab', 'tab', 'left', 'tab')
  expect(s.state().cursor.on).toBe('pair')
  expect(indexOf(s)).toBe(0)
})

test('the free cursor stays on what the fitted map shows, however far it is sent', () => {
  const s = session('open-window')
  for (const [key, column, row] of [
    ['shift-left', 0, undefined],
    ['shift-right', mapWindow(s.state()).columns - 1, undefined],
    ['shift-up', undefined, 0],
    ['shift-down', undefined, mapWindow(s.state()).rows - 1],
  ] as const) {
    s.keys(...Array<string>(30).fill(key))
    const place = placeOfCursor(s.state())
    const cell = cellAt(mapWindow(s.state()), place?.x ?? 0, place?.y ?? 0)
    if (column !== undefined) expect(cell.column).toBe(column)
    if (row !== undefined) expect(cell.row).toBe(row)
  }
})

test('the filter keeps the pairs that name a text, and nothing but them', () => {
  const s = session('open-window')
  s.keys('/')
  s.type('border')
  const listed = listedPairs(s.state())
  expect(listed.length).toBeGreaterThan(2)
  expect(listed.length).toBeLessThan(s.state().inspection.pairs.length)
  for (const pair of s.state().inspection.pairs) {
    const names = pair.a.part.includes('border') || pair.b.part.includes('border')
    expect(listed.includes(pair), `${pair.a.part} ${pair.b.part}`).toBe(names)
  }
  s.keys('/')
  s.type('p itself')
  expect(listedPairs(s.state()).map(({ a, b }) => [a.part, b.part])).toEqual([['P', 'P']])
  s.keys('/')
  s.type('  ')
  expect(listedPairs(s.state())).toBe(s.state().inspection.pairs)
})

test('a filter that nothing passes says so, and no key stumbles over the empty list', () => {
  const s = session('open-window')
  s.keys('/')
  s.type('no such part')
  expect(countOf(s)).toBe(0)
  expect(s.state().message?.text).toContain('No pair names "no such part"')
  s.keys('tab', 'shift-tab', 'pagedown', 'home', 'o', 'f', 't', 'j', ',', '.', 'h', 'm', 'P', '+', 'i')
  expect(selectedPair(s.state())).toBeUndefined()
  s.keys('escape', 'escape', 'escape')
  expect(countOf(s)).toBe(s.state().inspection.pairs.length)
})

test('Esc takes back the mark, then the free cursor, then the filter', () => {
  const s = session('open-window')
  s.keys('/')
  s.type('border')
  s.keys('m', 'left')
  const held = () => [s.state().mark !== undefined, s.state().cursor.on, s.state().filter]
  expect(held()).toEqual([true, 'map', 'border'])
  s.keys('escape')
  expect(held()).toEqual([false, 'map', 'border'])
  s.keys('escape')
  expect(held()).toEqual([false, 'pair', 'border'])
  s.keys('escape')
  expect(held()).toEqual([false, 'pair', ''])
})

test('a probe between two conductors is what probeFinding says of the two places', () => {
  const s = session('open-window', { columns: 120, rows: 40 })
  s.keys('m', 'shift-left', 'left', 'up')
  // over to the first conductor on the left that is not the marked one
  const { mark } = s.state()
  for (let i = 0; i < 40; i++) {
    const foot = footUnderCursor(s.state())
    if (foot && JSON.stringify(foot.body) !== JSON.stringify(mark?.body)) break
    s.keys('left')
  }
  const here = footUnderCursor(s.state())
  const finding = findingInView(s.state())
  if (!mark || !here || mark.body.kind !== 'fixed' || here.body.kind !== 'fixed')
    throw new Error('no two tubes')
  expect(here.body).not.toEqual(mark.body)
  const { context } = s.state().inspection
  const [one, two] = [context.bodies[mark.body.index], context.bodies[here.body.index]]
  if (!one || !two) throw new Error('no such tubes')
  const [p, q] = [pointAt(one.line, mark.at), pointAt(two.line, here.at)]
  const gap = Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]) - one.outerRadius - two.outerRadius
  expect(finding?.gap).toBeCloseTo(gap, 12)
  const direct = probeFinding(context, {
    a: mark.body,
    b: here.body,
    atA: Float64Array.of(mark.at),
    atB: Float64Array.of(here.at),
    gap: Float64Array.of(gap),
    pointA: Float64Array.from(p),
    pointB: Float64Array.from(q),
  })
  expect(finding).toEqual(direct)
})

test('a mark where the cursor stands is taken away by m', () => {
  const s = session('open-window')
  s.keys('m', 'm')
  expect(s.state().mark).toBeUndefined()
  expect(s.state().message?.text).toBe('Mark taken away.')
})

test('there is nothing to mark where nothing is', () => {
  const s = session('open-window')
  s.keys(...Array<string>(20).fill('shift-left'), ...Array<string>(20).fill('shift-up'), 'm')
  expect(s.state().mark).toBeUndefined()
  expect(s.state().message?.text).toMatch(/^Nothing to mark here/)
})

test('zooming in keeps the place under the cursor in its cell', () => {
  const s = session('open-window', { columns: 120, rows: 40 })
  s.keys('shift-left', 'up')
  const where = () => {
    const place = placeOfCursor(s.state())
    const window = mapWindow(s.state())
    return [columnAt(window, place?.x ?? 0), rowAt(window, place?.y ?? 0)]
  }
  const [column = 0, row = 0] = where()
  for (let i = 0; i < 6; i++) {
    s.keys('+')
    expect(where()[0]).toBeCloseTo(column, 6)
    expect(where()[1]).toBeCloseTo(row, 6)
  }
})

test('zooming out ends with the whole sign', () => {
  const s = session('open-window')
  const whole = mapWindow(s.state())
  s.keys('+', '+', ...Array<string>(9).fill('-'))
  expect(mapWindow(s.state())).toEqual(whole)
})

test('a zoomed view follows the cursor: along the list, over the map, to another size', () => {
  const s = session('script-word', { columns: 100, rows: 30 })
  s.keys('+', '+', '+', '+')
  const seen = () => {
    const window = mapWindow(s.state())
    const place = placeOfCursor(s.state())
    const cell = cellAt(window, place?.x ?? Number.NaN, place?.y ?? Number.NaN)
    return cell.column >= 0 && cell.column < window.columns && cell.row >= 0 && cell.row < window.rows
  }
  for (const key of [...Array<string>(12).fill('tab'), 'o', 'shift-right', 'shift-down', 'shift-left']) {
    s.keys(key)
    expect(seen(), key).toBe(true)
  }
  s.send({ type: 'resized', columns: 45, rows: 14 })
  expect(seen()).toBe(true)
})

test('from behind left is right: the cursor still goes where the arrow points', () => {
  const s = session('open-window')
  s.keys('left', 'b')
  const cell = () => cellAt(mapWindow(s.state()), placeOfCursor(s.state())?.x ?? 0, 0)
  const from = cell()
  s.keys('left')
  expect(cell().column).toBe(from.column - 1)
})

test('switching the condition keeps the pair under the cursor', () => {
  const s = session('open-window')
  s.keys('tab', 'tab', 'tab')
  const { key } = selectedPair(s.state())?.pair ?? {}
  s.keys('c')
  expect(selectedPair(s.state())?.pair.key).toBe(key)
})

test('the whole sign in view is all that the map draws: face, sheets and terminals too', () => {
  for (const name of ['open-window', 'channel-letters', 'core-and-coil-6kv', 'script-word']) {
    const state = session(name).state()
    const { layout, bodies, leads } = state.inspection.context
    const window = mapWindow(state)
    const { outlines, terminals } = mapScene(layout, [...bodies, ...leads])
    const corners = outlines.flatMap(({ points }) =>
      Array.from({ length: points.length / 3 }, (_, i) => ({ x: points[3 * i]!, y: points[3 * i + 1]! })),
    )
    expect(corners.length + terminals.length).toBeGreaterThan(1)
    for (const { x, y } of [...corners, ...terminals])
      expect(inside(window, cellAt(window, x, y)), `${name} ${x} ${y}`).toBe(true)
  }
})

test('in the cell of the cursor the map draws the conductor that is read out', () => {
  const s = session('open-window', { columns: 100, rows: 30 })
  const window = mapWindow(s.state())
  const { layout, bodies, leads } = s.state().inspection.context
  const raster = mapRaster(mapScene(layout, [...bodies, ...leads]), window)
  let shared = 0
  for (let cell = 0; cell < raster.sharing.length; cell++) {
    const passing = new Set(raster.body.slice(raster.first[cell], raster.first[cell + 1]))
    if (passing.size < 2) continue
    shared++
    const at = { column: cell % window.columns, row: Math.floor(cell / window.columns) }
    const drawn = new Set<number | undefined>()
    for (let pick = 0; pick < passing.size; pick++) {
      const state = { ...s.state(), cursor: { on: 'map', pick, ...placeAt(window, at) } } as const
      const foot = footUnderCursor(state)
      const index = foot && 'index' in foot.body ? foot.body.index : -1
      const owner = mapShown(state, raster).owner[cell]
      expect(owner, `cell ${cell}, pick ${pick}`).toBe(
        index + (foot?.body.kind === 'lead' ? bodies.length : 0),
      )
      drawn.add(owner)
    }
    expect(drawn).toEqual(passing)
  }
  expect(shared).toBeGreaterThan(3)
})

test('o walks round the conductors that share a place', () => {
  const s = session('open-window', { columns: 100, rows: 30 })
  // over the map until two conductors lie under the cursor
  s.keys(...Array<string>(20).fill('shift-left'), ...Array<string>(20).fill('shift-down'))
  for (let i = 0; i < 400 && footUnderCursor(s.state()) === undefined; i++)
    s.keys(i % 60 === 59 ? 'up' : 'right')
  const first = footUnderCursor(s.state())
  expect(first).toBeDefined()
  const met = [first]
  for (let i = 0; i < 6; i++) {
    s.keys('o')
    const foot = footUnderCursor(s.state())
    if (JSON.stringify(foot) === JSON.stringify(first)) break
    met.push(foot)
  }
  expect(footUnderCursor(s.state())).toEqual(first)
  expect(new Set(met.map((foot) => JSON.stringify(foot))).size).toBe(met.length)
})
