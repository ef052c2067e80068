/** What must never mislead: a dark sign that is live, a list that hides its worst, a file that loses its wiring. */
import { describe, expect, test } from 'vitest'
import { readoutLines } from '../../src/screen/panes/readout.js'
import { titleLine } from '../../src/screen/panes/title.js'
import { worstLines } from '../../src/screen/panes/worst.js'
import { sameWiring } from '../../src/wiring/edits.js'
import { session } from './session.js'

const textOf = (spans: ReturnType<typeof titleLine>) => spans.map(({ text }) => text).join('')

describe('a string that does not light', () => {
  test('reads its nameplate potentials, never 0 V: the supply is on', () => {
    const s = session('open-window')
    s.keys('e')
    s.send({ type: 'picked', value: 'no_load_kv' })
    s.type('2')
    expect(s.state().inspection.circuits[0]?.lit).toBe(false)
    // the lead at terminal 1 stands at half of 2 kV
    const feed = s.state().inspection.leads[0]!
    const [x, y] = [feed.line.points[0]!, feed.line.points[1]!]
    const state = { ...s.state(), cursor: { on: 'map', x, y, pick: 0 } as const }
    const ground = textOf(readoutLines(state, 120, 5)[1] ?? [])
    expect(ground).toMatch(/^NOT LIT BUT LIVE: 1\.0 kV rms to ground, [+-]1\.4 kV now/)
  })
})

describe('the list', () => {
  test('keeps the three worst in view wherever it is turned to', () => {
    const s = session('open-window')
    s.keys(...Array<string>(30).fill('tab'))
    const rows = worstLines(s.state(), 66, 12).map(textOf)
    const first = session('open-window').state()
    const worst = worstLines(first, 66, 12).map(textOf)
    expect(rows.slice(1, 4)).toEqual(worst.slice(1, 4))
    const { cursor } = s.state()
    const selected = s.state().inspection.pairs[30]!
    expect(cursor).toMatchObject({ key: selected.key })
    expect(rows.some((row) => row.includes(selected.a.part) && row.includes(selected.b.part))).toBe(true)
  })

  test('a filter without a hit does not read as an all-clear', () => {
    const s = session('open-window')
    s.keys('/')
    s.type('zzzz')
    expect(textOf(readoutLines(s.state(), 80, 5)[0] ?? [])).toContain('No pair names "zzzz"')
  })
})

describe('the title', () => {
  test('says when the picture is mirrored or in part', () => {
    const s = session('open-window')
    expect(textOf(titleLine(s.state(), 80))).not.toMatch(/BACK|ZOOM/)
    s.keys('b', '+', 'right')
    expect(textOf(titleLine(s.state(), 80))).toMatch(/BACK ZOOM/)
  })
})

describe('saving a variant as the wiring of the file', () => {
  test('keeps the wiring filed before as a variant, once', () => {
    const s = session('feed-moved')
    const filed = s.state().opened.sign.wiring
    s.keys('v')
    s.send({ type: 'picked', value: s.state().present.sign.layout.variants[0]!.name })
    s.keys('s')
    expect(s.effects()).toContainEqual({ do: 'save', force: false, thenQuit: false })
    const { layout } = s.state().present.sign
    expect(layout.variants.filter((v) => sameWiring(v, filed)).map((v) => v.name)).toEqual(['filed before'])
    s.keys('s')
    expect(s.state().present.sign.layout.variants).toHaveLength(layout.variants.length)
  })

  test('an edited wiring takes the place of the file without further ado', () => {
    const s = session('feed-moved')
    const before = s.state().present.sign.layout.variants.length
    s.keys('t', 's')
    expect(s.state().present.sign.layout.variants).toHaveLength(before)
  })

  test("the list of variants begins with the file's wiring", () => {
    const s = session('feed-moved')
    s.keys('v')
    s.send({ type: 'picked', value: s.state().present.sign.layout.variants[0]!.name })
    s.keys('v')
    s.send({ type: 'picked', value: '' })
    expect(sameWiring(s.state().present.sign.wiring, s.state().opened.sign.wiring)).toBe(true)
  })
})
