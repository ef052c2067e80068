import { describe, expect, test } from 'vitest'
import type { Layout } from '../../src/layout/layout.js'
import { parseLayout } from '../../src/layout/parse.js'
import { supplyKeys, supplyRanges } from '../../src/layout/ranges.js'
import type { Edit } from '../../src/wiring/edit.js'
import { type SupplyFigures, withSupply, withTubeHeight } from '../../src/wiring/figure-edits.js'
import { kiosk } from '../layout/kiosk.js'

/** one tube and one supply, with one key written otherwise */
const sign = (key: string, value: number, units = 'mm') => {
  const keys = { no_load_kv: 6, short_circuit_ma: 30, frequency_hz: 24_000, height: 40, [key]: value }
  const { height, ...supply } = keys
  return `layout: 1
units: ${units}
tubes: [{id: K, path: [[0, 0], [300, 0]], height: ${height}}]
supplies: [${JSON.stringify({ id: 'S1', type: 'electronic', grounding: 'midpoint', ...supply })}]
circuits: [{supply: S1, string: [K]}]
`
}
const read = (text: string): Layout => {
  const { layout, problems } = parseLayout(text, 'sign.yaml')
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  return layout
}
const accepted = (text: string): boolean => parseLayout(text, 'sign.yaml').problems.length === 0
const why = <T>(edit: Edit<T>) => (edit.ok ? 'made' : edit.why.code)
const layout = read(sign('height', 40))

describe('an edit takes what the file takes', () => {
  test.each([
    'shortCircuitCurrent',
    'noLoadVoltage',
    'frequency',
    'ratedPower',
    'groundFaultTrip',
    'maxLead',
  ] as const)('%s', (figure) => {
    const [key, inFile] = supplyKeys[figure]
    const [low, high, unit] = supplyRanges[key]
    for (const value of [low, high, low * 0.99, high * 1.01, -1]) {
      const figures: SupplyFigures = { [figure]: value / inFile }
      expect(withSupply(layout, 'S1', figures).ok, `${value} ${unit}`).toBe(accepted(sign(key, value)))
    }
    expect(withSupply(layout, 'S1', { [figure]: high / inFile + 1 })).toEqual({
      ok: false,
      why: { code: 'out-of-range', what: figure, allowed: `${low} to ${high} ${unit}` },
    })
    expect(why(withSupply(layout, 'S1', { [figure]: Number.NaN }))).toBe('out-of-range')
  })

  test.each([
    ['mm', 0.001, '-10000 to 10000 mm'],
    ['in', 0.0254, '-393.7 to 393.7 in'],
  ] as const)('height in %s', (units, unit, allowed) => {
    const drawn = read(sign('height', 1, units))
    for (const metres of [-10, 10, 3, 10.1, -10.1])
      expect(withTubeHeight(drawn, 'K', metres).ok, `${metres} m`).toBe(
        accepted(sign('height', metres / unit, units)),
      )
    expect(withTubeHeight(drawn, 'K', 10.1)).toMatchObject({ why: { code: 'out-of-range', allowed } })
  })
})

describe('a midpoint that a variant goes back to', () => {
  const returning = read(
    kiosk
      .replace('    midpoint_return: I.b\n', '')
      .replace('string: [-O, S, K, I]}', 'string: [-O, S, K, I], midpoint_return: S.b}'),
  )
  test.each(['one-end', 'none'] as const)('keeps its supply from grounding %s', (grounding) => {
    expect(withSupply(returning, 'S1', { grounding })).toEqual({
      ok: false,
      why: { code: 'midpoint-used', supply: 'S1', end: 'S.b', variant: 'feed behind the O' },
    })
  })
  test('stays, and other figures may change', () => {
    expect(withSupply(returning, 'S1', { grounding: 'midpoint' }).ok).toBe(true)
    expect(withSupply(returning, 'S1', { frequency: 30_000 }).ok).toBe(true)
  })
  test('of another supply is no hindrance', () => {
    const [first] = returning.supplies
    if (!first) throw new Error('no supply')
    const two = { ...returning, supplies: [first, { ...first, id: 'S2' }] }
    expect(withSupply(two, 'S2', { grounding: 'none' }).ok).toBe(true)
  })
})
