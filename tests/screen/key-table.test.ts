/** Every key of the table does what the table says of it. */
import { describe, expect, test } from 'vitest'
import { mapWindow, placeOfCursor } from '../../src/screen/aim.js'
import { openTube } from '../../src/screen/conditions.js'
import { type Action, keyTable } from '../../src/screen/keys.js'
import { listedPairs, type State, selectedPair } from '../../src/screen/state.js'
import { cellAt } from '../../src/view/map-window.js'
import { type Session, session } from './session.js'

const cellOf = (state: State) => {
  const place = placeOfCursor(state)
  if (!place) throw new Error('no cursor')
  return cellAt(mapWindow(state), place.x, place.y)
}
const indexOf = (s: Session) => selectedPair(s.state())?.index
const strings = (state: State) =>
  state.present.sign.wiring.circuits.map((c) =>
    c.string.map((e) => (e.reversed ? `-${e.tube}` : e.tube)).join(' '),
  )

/** where the cursor goes by a key, in cells; the middle of the map is far from its edges */
function movedBy(key: string): { column: number; row: number } {
  const s = session('open-window', { columns: 120, rows: 40 })
  // onto the map, in the middle
  s.keys('shift-left', 'shift-left', 'shift-left')
  const from = cellOf(s.state())
  s.keys(key)
  const to = cellOf(s.state())
  expect(s.state().cursor.on).toBe('map')
  return { column: to.column - from.column, row: to.row - from.row }
}

const opens = (dialog: string, says?: RegExp) => (key: string) => {
  const s = session('open-window')
  s.keys(key)
  expect(s.state().dialog?.kind).toBe(dialog)
  if (says) expect(JSON.stringify(s.state().dialog)).toMatch(says)
}

