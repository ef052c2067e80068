/** Whatever is pressed, in whatever order: nothing breaks, nothing reads NaN, and undo leads back. */
import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { keyTable } from '../../src/screen/keys.js'
import { mapPane } from '../../src/screen/map-pane.js'
import { unsaved } from '../../src/screen/state.js'
import { allText } from './pane-lines.js'
import { type Session, session } from './session.js'

const names = [
  ...keyTable.flatMap(({ keys }) => keys),
  'escape',
  'enter',
  ' ',
  'ctrl-z',
  'ctrl-s',
  'd',
  'end',
]
const editing = ['f', 't', 'x', 'j', ',', '.', 'u', 'r', 'U', 'm', 'tab', 'left', 'down', 'o', '+']
// new heights need the glass solved anew, so that of all typed texts few are heights that are taken
const texts = ['', 'o', 'tube', '7,5', '1e9', '-3', 'x'.repeat(200), '文字', '1e999']
const sizes = [
  [40, 10],
  [80, 24],
  [69, 17],
  [250, 70],
  [10, 3],
] as const

const act = fc.oneof(
  { weight: 20, arbitrary: fc.constantFrom(...editing).map((key) => (s: Session) => s.keys(key)) },
  { weight: 20, arbitrary: fc.constantFrom(...names).map((key) => (s: Session) => s.keys(key)) },
  { weight: 4, arbitrary: fc.constantFrom(...texts).map((text) => (s: Session) => s.type(text)) },
  { weight: 6, arbitrary: fc.nat(6).map((n) => (s: Session) => pick(s, n)) },
  { weight: 2, arbitrary: fc.constantFrom(...sizes).map(resize) },
  // a solution takes long: one in sixty, and one at the end of some
  { weight: 1, arbitrary: fc.constant((s: Session) => s.answer()) },
)

function pick(s: Session, n: number): void {
  const { dialog } = s.state()
  const choice = dialog?.kind === 'pick' ? dialog.choices[n % dialog.choices.length] : undefined
  if (choice) s.send({ type: 'picked', value: choice.value })
}

function resize([columns, rows]: readonly [number, number]) {
  return (s: Session) => s.send({ type: 'resized', columns, rows })
}

const map = mapPane({ level: 8, ground: 'dark' })

function drawsWell(s: Session): void {
  const state = s.state()
  if (state.columns < 40 || state.rows < 10) return
  expect(allText(state)).not.toMatch(/NaN|undefined|null|Infinity|\[object/)
  const box = { x: 0, y: 1, width: 30, height: 8 }
  const { glyphs, styles } = map.grid(state, box)
  expect(glyphs.length).toBe(styles.length)
}

describe.each(['feed-moved', 'conversion-gone-wrong', 'core-and-coil-6kv'])('%s', (name) => {
  test('100 sequences of keys', () => {
    fc.assert(
      fc.property(fc.array(act, { minLength: 5, maxLength: 18 }), (acts) => {
        const s = session(name, { slow: true })
        for (const one of acts) {
          one(s)
          // typed texts are shown as they are: only what the program says must make sense
          if (s.state().dialog?.kind !== 'prompt' && s.state().filter === '') drawsWell(s)
        }
        if (acts.length % 5 === 0) s.answer()
        s.send({ type: 'resized', columns: 80, rows: 24 })
        s.keys('escape', 'escape', 'escape', 'escape')
        drawsWell(s)
        s.keys(...Array<string>(s.state().past.length).fill('u'))
        expect(s.state().present.sign).toBe(s.state().opened.sign)
        expect(unsaved(s.state())).toBe(false)
        expect(s.state().past).toEqual([])
        drawsWell(s)
      }),
      { seed: 20261, numRuns: 100 },
    )
  }, 60_000)
})
