import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { Grounding, Layout, Wiring } from '../../src/layout/layout.js'
import {
  breaksOf,
  brokenDifference,
  brokenField,
  brokenPotential,
  brokenStrings,
  isProtected,
  openTubes,
} from '../../src/network/broken.js'
import { type NodeMix, nodeMix, probe } from '../../src/network/potentials.js'
import { circuitLeads } from '../../src/wiring/leads.js'
import { type SignParts, sketch, supplyOf, wired } from './signs.js'

const five = ['A', 'B', 'C', 'D', 'E'].map((id) => ({ id, length: 0.8 }))
const volts = 8000

const signOf = (grounding: Grounding, string = 'A -B C D E', more = {}, supply = {}) =>
  read(
    sketch(
      five,
      [supplyOf('S', { noLoadVoltage: volts, grounding, ...supply })],
      [wired('S', string, more)],
      {
        bars: [true],
      },
    ),
  )

function read(parts: SignParts) {
  const { layout, wiring, tubes, nodes } = parts
  const leads = circuitLeads(wiring).length
  const broken = brokenStrings(layout, wiring, tubes, nodes, leads)
  const probed = probe(
    wiring,
    layout.tubes.map(({ id }) => id),
    nodes,
  )
  const at = (id: string, mm: number): NodeMix =>
    nodeMix(probed, { kind: 'fixed', index: layout.tubes.findIndex((t) => t.id === id) }, mm / 1000)
  const lead = (index: number): NodeMix => nodeMix(probed, { kind: 'lead', index }, 0)
  const metal = nodeMix(probed, { kind: 'fixed', index: layout.tubes.length }, 0)
  const between = (a: NodeMix, b: NodeMix) => brokenDifference(broken, a, b)
  const field = (open: string) => brokenField(layout, wiring, tubes, nodes, leads, open)
  return {
    broken,
    at,
    lead,
    metal,
    between,
    field,
    parts,
    open: (a: NodeMix, b: NodeMix) => openTubes(broken, a, b),
  }
}

describe('the two sides of a break (physics.md §5, three conditions)', () => {
  test('midpoint: ± half to ground, all of it between any two parts', () => {
    const { at, lead, metal, between } = signOf('midpoint')
    for (const place of [at('A', 400), at('C', 1), at('E', 800), lead(0), lead(3), lead(5)])
      expect(between(place, metal)).toBe(volts / 2)
    expect(between(at('A', 400), at('E', 400))).toBe(volts)
    expect(between(lead(1), lead(2))).toBe(volts)
    // the open tube takes the worse side at each place
    expect(between(at('C', 100), at('C', 700))).toBe(volts)
  })
  test('one-end: all of it to ground, and nothing on the lead to the grounded terminal', () => {
    const { at, lead, metal, between } = signOf('one-end')
    for (const place of [at('A', 400), at('E', 400), lead(0), lead(4)])
      expect(between(place, metal)).toBe(volts)
    expect(between(lead(5), metal)).toBe(0)
    expect(between(lead(5), lead(0))).toBe(volts)
  })
  test('none: all of it to ground on either side, and between the sides', () => {
    const { at, lead, metal, between } = signOf('none')
    for (const place of [at('A', 400), lead(0), lead(5)]) expect(between(place, metal)).toBe(volts)
    expect(between(lead(0), lead(5))).toBe(volts)
  })
  test('an electrode and its lead are one conductor', () => {
    const { at, lead, between, open } = signOf('midpoint')
    expect(between(at('A', 800), lead(1))).toBe(0)
    // B is entered at its end b
    expect(between(at('B', 800), lead(1))).toBe(0)
    expect(open(at('A', 800), lead(1))).toEqual([])
  })
  test('the peak of the nameplate counts where it is more than √2 of the rms', () => {
    const { lead, between } = signOf('midpoint', 'A B C D E', {}, { noLoadPeak: 12_000 })
    expect(between(lead(0), lead(5))).toBeCloseTo(12_000 / Math.SQRT2, 9)
  })
})

describe('which tube', () => {
  const { at, lead, metal, open } = signOf('midpoint')
  test('one between the two places, where there is one', () => {
    expect(open(at('A', 400), at('C', 400))).toEqual(['B'])
    expect(open(at('D', 400), at('A', 400))).toEqual(['B'])
    expect(open(lead(3), lead(4))).toEqual(['D'])
  })
  test('else one of the two', () => {
    expect(open(at('A', 400), at('B', 400))).toEqual(['A'])
    expect(open(at('E', 100), at('E', 600))).toEqual(['E'])
  })
  test('against metal the next one along the string', () => {
    expect(open(at('A', 400), metal)).toEqual(['B'])
    expect(open(at('E', 400), metal)).toEqual(['D'])
    expect(open(lead(5), metal)).toEqual(['E'])
    expect(signOf('one-end').open(at('E', 400), metal)).toEqual(['E'])
  })
})

