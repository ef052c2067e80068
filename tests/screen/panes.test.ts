/** What stands on the screen at every size: boxes that tile it, rows that fill them, and what must never be missing. */
import { readdirSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { toFix } from '../../src/rules/to-fix.js'
import { findingInView } from '../../src/screen/aim.js'
import { type Box, frame, sheetBox } from '../../src/screen/frame.js'
import { fitted, lineWidth } from '../../src/screen/lines.js'
import { asciiOnly } from '../../src/screen/panes/words.js'
import type { State } from '../../src/screen/state.js'
import { endGlyphs } from '../../src/view/map-glyphs.js'
import { openTubeGoverns } from '../../src/view/words.js'
import { allText, drawnPanes, paneText, textOf } from './pane-lines.js'
import { session } from './session.js'

const sizes = [
  [40, 10],
  [60, 20],
  [80, 24],
  [120, 40],
  [250, 70],
] as const
const good = readdirSync('layouts')
  .filter((name) => name.endsWith('.yaml') && name !== 'bad-file.yaml')
  .map((name) => name.slice(0, -'.yaml'.length))

const at = (name: string, [columns, rows]: readonly [number, number], ascii = false) =>
  session(name, { columns, rows, ascii })

describe('boxes', () => {
  const everySize = [40, 45, 69, 70, 80, 99, 100, 120, 250].flatMap((columns) =>
    Array.from({ length: 61 }, (_, i) => [columns, 10 + i] as const),
  )

  test('tile the screen from 40x10 up: no overlap, and nothing free but the column beside the map', () => {
    for (const [columns, rows] of everySize)
      for (const circuits of [1, 2, 5]) {
        const owners = Array.from({ length: rows }, () => Array<number>(columns).fill(0))
        for (const { x, y, width, height } of Object.values(frame(columns, rows, circuits)))
          for (let r = y; r < y + height; r++) for (let c = x; c < x + width; c++) owners[r]![c]! += 1
        const { map, worst } = frame(columns, rows, circuits)
        // the sides of map and panel do not touch
        if (worst.x > 0) for (let r = map.y; r < map.y + map.height; r++) owners[r]![map.width]! += 1
        expect(
          owners.flat().every((n) => n === 1),
          `${columns}x${rows}`,
        ).toBe(true)
      }
  })

  test('banners are the last two rows, and map, worst pair, loading, readout and message are always there', () => {
    for (const [columns, rows] of everySize) {
      const boxes = frame(columns, rows)
      const size = `${columns}x${rows}`
      expect(boxes.banners, size).toEqual({ x: 0, y: rows - 2, width: columns, height: 2 })
      for (const name of ['map', 'worst', 'loading', 'readout', 'message'] as const)
        expect(boxes[name].height, `${name} at ${size}`).toBeGreaterThanOrEqual(1)
    }
  })

  test('from 80x24 on the map has ten rows and the list three pairs', () => {
    for (const [columns, rows] of everySize.filter(([c, r]) => c >= 80 && r >= 24)) {
      const { map, worst } = frame(columns, rows)
      expect(map.height).toBeGreaterThanOrEqual(10)
      expect(worst.height).toBeGreaterThanOrEqual(4)
    }
  })

  test('a sheet lies between title and message', () => {
    for (const [columns, rows] of sizes) {
      const box: Box = sheetBox(columns, rows)
      expect(box).toEqual({ x: 0, y: 1, width: columns, height: frame(columns, rows).message.y - 1 })
    }
  })
})

/** states that put long or odd texts into the panes */
function states(name: string, size: readonly [number, number], ascii: boolean): State[] {
  const s = at(name, size, ascii)
  const seen = [s.state()]
  const see = (...keys: string[]) => {
    s.keys(...keys)
    seen.push(s.state())
  }
  see('tab')
  see('m', 'left', 'left')
  see('escape', 'o')
  see('escape', 'c')
  see('shift-tab', 'I')
  see('c', 'h')
  see('escape', 'F')
  see('escape', '?')
  see('escape', 'w', 'pagedown')
  s.keys('escape')
  s.send({
    type: 'not-saved',
    why: 'Not saved: “quoted” – é 文字 → ≥ 3 Ω.',
    changedOnDisk: false,
    thenQuit: false,
  })
  seen.push(s.state())
  s.send({ type: 'not-saved', why: '', changedOnDisk: true, thenQuit: false })
  seen.push(s.state())
  s.keys('escape')
  seen.push({ ...s.state(), solving: true, dialog: { kind: 'quit' }, filter: 'border itself' })
  return seen
}

describe.each(sizes.map((size) => ({ size, name: size.join('x') })))('rows at $name', ({ size }) => {
  test.each(good)('of %s are as wide as their boxes, or left to be filled with blanks', (name) => {
    for (const state of states(name, size, false))
      for (const { name: pane, box, lines } of drawnPanes(state)) {
        expect(lines.length, pane).toBeLessThanOrEqual(box.height)
        for (const line of lines) {
          expect(lineWidth(line), `${pane}: ${textOf(line)}`).toBeLessThanOrEqual(box.width)
          expect(lineWidth(fitted(line, box.width, ''))).toBe(box.width)
        }
      }
  })

  test.each(good)('of %s hold nothing but ASCII where that is asked for, and are no wider for it', (name) => {
    for (const state of states(name, size, true))
      for (const { name: pane, box, lines } of drawnPanes(state))
        for (const line of lines) {
          // as the screen draws them: what is left to be replaced is replaced cell by cell
          const shown = fitted(
            line.map((one) => ({ ...one, text: asciiOnly(one.text) })),
            box.width,
            '',
          )
          expect(textOf(shown), pane).toMatch(/^[\x20-\x7e]*$/)
          expect(lineWidth(shown), pane).toBe(box.width)
        }
  })

  test('are two banners whatever is open, the first the standing one', () => {
    for (const state of states('conversion-gone-wrong', size, false)) {
      const [first = '', second, ...more] = paneText(state, 'banners')
      expect(first).toMatch(/^ HIGH VOLTAGE KILLS/)
      expect(second).not.toBe('')
      expect(more).toEqual([])
    }
  })
})

describe('at 80x24', () => {
  const size = [80, 24] as const

  test('the screen beside the map, as text', () => {
    const { state } = at('open-window', size)
    expect(paneText(state(), 'title')).toEqual([
      ' tubewright  OPEN, window sign with border                1 TO FIX LIT now   0°',
    ])
    expect(paneText(state(), 'footer')).toEqual([
      ' Tab next  f feed other end  t turn  j jumper  u undo  m mark  ? help  q quit',
    ])
    expect(paneText(state(), 'banners')[0]).toBe(
      ' HIGH VOLTAGE KILLS. Lock out and discharge first. Local code decides.',
    )
    expect(paneText(state(), 'banners')[1]).toMatch(
      /^ FIX: N @\d+ to border @\d+: gap 16 mm at 3\.9 kV rms, needs 25 mm/,
    )
  })

  test.each(good)(
    '%s: condition, instant, load, mA, three worst pairs, and the pair with gap, kV and need',
    (name) => {
      const s = at(name, size)
      for (const key of ['escape', 'tab', 'tab', 'pagedown', 'home', 'i', 'I']) {
        s.keys(key)
        const state = s.state()
        const text = (pane: string) => paneText(state, pane).join('\n')
        expect(text('title')).toMatch(/ LIT now +\d+°/)
        expect(text('loading')).toMatch(/kVrms .* \d+% \d+\.\d+\/\d+\.\d+/)
        expect(text('loading')).toMatch(/out \d+\.\d\/\d+\.\d mA/)
        const worst = paneText(state, 'worst')
        expect(worst[0]).toMatch(/kVrms/)
        expect(
          worst.slice(1).filter((row) => /\d+(\.\d+)? +(\d+\.\d+|>99|\d+)$/.test(row)).length,
        ).toBeGreaterThanOrEqual(3)
        const [first = '', second = '', third = ''] = paneText(state, 'readout')
        expect(first).toMatch(/ to .* +gap \d+(\.\d+)? (mm|in) +((FIX|WATCH)\?? )?\d+(\.\d+)?/)
        const pair = findingInView(state)
        // where a tube open decides, its kV and the tube are in view, and other figures give way
        if (pair && openTubeGoverns(pair)) expect(second).toMatch(/broken \d+\.\d+ kV rms, \S.* open$/)
        else
          expect(second).toMatch(/^\d+\.\d+ kV rms \(.* to .*, up to \d+\.\d+ peak\) {2}now [+-]?\d+\.\d+ kV/)
        expect(third).toMatch(/^(needs \d+(\.\d+)? (mm|in)|near its limit|gap is enough): /)
        expect(frame(80, 24, state.present.sign.wiring.circuits.length).map.height).toBeGreaterThanOrEqual(10)
      }
    },
  )

  test('every kV beside the map says rms, peak, now or nameplate, or stands under a head that does', () => {
    for (const name of good) {
      const s = at(name, size)
      for (const key of ['escape', 'c', 'c', 'm', 'left']) {
        s.keys(key)
        for (const row of paneText(s.state(), 'readout'))
          for (const [, before = '', after = ''] of row.matchAll(/(.{0,24})\d\.\d+ kV(.{0,12})/g))
            expect(`${before}|${after}`).toMatch(/rms|peak|now|nameplate/)
      }
    }
  })

  test('nameplate says so in title, list and readout', () => {
    const s = at('open-window', size)
    s.keys('c')
    expect(paneText(s.state(), 'title')[0]).toContain(' NAMEPLATE ')
    expect(paneText(s.state(), 'worst')[0]).not.toContain('kVrms')
    expect(paneText(s.state(), 'readout')[1]).toMatch(/^\d+\.\d+ kV rms nameplate, peak \d+\.\d+ kV {2}now /)
  })

  test('an edit says before and after in the message row', () => {
    const s = at('open-window', size)
    s.keys('v')
    s.send({ type: 'picked', value: 'fed between P and E' })
    // at 80 columns kV and load are seen whole
    expect(paneText(s.state(), 'message')[0]).toMatch(
      /^ worst \d+\.\d+ → \d+\.\d+ kV rms \(.* x limit\) · to fix 1 → 0 · S1 \d+ % → \d+ %/,
    )
    expect(paneText(s.state(), 'title')[0]).toContain('(not saved)')
  })

  test('a variant on the screen is named in the title', () => {
    const s = at('feed-moved', [120, 40])
    s.keys('v')
    s.send({ type: 'picked', value: 'fed at the pole' })
    expect(paneText(s.state(), 'title')[0]).toContain('(not saved) GO, pennant / fed at the pole')
  })

  test('while solving it says so', () => {
    const s = session('open-window', { slow: true })
    s.keys('h')
    s.type('60')
    expect(paneText(s.state(), 'title')[0]).toMatch(/SOLVING *$/)
    expect(paneText(s.state(), 'loading').join('\n')).toContain('lit solution: solving')
  })

  test('a string that does not light says which tubes are dark, and pairs say what they were judged on', () => {
    const s = at('open-window', size)
    s.keys('e')
    s.send({ type: 'picked', value: 'no_load_kv' })
    s.type('2')
    const text = allText(s.state())
    expect(paneText(s.state(), 'title')[0]).toContain('DARK')
    expect(text).toContain('NOT LIT')
    expect(text).toMatch(/dark first: |the whole string stays dark/)
    // a dark string is still live
    expect(text).toMatch(/NOT LIT BUT LIVE: [1-9]\d*\.\d+ kV rms on paper {2}now [+-]/)
    expect(paneText(s.state(), 'banners')[1]).toMatch(/^ FIX: S1 cannot light its whole string/)
    // the dark circuit counts among what is to fix
    const { pairs } = s.state().inspection
    const count = pairs.filter((p) => p.verdict === 'fix').length + 1
    expect(toFix(s.state().inspection)).toBe(count)
    expect(paneText(s.state(), 'title')[0]).toContain(`${count} TO FIX`)
  })
})

test('help names every key of the table', () => {
  const s = session('open-window', { columns: 120, rows: 70 })
  s.keys('?')
  const text = allText(s.state())
  for (const key of ['Tab', 'Shift-Tab', 'PgDn', 'Shift-Left H', '+ =', 'F ', 'Esc', 'Ctrl-C', 'Ctrl-Z'])
    expect(text).toContain(key)
})

test('help tells of the marks that the map draws', () => {
  const s = session('open-window', { columns: 250, rows: 70 })
  s.keys('?', 'pagedown', 'pagedown')
  expect(allText(s.state())).toContain(`${endGlyphs.a} and ${endGlyphs.b} are the electrodes`)
})

test('a marked place is told while the cursor is on nothing', () => {
  const s = session('open-window')
  s.keys('m', ...Array<string>(20).fill('shift-left'), ...Array<string>(20).fill('shift-up'))
  const { mark, inspection } = s.state()
  if (mark?.body.kind !== 'fixed') throw new Error('no tube marked')
  const name = inspection.context.bodies[mark.body.index]?.name
  const [first, second] = paneText(s.state(), 'readout')
  expect(first).toBe(`marked: ${name} at ${Math.round(mark.at * 1000)} mm`)
  expect(second).toMatch(
    /^\d+\.\d+ kV rms to ground, [+-]?\d+\.\d+ kV now \(lit\); \d+\.\d mA along the glass$/,
  )
})

test('the cautions sheet begins with what the banner says', () => {
  const s = session('conversion-gone-wrong', { columns: 250, rows: 70 })
  const [, banner = ''] = paneText(s.state(), 'banners')
  s.keys('w')
  const first = paneText(s.state(), 'sheet')[1] ?? ''
  const words = first.replace(/^ +- \w+: /, '').slice(0, 40)
  expect(words.length).toBe(40)
  expect(banner).toContain(words)
  expect(banner).toMatch(/\+\d+ \(w\)$/)
})