// open-window is wired border O P E N; its worst pair is N with border, cursor on the N
const checks: Record<Action, (key: string) => void> = {
  'next-pair': (key) => {
    const s = session('open-window')
    s.keys(key, key)
    expect(indexOf(s)).toBe(2)
  },
  'previous-pair': (key) => {
    const s = session('open-window')
    s.keys('tab', 'tab', key)
    expect(indexOf(s)).toBe(1)
  },
  'next-page': (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(indexOf(s)).toBe(10)
  },
  'previous-page': (key) => {
    const s = session('open-window')
    s.keys('pagedown', 'pagedown', 'tab', key)
    expect(indexOf(s)).toBe(11)
  },
  'worst-pair': (key) => {
    const s = session('open-window')
    s.keys('tab', 'tab', 'tab', key)
    expect(indexOf(s)).toBe(0)
  },
  'other-side': (key) => {
    const s = session('open-window')
    const a = placeOfCursor(s.state())
    s.keys(key)
    expect(s.state().cursor).toMatchObject({ on: 'pair', side: 'b' })
    expect(placeOfCursor(s.state())).not.toEqual(a)
    s.keys(key)
    expect(placeOfCursor(s.state())).toEqual(a)
  },
  left: (key) => expect(movedBy(key)).toEqual({ column: -1, row: 0 }),
  right: (key) => expect(movedBy(key)).toEqual({ column: 1, row: 0 }),
  up: (key) => expect(movedBy(key)).toEqual({ column: 0, row: -1 }),
  down: (key) => expect(movedBy(key)).toEqual({ column: 0, row: 1 }),
  'far-left': (key) => expect(movedBy(key)).toEqual({ column: -10, row: 0 }),
  'far-right': (key) => expect(movedBy(key)).toEqual({ column: 10, row: 0 }),
  'far-up': (key) => expect(movedBy(key)).toEqual({ column: 0, row: -5 }),
  'far-down': (key) => expect(movedBy(key)).toEqual({ column: 0, row: 5 }),
  mark: (key) => {
    const s = session('open-window')
    const { pair } = selectedPair(s.state()) ?? {}
    s.keys(key)
    expect(s.state().mark).toEqual({ body: pair?.a.body, at: pair?.a.at })
    s.keys('escape')
    expect(s.state().mark).toBeUndefined()
  },
  condition: (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(s.state().condition).toBe('nameplate')
    expect(s.state().inspection.pairs.every((p) => p.judgedOn === 'nameplate')).toBe(true)
    s.keys(key)
    expect(s.state().condition).toBe('broken')
    expect(s.state().inspection.pairs.every((p) => p.judgedOn === 'broken')).toBe(true)
    s.keys(key)
    expect(s.state().condition).toBe('lit')
    expect(s.state().inspection.pairs[0]?.judgedOn).toBe('lit')
  },
  'next-break': (key) => {
    const s = session('open-window')
    s.keys('c', 'c')
    // the break of the worst pair: the E against itself
    expect(openTube(s.state())).toBe('E')
    s.keys(key)
    expect(openTube(s.state())).toBe('N')
    s.keys(key)
    expect(openTube(s.state())).toBe('border')
  },
  'previous-break': (key) => {
    const s = session('open-window')
    s.keys('c', 'c', key)
    expect(openTube(s.state())).toBe('P')
  },
  'instant-on': (key) => {
    const s = session('open-window')
    s.keys(...Array<string>(11).fill(key))
    expect(s.state().instant).toBe(11)
    s.keys(key)
    expect(s.state().instant).toBe(0)
  },
  'instant-back': (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(s.state().instant).toBe(11)
  },
  'zoom-in': (key) => {
    const s = session('open-window')
    const before = mapWindow(s.state())
    s.keys(key)
    expect(mapWindow(s.state()).step).toBeCloseTo(before.step / 1.5, 9)
  },
  'zoom-out': (key) => {
    const s = session('open-window')
    s.keys('+', '+')
    const before = mapWindow(s.state())
    s.keys(key)
    expect(mapWindow(s.state()).step).toBeCloseTo(before.step * 1.5, 9)
  },
  fit: (key) => {
    const s = session('open-window')
    const before = mapWindow(s.state())
    s.keys('+', '+', '+', key)
    expect(mapWindow(s.state())).toEqual(before)
  },
  'from-behind': (key) => {
    const s = session('open-window')
    const front = cellOf(s.state())
    s.keys(key)
    const { columns } = mapWindow(s.state())
    // a cell's mirror image, give or take the edge that the place lies on
    expect(Math.abs(cellOf(s.state()).column - (columns - 1 - front.column))).toBeLessThanOrEqual(1)
    expect(cellOf(s.state()).row).toBe(front.row)
    s.keys(key)
    expect(cellOf(s.state())).toEqual(front)
  },
  glyphs: (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(s.state().view.glyphs).toBe('level')
  },
  names: (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(s.state().view.names).toBe(false)
  },
  why: opens('why'),
  symptoms: opens('pick', /Symptom.*dim far tube/),
  filter: opens('prompt', /Show only pairs/),
  'feed-other-end': (key) => {
    const s = session('open-window')
    s.keys(key)
    // the N hangs on terminal 2 by its end b: now it is fed at a, and E is the last
    expect(strings(s.state())).toEqual(['N border O P E'])
  },
  'feed-here': (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(s.state().dialog).toMatchObject({
      kind: 'pick',
      choices: [{ label: 'border.b–O.a' }, { label: 'O.b–P.a' }, { label: 'P.b–E.a' }, { label: 'E.b–N.a' }],
    })
    s.send({ type: 'picked', value: '3' })
    expect(strings(s.state())).toEqual(['E N border O P'])
  },
  'supply-here': (key) => {
    const s = session('open-window')
    s.keys('shift-left', 'shift-left')
    const place = placeOfCursor(s.state())
    s.keys(key)
    const [one, two] = s.state().present.sign.layout.supplies[0]?.terminals ?? []
    expect(((one?.x ?? 0) + (two?.x ?? 0)) / 2).toBeCloseTo(place?.x ?? 0, 9)
    expect(((one?.y ?? 0) + (two?.y ?? 0)) / 2).toBeCloseTo(place?.y ?? 0, 9)
    // its two terminals keep their distance: 65 and 40 mm
    expect((one?.x ?? 0) - (two?.x ?? 0)).toBeCloseTo(0.065, 9)
  },
  'swap-terminals': (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(strings(s.state())).toEqual(['-N -E -P -O -border'])
  },
  'turn-tube': (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(strings(s.state())).toEqual(['border O P E -N'])
  },
  'join-ends': (key) => {
    const s = session('open-window')
    // N at 748 of 763 mm is its end b, border at 333 of 1945 mm its end a
    s.keys(key)
    expect(s.state().message?.text).toContain('jumper N.b–border.a')
    const [string = ''] = strings(s.state())
    expect(`${string} ${string}`).toMatch(/(^| )N border|-border -N/)
  },
  earlier: (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(strings(s.state())).toEqual(['border O P N E'])
  },
  later: (key) => {
    const s = session('open-window')
    // on the border, the first of the string
    s.keys('tab', key)
    expect(strings(s.state())).toEqual(['O border P E N'])
  },
  'move-tube': (key) => {
    const s = session('reference-12-tubes')
    const [one = '', two = ''] = strings(s.state())
    s.keys(key)
    const [less = '', more = ''] = strings(s.state()).sort((a, b) => a.length - b.length)
    expect(less.split(' ').length).toBe(one.split(' ').length - 1)
    expect(more.split(' ').length).toBe(two.split(' ').length + 1)
  },
  'midpoint-return': (key) => {
    const s = session('open-window')
    // on the border at 333 of 1945 mm: its end a is the feed; then on its end b, joined to O.a
    s.keys('o', key)
    expect(s.state().message?.text).toMatch(/^border\.a is joined to the supply/)
    s.keys('escape', 'tab', 'o', key)
    expect(s.state().present.sign.wiring.circuits[0]?.midpointReturn).toBe('border.b')
    s.keys(key)
    expect(s.state().present.sign.wiring.circuits[0]).not.toHaveProperty('midpointReturn')
  },
  'supply-figures': opens('pick', /Figures of S1/),
  'tube-height': opens('prompt', /Height of N, mm.*"40"/),
  'tube-fill': opens('pick', /Fill of N/),
  undo: (key) => {
    const s = session('open-window')
    s.keys('f', key)
    expect(strings(s.state())).toEqual(['border O P E N'])
  },
  redo: (key) => {
    const s = session('open-window')
    s.keys('f', 'u', key)
    expect(strings(s.state())).toEqual(['N border O P E'])
  },
  'as-filed': (key) => {
    const s = session('open-window')
    s.keys('f', 'x', 't', key)
    expect(strings(s.state())).toEqual(['border O P E N'])
    s.keys('u')
    expect(strings(s.state())).not.toEqual(['border O P E N'])
  },
  variants: opens('pick', /fed between P and E/),
  'keep-variant': opens('prompt', /Keep this wiring as variant/),
  save: (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(s.effects()).toEqual([])
    expect(s.state().message?.text).toBe('Nothing to save: the file holds this wiring.')
    s.keys('f', key)
    expect(s.effects()).toEqual([{ do: 'save', force: false, thenQuit: false }])
  },
  cautions: opens('cautions'),
  help: opens('help'),
  quit: (key) => {
    const s = session('open-window')
    s.keys(key)
    expect(s.effects()).toEqual([{ do: 'quit' }])
  },
}

describe.each(keyTable)('$action', ({ action, keys, does }) => {
  test.each(keys)(`%s: ${does}`, (key) => checks[action](key))
})

test('no key stands for two things', () => {
  const all = keyTable.flatMap(({ keys }) => keys)
  expect(new Set(all).size).toBe(all.length)
})

test('a key that stands for nothing changes nothing', () => {
  const s = session('open-window')
  const before = s.state()
  s.keys('Z', 'f5', 'insert', 'ö')
  expect(s.state()).toBe(before)
})

test('the list is as the inspection has it', () => {
  const s = session('open-window')
  expect(listedPairs(s.state())).toBe(s.state().inspection.pairs)
})
