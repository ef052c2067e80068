import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { Layout, Wiring } from '../../src/layout/layout.js'
import { parseLayout } from '../../src/layout/parse.js'
import {
  clearMidpointReturn,
  jointAt,
  moveToCircuit,
  type NewPlace,
  setMidpointReturn,
} from '../../src/wiring/circuit-edits.js'
import type { Edit, Sign } from '../../src/wiring/edit.js'
import { sameWiring } from '../../src/wiring/edits.js'
import { holdsSign } from '../../src/wiring/same-sign.js'
import { editedText } from '../../src/wiring/text.js'

const text = `layout: 1
tubes:
  - {id: A, path: [[0, 0], [300, 0]]}
  - {id: B, path: [[0, 50], [300, 50]]}
  - {id: C, path: [[0, 100], [300, 100]]}
  - {id: D, path: [[0, 150], [300, 150]]}
  - {id: E, path: [[0, 200], [300, 200]]}
supplies:
  - {id: S1, type: electronic, no_load_kv: 6, short_circuit_ma: 30, frequency_hz: 24000, grounding: midpoint}
  - {id: S2, type: electronic, no_load_kv: 6, short_circuit_ma: 30, frequency_hz: 24000, grounding: one-end}
circuits:
  - supply: S1   # upper
    string: [A, -B, C]   # three
    midpoint_return: B.a
    measured: {primary_w: 80, ma: {C.a: 28}}
    leads:
      - {between: [B.a, C.a], path: [[0, 50], [0, 100]]}
  - supply: S2   # lower
    string:
      - D   # first
      - -E  # last
`

function layoutOf(source: string): Layout {
  const { layout, problems } = parseLayout(source, 'sign.yaml')
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  return layout
}
const layout = layoutOf(text)
const { wiring } = layout
const made = <T>(edit: Edit<T>): T => {
  if (!edit.ok) throw new Error(`refused: ${edit.why.code}`)
  return edit.value
}
const why = <T>(edit: Edit<T>) => (edit.ok ? 'made' : edit.why.code)
const strings = ({ circuits }: Wiring) =>
  circuits.map(({ string }) => string.map((e) => `${e.reversed ? '-' : ''}${e.tube}`).join(' '))

describe('a tube to another circuit', () => {
  test('goes behind the tube named, or to the end', () => {
    expect(strings(made(moveToCircuit(wiring, 'B', { circuit: 1, behind: 'D', reversed: false })))).toEqual([
      'A C',
      'D B -E',
    ])
    expect(strings(made(moveToCircuit(wiring, 'E', { circuit: 0, reversed: true })))).toEqual([
      'A -B C -E',
      'D',
    ])
  })
  test('and back gives the strings there were', () => {
    const there = made(moveToCircuit(wiring, 'B', { circuit: 1, reversed: true }))
    expect(strings(made(moveToCircuit(there, 'B', { circuit: 0, behind: 'A', reversed: true })))).toEqual(
      strings(wiring),
    )
  })
  test('drops what was measured on the strings there were, and a return that is no joint any more', () => {
    const [one, two] = made(moveToCircuit(wiring, 'C', { circuit: 1, reversed: false })).circuits
    expect(one).not.toHaveProperty('measured')
    // B.a is now the end at terminal 2
    expect(one).not.toHaveProperty('midpointReturn')
    expect(two?.string.length).toBe(3)
    const kept = made(moveToCircuit(wiring, 'D', { circuit: 0, reversed: false })).circuits[0]
    expect(kept?.midpointReturn).toBe('B.a')
  })
  test.each<[string, string, NewPlace]>([
    ['no-such-part', 'Z', { circuit: 1, reversed: false }],
    ['no-such-part', 'A', { circuit: 2, reversed: false }],
    ['no-such-part', 'A', { circuit: 1, behind: 'C', reversed: false }],
    ['nothing-to-change', 'A', { circuit: 0, reversed: false }],
  ])('%s: %s to %o is refused', (code, tube, place) => {
    expect(why(moveToCircuit(wiring, tube, place))).toBe(code)
  })
  test('the last tube of a circuit stays', () => {
    const alone = made(moveToCircuit(wiring, 'D', { circuit: 0, reversed: false }))
    expect(why(moveToCircuit(alone, 'E', { circuit: 0, reversed: false }))).toBe('empty-circuit')
  })
  test('keeps every tube once, whatever is moved where', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.constantFrom(...'ABCDE'), fc.nat(1), fc.boolean()), { maxLength: 12 }),
        (moves) => {
          const end = moves.reduce((now, [tube, circuit, reversed]) => {
            const edit = moveToCircuit(now, tube, { circuit, reversed })
            return edit.ok ? edit.value : now
          }, wiring)
          const tubes = end.circuits.flatMap(({ string }) => string.map(({ tube }) => tube))
          expect(tubes.sort().join('')).toBe('ABCDE')
          expect(end.circuits.every(({ string }) => string.length > 0)).toBe(true)
        },
      ),
    )
  })
})

