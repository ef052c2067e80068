/** Condition broken on the screen: the worst list, the title, the readout and the map of one break. */
import { describe, expect, test } from 'vitest'
import { nodeMix } from '../../src/network/potentials.js'
import { openTube } from '../../src/screen/conditions.js'
import { fieldsShown, instantAt, instantShown, peakPotential } from '../../src/screen/instant.js'
import type { Line } from '../../src/screen/lines.js'
import { loadingLines } from '../../src/screen/panes/loading.js'
import { readoutLines } from '../../src/screen/panes/readout.js'
import { titleLine } from '../../src/screen/panes/title.js'
import { worstLines } from '../../src/screen/panes/worst.js'
import { session } from './session.js'

const textOf = (line: Line | undefined) => (line ?? []).map(({ text }) => text).join('')
const broken = (name = 'open-window', options = {}) => {
  const s = session(name, { columns: 120, rows: 40, ...options })
  s.keys('c', 'c')
  return s
}
const noLoad = 6500 // of open-window's one supply, V rms

describe('condition broken', () => {
  test('the title names the condition and the open tube', () => {
    const s = broken()
    expect(textOf(titleLine(s.state(), 120))).toContain('BROKEN E open')
    s.keys('d')
    expect(textOf(titleLine(s.state(), 120))).toContain('BROKEN N open')
    s.keys('c')
    expect(textOf(titleLine(s.state(), 120))).not.toContain('open ')
  })

  test('the list shows the worst broken kV', () => {
    const s = broken()
    const [head, first] = worstLines(s.state(), 60, 10)
    expect(textOf(head)).toContain('kV brk')
    expect(textOf(first)).toContain('6.5')
    // a narrow list cuts the word, not the figures
    expect(textOf(worstLines(s.state(), 31, 10)[0])).toContain('kVbrk')
  })

  test('the readout names the tube in every condition', () => {
    const s = session('open-window', { columns: 120, rows: 40 })
    const difference = () => textOf(readoutLines(s.state(), 160, 8)[1])
    expect(difference()).toMatch(/broken 6\.5 kV rms, \S+ open/)
    s.keys('c', 'c')
    expect(difference()).toMatch(/^worst 6\.5 kV rms, E open {2}with \S+ open now .* lit .* nameplate/)
  })

  test('on a narrow screen it is told in condition broken, not cut to a stump elsewhere', () => {
    const s = session('open-window')
    expect(textOf(readoutLines(s.state(), 80, 5)[1])).not.toContain('broken')
    s.keys('c', 'c')
    expect(textOf(readoutLines(s.state(), 80, 5)[1])).toContain('6.5 kV rms, E open')
  })

  test('a conductor alone is told with the break that is shown', () => {
    const s = broken()
    s.keys('left', 'right')
    expect(readoutLines(s.state(), 120, 8).map(textOf).join('\n')).toMatch(
      / to ground, .* now \(broken, E open\)/,
    )
  })

  test('the map is a snapshot of that break: each side at its terminal', () => {
    const s = broken()
    const state = s.state()
    expect(openTube(state)).toBe('E')
    const [field] = fieldsShown(state)
    expect(field?.frequency).toBe(0)
    expect(peakPotential(state)).toBeCloseTo((Math.SQRT2 * noLoad) / 2, 6)
    const at = (tube: string, along: number) => {
      const index = state.prepared.tubes.findIndex(({ name }) => name === tube)
      const length = state.prepared.tubes[index]?.line.length ?? 0
      return instantAt(
        instantShown(state),
        nodeMix(state.inspection.probe, { kind: 'fixed', index }, along * length),
      )
    }
    // wired border O P E N: the E is open
    for (const tube of ['border', 'O', 'P']) expect(at(tube, 0.5)).toBeCloseTo((Math.SQRT2 * noLoad) / 2, 6)
    expect(at('N', 0.5)).toBeCloseTo((-Math.SQRT2 * noLoad) / 2, 6)
    expect(at('E', 0.1)).toBeGreaterThan(0)
    expect(at('E', 0.9)).toBeLessThan(0)
    s.keys('d')
    const next = s.state()
    expect(fieldsShown(next)).not.toBe(fieldsShown(state))
    // asked for every cell of the map: the same fields each time
    expect(fieldsShown(next)).toBe(fieldsShown(next))
  })

  test('an edit keeps the break that is shown', () => {
    const s = broken()
    s.keys('d', 'x')
    expect(openTube(s.state())).toBe('N')
    expect(s.state().inspection.pairs.every((p) => p.judgedOn === 'broken')).toBe(true)
    expect(s.state().message?.text).toContain('6.5 → 6.5 kV rms')
  })

  test('is there before anything is solved', () => {
    const s = session('open-window', { slow: true })
    s.keys('f', 'c', 'c', 'd')
    expect(s.state().solving).toBe(true)
    // the cursor stayed on N and border: O is the first tube between them, P the next
    expect(openTube(s.state())).toBe('P')
  })

  test('breaks are stepped through in it alone', () => {
    const s = session('open-window')
    s.keys('d')
    expect(s.state().open).toBeUndefined()
    expect(s.state().message?.text).toContain('in condition broken')
  })

  test('steps through the breaks of all circuits and round', () => {
    const s = broken('reference-12-tubes')
    const seen = new Set<string | undefined>()
    for (let i = 0; i < 12; i++) {
      s.keys('d')
      seen.add(openTube(s.state()))
    }
    expect(seen.size).toBe(12)
    const was = openTube(s.state())
    s.keys('d', 'D')
    expect(openTube(s.state())).toBe(was)
  })
})

test('the loading pane tells what was measured beside what is computed', () => {
  const s = session('core-and-coil-6kv', { columns: 120, rows: 40 })
  const lines = loadingLines(s.state(), 46, 6).map(textOf)
  expect(lines.find((l) => l.startsWith('plug'))).toMatch(/^plug 96 W \(computed \d+ W\), law x\d\.\d\d ±5 %/)
  // none where nothing was measured
  expect(loadingLines(session('open-window').state(), 46, 6).map(textOf).join()).not.toContain('plug')
})