describe('a midpoint return', () => {
  // C.a is the joint in front of C, lead 2
  const { at, lead, metal, between, open, field, parts } = signOf('midpoint', 'A B C D E', {
    midpointReturn: 'C.a',
  })
  test('halves the voltage of each section and holds its joint', () => {
    expect(between(lead(2), metal)).toBe(0)
    expect(between(at('A', 400), at('B', 400))).toBe(volts / 2)
    expect(between(at('C', 400), at('E', 400))).toBe(volts / 2)
    expect(between(at('A', 400), lead(2))).toBe(volts / 2)
    expect(between(at('E', 400), metal)).toBe(volts / 2)
  })
  test('sections break without each other, as two circuits do', () => {
    expect(between(at('A', 400), at('E', 400))).toBe(volts)
    expect(open(at('A', 400), at('E', 400))).toEqual(['B', 'D'])
  })
  test('the half without the break stands as on paper', () => {
    const { re } = field('B')[0]!
    expect(Array.from(re.subarray(parts.nodes.count, parts.nodes.count + 3))).toEqual([
      volts / 2,
      volts / 2,
      0,
    ])
    // three equal tubes share half of the no-load voltage
    expect(re[parts.nodes.count + 3]).toBeCloseTo(-volts / 6, 6)
    expect(re[parts.nodes.count + 5]).toBeCloseTo(-volts / 2, 6)
  })
  test('is nothing to a supply without a midpoint', () => {
    const other = signOf('none', 'A B C D E', { midpointReturn: 'C.a' })
    expect(other.between(other.lead(2), other.metal)).toBe(volts)
  })
})

test('between circuits each side has its worst', () => {
  const supplies = [
    supplyOf('S', { noLoadVoltage: 8000, openCircuitProtection: true }),
    supplyOf('T', { noLoadVoltage: 5000, grounding: 'one-end' }),
  ]
  const { at, between, open, broken, metal } = read(
    sketch(five, supplies, [wired('S', 'A B'), wired('T', 'C D E')], { bars: [false] }),
  )
  expect(between(at('A', 400), at('D', 400))).toBe(4000 + 5000)
  expect(open(at('A', 400), at('D', 400))).toEqual(['B', 'E'])
  expect(isProtected(broken, at('A', 400), metal)).toBe(true)
  expect(isProtected(broken, at('A', 400), at('B', 400))).toBe(true)
  expect(isProtected(broken, at('A', 400), at('D', 400))).toBe(false)
})

/** Every break one by one: the potentials that a place may have, and the pairs of them that may be at once. */
function byEachBreak(layout: Layout, { circuits }: Wiring, c: number, a: number, b: number): number {
  const { string } = circuits[c]!
  const { grounding } = layout.supplies[0]!
  const cases: readonly (readonly [number, number])[] =
    grounding === 'midpoint'
      ? [[volts / 2, -volts / 2]]
      : grounding === 'one-end'
        ? [[volts, 0]]
        : [
            [volts, 0],
            [0, -volts],
          ]
  let worst = 0
  for (const k of string.keys())
    for (const [high, low] of cases) {
      const sides = (place: number) => (place < 2 * k + 1 ? [high] : place > 2 * k + 1 ? [low] : [high, low])
      const others = b < 0 ? [0] : sides(b)
      // one place of one lead has one potential
      for (const v of sides(a))
        for (const w of others) if (a !== b || a % 2 === 1) worst = Math.max(worst, Math.abs(v - w))
    }
  return worst
}

test('the short way agrees with trying every break', () => {
  const grounding = fc.constantFrom<Grounding[]>('midpoint', 'one-end', 'none')
  fc.assert(
    fc.property(grounding, fc.nat(10), fc.integer({ min: -1, max: 10 }), (ground, a, b) => {
      const { parts, at, lead, metal, between } = signOf(ground, 'C -A E B D')
      const mix = (place: number) =>
        place < 0 ? metal : place % 2 === 0 ? lead(place / 2) : at('CAEBD'[(place - 1) / 2]!, 300)
      expect(between(mix(a), mix(b))).toBe(byEachBreak(parts.layout, parts.wiring, 0, a, b))
    }),
  )
})

describe('a snapshot with one tube open', () => {
  test('leaves each side at its terminal, the open tube half and half', () => {
    const { field, parts } = signOf('midpoint', 'A -B C D E')
    const { re, frequency } = field('B')[0]!
    expect(frequency).toBe(0)
    expect(Array.from(re.subarray(parts.nodes.count))).toEqual([4000, 4000, -4000, -4000, -4000, -4000])
    // B is entered at its end b: that end is the one towards terminal 1
    const { first, at } = parts.nodes.tubes[1]!
    expect([re[first], re[first + at.length - 1]]).toEqual([-4000, 4000])
    expect(re[parts.nodes.tubes[0]!.first]).toBe(4000)
  })
  test('the side that is worse to ground where only one is live', () => {
    const { field, parts } = signOf('one-end')
    const { re } = field('C')[0]!
    const { first, at } = parts.nodes.tubes[2]!
    expect([...re.subarray(first, first + at.length)].every((v) => v === volts)).toBe(true)
    expect(re[parts.nodes.count + 3]).toBe(0)
  })
  test('no place is ever worse in it than the worst over all breaks', () => {
    const { field, parts, broken } = signOf('midpoint')
    for (const { tube } of breaksOf(parts.wiring)) {
      const { re } = field(tube)[0]!
      for (const [node, v] of re.entries())
        expect(Math.abs(v)).toBeLessThanOrEqual(brokenPotential(broken, { low: node, high: node, t: 0 }))
    }
  })
  test('the breaks come in the order of the strings', () => {
    expect(
      breaksOf(signOf('midpoint', 'C -A E B D').parts.wiring)
        .map(({ tube }) => tube)
        .join(' '),
    ).toBe('C A E B D')
  })
})
