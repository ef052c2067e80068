/** Edits by key: what the wiring becomes, what is said of it, undo and redo, and what a solution is for. */
import { describe, expect, test } from 'vitest'
import type { Wiring } from '../../src/layout/layout.js'
import { tubeUnderCursor } from '../../src/screen/editing.js'
import { selectedPair, unsaved } from '../../src/screen/state.js'
import type { Edit } from '../../src/wiring/edit.js'
import { feedFromOtherEnd, joinEnds, shiftTube, swapTerminals, turnTube } from '../../src/wiring/edits.js'
import { type Session, session, solution } from './session.js'

const signs = ['open-window', 'script-word', 'feed-moved', 'conversion-gone-wrong']
const wiringOf = (s: Session) => s.state().present.sign.wiring
const toNextTube = (s: Session) => {
  for (let i = 0; i < 30 && tubeUnderCursor(s.state()) === undefined; i++) s.keys('tab')
  const tube = tubeUnderCursor(s.state())
  if (tube === undefined) throw new Error('no tube in the list')
  return tube
}

describe.each(signs)('%s', (name) => {
  test.each<[string, (wiring: Wiring, tube: string) => Edit<Wiring>]>([
    ['f', feedFromOtherEnd],
    ['t', turnTube],
    [',', (wiring, tube) => shiftTube(wiring, tube, -1)],
    ['.', (wiring, tube) => shiftTube(wiring, tube, 1)],
    ['x', (wiring) => swapTerminals(wiring, 0)],
  ])('%s makes the edit of the tube under the cursor, on every tube of the list', (key, edit) => {
    const s = session(name, { slow: true })
    const met = new Set<string>()
    for (let i = 0; i < 12; i++) {
      const tube = toNextTube(s)
      if (met.has(tube)) {
        s.keys('tab')
        continue
      }
      met.add(tube)
      const wanted = edit(wiringOf(s), tube)
      const before = wiringOf(s)
      s.keys(key)
      expect(wiringOf(s), tube).toEqual(wanted.ok ? wanted.value : before)
      if (!wanted.ok) expect(s.state().message?.level).toBe('bad')
      s.keys('tab')
    }
    expect(met.size).toBeGreaterThan(1)
  })

  test('undo to the start gives the very sign that was read, and redo the very last one', () => {
    const s = session(name, { slow: true })
    toNextTube(s)
    s.keys('f', 't', 'x', '.', 'l')
    s.send({ type: 'picked', value: 'neon-mercury' })
    s.keys('e')
    s.send({ type: 'picked', value: 'no_load_kv' })
    s.type('5.5')
    s.keys('V')
    s.type('mine')
    const last = s.state().present.sign
    const steps = s.state().past.length
    expect(steps).toBeGreaterThanOrEqual(6)
    s.keys(...Array<string>(steps).fill('u'))
    expect(s.state().present.sign).toBe(s.state().opened.sign)
    expect(unsaved(s.state())).toBe(false)
    s.keys('u')
    expect(s.state().message?.text).toBe('Nothing to undo.')
    s.keys(...Array<string>(steps).fill('r'))
    expect(s.state().present.sign).toBe(last)
    s.keys('r')
    expect(s.state().message?.text).toBe('Nothing to redo.')
  })
})

test('an edit after undo forgets what could have been redone', () => {
  const s = session('open-window')
  s.keys('f', 'u', 't', 'r')
  expect(s.state().message?.text).toBe('Nothing to redo.')
})

test('j joins the ends nearest to mark and cursor', () => {
  const s = session('open-window', { columns: 120, rows: 40 })
  // mark on the O, cursor over to the P
  for (let i = 0; i < 60 && tubeUnderCursor(s.state()) !== 'O'; i++) s.keys('tab')
  expect(tubeUnderCursor(s.state())).toBe('O')
  s.keys('m')
  const { mark } = s.state()
  for (let i = 0; i < 40 && tubeUnderCursor(s.state()) !== 'P'; i++) s.keys('right')
  expect(tubeUnderCursor(s.state())).toBe('P')
  expect(s.state().mark).toBe(mark)
  const before = wiringOf(s)
  s.keys('j')
  const joined = /jumper (O\.[ab])–(P\.[ab])/.exec(s.state().message?.text ?? '')
  if (joined?.[1] && joined[2]) {
    const wanted = joinEnds(before, joined[1], joined[2])
    expect(wanted.ok && wanted.value).toEqual(wiringOf(s))
  } else expect(s.state().message?.text).toMatch(/Nothing to change: O\.[ab] and P\.[ab] are joined already/)
})