describe('the midpoint return', () => {
  test('a joint has two ends; feed leads are none', () => {
    const [circuit] = wiring.circuits
    expect(['A.a', 'A.b', 'B.b', 'B.a', 'C.a', 'C.b'].map((end) => jointAt(circuit!, end))).toEqual([
      undefined,
      1,
      1,
      2,
      2,
      undefined,
    ])
  })
  test('moves to another joint, and goes', () => {
    const moved = made(setMidpointReturn(layout, wiring, 'A.b'))
    expect(moved.circuits[0]?.midpointReturn).toBe('A.b')
    expect(moved.circuits[1]).toBe(wiring.circuits[1])
    expect(made(clearMidpointReturn(moved, 0)).circuits[0]).not.toHaveProperty('midpointReturn')
  })
  test.each([
    ['no-joint', 'A.a'],
    ['no-joint', 'C.b'],
    ['no-midpoint', 'D.b'],
    ['no-such-part', 'Z.a'],
    ['nothing-to-change', 'C.a'],
  ])('%s: at %s it is refused', (code, end) => {
    expect(why(setMidpointReturn(layout, wiring, end))).toBe(code)
  })
  test('there is nothing to clear where there is none', () => {
    expect(why(clearMidpointReturn(wiring, 1))).toBe('nothing-to-change')
    expect(why(clearMidpointReturn(wiring, 5))).toBe('no-such-part')
  })
  test('wirings that differ in it are not the same', () => {
    expect(sameWiring(wiring, { circuits: [...wiring.circuits] })).toBe(true)
    expect(sameWiring(wiring, made(clearMidpointReturn(wiring, 0)))).toBe(false)
    expect(sameWiring(wiring, made(setMidpointReturn(layout, wiring, 'A.b')))).toBe(false)
  })
})

/** The edited text; it must read back as the edited sign, without problems. */
function saved(source: string, change: (wiring: Wiring, layout: Layout) => Wiring): string {
  const from: Sign = { layout: layoutOf(source), wiring: layoutOf(source).wiring }
  const to: Sign = { ...from, wiring: change(from.wiring, from.layout) }
  const after = editedText(source, from, to)
  expect(holdsSign(layoutOf(after), to), after).toBe(true)
  return after
}
const lines = (source: string) => source.split('\n').map((line) => line.trimEnd())

describe('saving', () => {
  test('strings that change length keep their form, and routes their place', () => {
    const after = saved(text, (w) =>
      made(moveToCircuit(w, 'C', { circuit: 1, behind: 'D', reversed: false })),
    )
    expect(lines(after)).toContain('    string: [A, -B]   # three')
    expect(after).not.toContain('midpoint_return')
    expect(after).not.toContain('measured')
    // a route serves whenever the wiring joins its ends again
    expect(after).toContain('- {between: [B.a, C.a], path: [[0, 50], [0, 100]]}')
    expect(after).toContain('  - supply: S1   # upper\n')
    expect(after).toMatch(/string:\n {6}- D.*\n {6}- C.*\n {6}- -E/)
  })
  test('a midpoint return that is set, moved or taken away changes its line only', () => {
    const without = saved(text, (w) => made(clearMidpointReturn(w, 0)))
    expect(without).toBe(text.replace('    midpoint_return: B.a\n', ''))
    expect(saved(without, (w, l) => made(setMidpointReturn(l, w, 'B.a')))).toBe(text)
    expect(saved(text, (w, l) => made(setMidpointReturn(l, w, 'A.b')))).toBe(
      text.replace('midpoint_return: B.a', 'midpoint_return: A.b'),
    )
  })
  test('any sequence of moves and returns reads back as it was meant', () => {
    const pick = fc.tuple(fc.constantFrom(...'ABCDE'), fc.nat(2), fc.boolean())
    fc.assert(
      fc.property(fc.array(pick, { minLength: 1, maxLength: 8 }), (picks) => {
        saved(text, (start, l) =>
          picks.reduce((now, [tube, kind, side]) => {
            const edit =
              kind < 2
                ? moveToCircuit(now, tube, { circuit: kind, reversed: side })
                : setMidpointReturn(l, now, `${tube}.${side ? 'a' : 'b'}`)
            return edit.ok ? edit.value : now
          }, start),
        )
      }),
      { numRuns: 60 },
    )
  })
})
