/** Edits between circuits at the cursor. */
import { describe, expect, test } from 'vitest'
import { prepare } from '../../src/inspection.js'
import { parseLayout } from '../../src/layout/parse.js'
import { reduce } from '../../src/screen/reduce.js'
import { initialState } from '../../src/screen/start.js'
import { type State, unsaved } from '../../src/screen/state.js'
import { session } from './session.js'

/** Tubes one under the other, each 300 mm from left (a) to right (b): S1 feeds A B, S2 C D, S3 E. */
const source = (measured = '', third = true) => `layout: 1
units: mm
face: {size: [1000, 1000], metal: none}
tubes:
${['A', 'B', 'C', 'D', 'E'].map((id, i) => `  - {id: ${id}, path: [[100, ${100 + 100 * i}], [400, ${100 + 100 * i}]]}`).join('\n')}
supplies:
${['midpoint', 'one-end', ...(third ? ['midpoint'] : [])].map((g, i) => `  - {id: S${i + 1}, type: electronic, no_load_kv: 6, short_circuit_ma: 30, frequency_hz: 24000, grounding: ${g}}`).join('\n')}
circuits:
  - {supply: S1, string: [A, -B]${measured}}
  - {supply: S2, string: [C, -D${third ? '' : ', E'}]}
${third ? '  - {supply: S3, string: [E]}\n' : ''}`

function opened(text: string): State {
  const { layout, problems } = parseLayout(text, 'sign.yaml')
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  const file = { path: 'sign.yaml', name: 'sign.yaml', source: text, layout }
  return initialState(file, { theme: { level: 8, ground: 'dark' }, ascii: false }, 80, 24)
}
const press = (state: State, ...keys: string[]): State =>
  keys.reduce((now, key) => reduce(now, { type: 'key', key }).state, state)
/** the cursor freely on a tube, at a share of its length */
function onTube(state: State, tube: string, share = 0.5): State {
  const index = state.prepared.tubes.findIndex(({ name }) => name === tube)
  const { points } = prepare(state.present.sign.layout).tubes[index]!.line
  const between = (k: number) => points[k]! + share * (points[points.length - 3 + k]! - points[k]!)
  return { ...state, cursor: { on: 'map', x: between(0), y: between(1), pick: 0 } }
}
const strings = ({ present }: State) =>
  present.sign.wiring.circuits.map((c) => c.string.map((e) => (e.reversed ? `-${e.tube}` : e.tube)).join(' '))

describe('a tube to another circuit', () => {
  test('with several others the supply is picked', () => {
    const asked = press(onTube(opened(source()), 'B'), 'M')
    expect(asked.dialog).toMatchObject({
      kind: 'pick',
      title: 'Move B to the circuit of',
      choices: [{ value: '1' }, { value: '2' }],
    })
    const moved = reduce(asked, { type: 'picked', value: '1' }).state
    // C leaves at its right end, D at its left one: both 100 mm from an end of B; C comes first
    expect(strings(moved)).toEqual(['A', 'C -B -D', 'E'])
    expect(moved.solving).toBe(true)
    expect(strings(press(moved, 'u'))).toEqual(['A -B', 'C -D', 'E'])
  })

  test('with one other it goes there at once, behind the tube whose far end is nearest', () => {
    const state = opened(source('', false))
    // C leaves at its right end (400, 300), -D at its left one (100, 400), E at its right one (400, 500)
    expect(strings(press(onTube(state, 'A'), 'M'))).toEqual(['-B', 'C -A -D E'])
    expect(strings(press(onTube(state, 'E'), 'M'))).toEqual(['A -B E', 'C -D'])
  })

  test('a circuit is never left empty', () => {
    const asked = press(onTube(opened(source()), 'E'), 'M')
    const next = reduce(asked, { type: 'picked', value: '0' }).state
    expect(strings(next)).toEqual(['A -B', 'C -D', 'E'])
    expect(next.message?.text).toBe('E is the only tube of S3: a circuit cannot be empty.')
  })

  test('with one circuit there is nowhere to go', () => {
    const s = session('open-window')
    s.keys('M')
    expect(s.state().dialog).toBeUndefined()
    expect(s.state().message?.text).toContain('one circuit only')
  })

  test('what was measured on the old string goes, and it is said', () => {
    const state = press(onTube(opened(source(', measured: {primary_w: 50}', false)), 'B'), 'M')
    expect(state.present.sign.wiring.circuits[0]).not.toHaveProperty('measured')
    expect(state.message?.text).toContain('what was measured on other strings goes')
  })
})

describe('the midpoint return', () => {
  test('at the joint nearest to the cursor, from either side of it, and off again', () => {
    const state = opened(source())
    const set = press(onTube(state, 'A', 0.9), 'R')
    expect(set.present.sign.wiring.circuits[0]?.midpointReturn).toBe('A.b')
    expect(unsaved(set)).toBe(true)
    // B is entered at its end b, right: the same joint
    const off = press(onTube(set, 'B', 0.9), 'R')
    expect(off.present.sign.wiring.circuits[0]).not.toHaveProperty('midpointReturn')
    expect(unsaved(press(set, 'u'))).toBe(false)
  })
  test.each([
    ['A', 0.1, 'A.a is joined to the supply: a midpoint return needs a joint between two tubes.'],
    ['C', 0.9, 'S2 has no grounded midpoint to go back to.'],
  ])('near %s at %f it is refused', (tube, share, text) => {
    const state = press(onTube(opened(source()), tube, share), 'R')
    expect(state.message).toEqual({ text, level: 'bad' })
    expect(unsaved(state)).toBe(false)
  })
  test('the supply keeps its midpoint as long as it is used', () => {
    const set = press(onTube(opened(source()), 'A', 0.9), 'R', 'e')
    const grounding = reduce(reduce(set, { type: 'picked', value: 'S1' }).state, {
      type: 'picked',
      value: 'grounding',
    }).state
    const refused = reduce(grounding, { type: 'picked', value: 'one-end' }).state
    expect(refused.message?.text).toBe('A.b goes back to the midpoint of S1: take that away first (R).')
    expect(refused.present.sign.layout.supplies[0]?.grounding).toBe('midpoint')
  })
})