test('j on a tube with itself is refused in words', () => {
  const s = session('open-window')
  s.keys('tab', 'j')
  expect(s.state().message).toEqual({
    text: 'Both ends belong to border: a jumper there would short the tube.',
    level: 'bad',
  })
  expect(s.state().past).toEqual([])
})

test('an edit says what became of the worst pair, of what is to fix and of the load', () => {
  const s = session('open-window')
  s.keys('v')
  s.send({ type: 'picked', value: 'fed between P and E' })
  const { message } = s.state()
  expect(message?.level).toBe('good')
  // kV and loads of both wirings as the sign opens with them
  const [was, is] = [session('open-window'), s].map((one) => one.state().inspection)
  const kv = (found: typeof was) => ((found?.pairs[0]?.difference.lit ?? 0) / 1000).toFixed(1)
  expect(message?.text).toContain(`worst ${kv(was)} → `)
  expect(message?.text).toMatch(/worst \d+\.\d+ → \d+\.\d+ kV rms \(2\.\d+ → 0\.\d+ x limit\)/)
  expect(message?.text).toContain('to fix 1 → 0')
  const load = (found: typeof was) => Math.round((found?.circuits[0]?.load ?? 0) * 100)
  expect(message?.text).toContain(`S1 ${load(was)} % → ${load(is)} %`)
  s.keys('u')
  expect(s.state().message?.level).toBe('bad')
  expect(s.state().message?.text).toContain('to fix 0 → 1')
  expect(s.state().message?.text).toContain('undone: variant "fed between P and E"')
})

test('while a solution is awaited every edit says so, and the answer tells from before the first of them', () => {
  const s = session('open-window', { slow: true })
  const before = s.state().inspection
  s.keys('f', 't', 'u')
  expect(s.state().solving).toBe(true)
  expect(s.state().message?.text).toBe('undone: turned N end for end – solving')
  expect(s.state().pending?.before).toBe(before)
  s.answer()
  expect(s.state().solving).toBe(false)
  expect(s.state().pending).toBeUndefined()
  expect(s.state().message?.text).toMatch(/^worst 3\.\d → /)
})

test('an answer for an older sign is dropped', () => {
  const s = session('open-window', { slow: true })
  s.keys('f')
  const old = { type: 'solved', revision: s.state().revision, solved: solution(s.state()) } as const
  s.keys('t')
  const waiting = s.state()
  s.send(old)
  expect(s.state()).toBe(waiting)
  s.answer()
  expect(s.state().solving).toBe(false)
})

test('with new glass the figures are those of nameplate until they are solved, in both conditions', () => {
  const s = session('open-window', { slow: true })
  s.keys('h')
  s.type('70')
  expect(s.state().inspection.solved).toBe(false)
  s.keys('c', 'c')
  // nothing of the old glass's solution is left to be shown
  expect(s.state().inspection.solved).toBe(false)
  expect(s.state().inspection.pairs.every((p) => p.difference.lit === undefined)).toBe(true)
  s.answer()
  expect(s.state().inspection.solved).toBe(true)
})

test('the cursor stays with its pair through an edit, so that the next key means the same tube', () => {
  const s = session('open-window')
  const tube = tubeUnderCursor(s.state())
  s.keys('f')
  expect(tubeUnderCursor(s.state())).toBe(tube)
  s.keys('t')
  expect(s.state().message?.text).toContain(`turned ${tube} end for end`)
})

test('a marked lead is let go by an edit, marked glass is not', () => {
  const s = session('open-window')
  for (let i = 0; i < 60 && selectedPair(s.state())?.pair.a.kind !== 'lead'; i++) s.keys('tab')
  expect(selectedPair(s.state())?.pair.a.kind).toBe('lead')
  s.keys('m')
  expect(s.state().mark?.body.kind).toBe('lead')
  s.keys('x')
  expect(s.state().mark).toBeUndefined()
  s.keys('home', 'm', 'x')
  expect(s.state().mark?.body.kind).toBe('fixed')
})

test('a wiring edited back to what the file says is not unsaved', () => {
  const s = session('open-window')
  s.keys('x')
  expect(unsaved(s.state())).toBe(true)
  s.keys('x')
  expect(unsaved(s.state())).toBe(false)
  s.keys('q')
  expect(s.effects()).toEqual([{ do: 'quit' }])
})

test('changed glass and a kept variant are unsaved work too', () => {
  const glass = session('open-window', { slow: true })
  glass.keys('l')
  glass.send({ type: 'picked', value: 'argon-mercury' })
  const variant = session('open-window', { slow: true })
  variant.keys('V')
  variant.type('mine')
  for (const s of [glass, variant]) {
    s.keys('q')
    expect(s.state().dialog).toEqual({ kind: 'quit' })
  }
})
