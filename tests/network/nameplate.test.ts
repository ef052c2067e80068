import { expect, test } from 'vitest'
import { nameplateField } from '../../src/network/nameplate.js'
import { sketch, supplyOf, wired } from './signs.js'

const six = ['A', 'B', 'C', 'D', 'E', 'F'].map((id) => ({ id, length: 0.8 }))

const fieldOf = (string: string, grounding: 'midpoint' | 'one-end' | 'none', more = {}) => {
  const supply = supplyOf('S', { noLoadVoltage: 9000, grounding })
  const parts = sketch(six, [supply], [wired('S', string, more)], { bars: [false, true], face: true })
  const leads = string.split(' ').length + 1
  const [field] = nameplateField(parts.layout, parts.wiring, parts.tubes, parts.nodes, leads)
  return { field: field!, nodes: parts.nodes, leads: Array.from(field!.re.subarray(parts.nodes.count)) }
}

const expectAll = (values: readonly number[], expected: readonly number[]) => {
  expect(values.length).toBe(expected.length)
  for (const [k, value] of values.entries()) expect(value).toBeCloseTo(expected[k]!, 8)
}

test('9 kV midpoint-grounded on six equal tubes: +4.5, +3, +1.5, 0, −1.5, −3, −4.5 kV along the string', () => {
  const expected = [4500, 3000, 1500, 0, -1500, -3000, -4500]
  expectAll(fieldOf('A B C D E F', 'midpoint').leads, expected)
  expectAll(fieldOf('-D A -F B C E', 'midpoint').leads, expected)
  expectAll(fieldOf('A B C D E F', 'none').leads, expected)
  expectAll(
    fieldOf('A B C D E F', 'one-end').leads,
    expected.map((v) => v + 4500),
  )
})

test('half the electrode drop lies at each end and the column is linear', () => {
  const { field, nodes } = fieldOf('-A B C D E F', 'midpoint')
  // one tube of six: 1500 V, of which the electrode pair has its share at short-circuit current
  const gradient = 1000 * (8 / 12) ** 0.69 * (30 / 25) ** -0.25
  const share = 200 / (200 + gradient * 0.8)
  const { first, at } = nodes.tubes[0]!
  const last = at.length - 1
  // entered at b: end b is high
  expect(field.re[first + last]).toBeCloseTo(4500 - 750 * share, 8)
  expect(field.re[first]).toBeCloseTo(3000 + 750 * share, 8)
  for (const [k, s] of at.entries()) {
    const straight = field.re[first]! + ((field.re[first + last]! - field.re[first]!) * s) / 0.8
    expect(field.re[first + k]).toBeCloseTo(straight, 8)
  }
})

test('a joint at the midpoint stands at 0 V and each half has half the voltage', () => {
  expectAll(
    fieldOf('A B C D E F', 'midpoint', { midpointReturn: 'B.b' }).leads,
    [4500, 2250, 0, -1125, -2250, -3375, -4500],
  )
})

test('metal stands at 0 V, peak over √2 replaces a smaller rms voltage', () => {
  const { field, nodes } = fieldOf('A B C D E F', 'midpoint')
  for (let i = nodes.firstBar; i < nodes.count; i++) expect(field.re[i]).toBe(0)
  expect(Math.max(...field.im.map(Math.abs))).toBe(0)
  const supply = supplyOf('S', { noLoadVoltage: 9000, noLoadPeak: 10000 * Math.SQRT2 })
  const parts = sketch(six, [supply], [wired('S', 'A B C D E F')])
  const [peak] = nameplateField(parts.layout, parts.wiring, parts.tubes, parts.nodes, 7)
  expect(peak!.re[parts.nodes.count]).toBeCloseTo(5000, 6)
})

test('every circuit has its own field, 0 V elsewhere', () => {
  const parts = sketch(
    six,
    [supplyOf('S'), supplyOf('T', { grounding: 'one-end' })],
    [wired('S', 'A B C'), wired('T', 'D E F')],
  )
  const [s, t] = nameplateField(parts.layout, parts.wiring, parts.tubes, parts.nodes, 8)
  expect([s!.supply, t!.supply]).toEqual(['S', 'T'])
  const d = parts.nodes.tubes[3]!.first
  for (let i = 0; i < d; i++) expect(t!.re[i]).toBe(0)
  for (let i = d; i < parts.nodes.count; i++) expect(s!.re[i]).toBe(0)
  expect(t!.re[parts.nodes.count + 4]).toBe(8000)
})
