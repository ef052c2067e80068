/** The printed deck against an independent circuit simulator, ngspice: it has to find the potentials of the solution. */
import { readFileSync } from 'node:fs'
import { describe, expect, test, vi } from 'vitest'
import { deckOf } from '../../src/commands/netlist.js'
import { networkSolver, prepare } from '../../src/inspection.js'
import type { Layout } from '../../src/layout/layout.js'
import { parseLayout } from '../../src/layout/parse.js'
import { nodeNames } from '../../src/netlist/node-names.js'
import { circuitLeads } from '../../src/wiring/leads.js'
import { simulated } from './spice.js'

// a machine that does other things at the same time is slow
vi.setConfig({ testTimeout: 30_000 })

function layoutOf(text: string): Layout {
  const { layout, problems } = parseLayout(text, 'sign.yaml')
  expect(problems).toEqual([])
  if (!layout) throw new Error('no layout')
  return layout
}
const shipped = (name: string): Layout =>
  layoutOf(readFileSync(new URL(`../../layouts/${name}`, import.meta.url), 'utf8'))

function solvedDeck(layout: Layout, source = 0) {
  const prepared = prepare(layout)
  const solved = networkSolver(prepared)(layout.wiring)
  return { prepared, solved, deck: deckOf('sign.yaml', prepared, solved, source) }
}

/** Largest difference of any node over the largest potential; every node but grounded metal must be there. */
async function disagreement(layout: Layout, source = 0): Promise<number> {
  const { prepared, solved, deck } = solvedDeck(layout, source)
  if (deck === undefined) throw new Error('not lit')
  const volts = await simulated(deck)
  const supply = layout.wiring.circuits[source]!.supply
  const field = solved.nominal.fields.find((f) => f.supply === supply)!
  const names = nodeNames(prepared.nodes, {
    tubes: layout.tubes.map(({ id }) => id),
    metal: [true, false].flatMap((bars) =>
      layout.metal.flatMap((m) => ((m.kind === 'bar') === bars ? [m.id] : [])),
    ),
    leads: circuitLeads(layout.wiring).map(({ between }) => between),
  })
  const largest = Math.max(...field.re.map((re, i) => Math.hypot(re, field.im[i]!)))
  expect(largest).toBeGreaterThan(300)
  const away = names.map((name, i) => {
    const found = volts.get(name.toLowerCase())
    // what the deck does not name lies at ground
    if (!found && solved.net.grounded.includes(i)) return Math.hypot(field.re[i]!, field.im[i]!)
    if (!found) throw new Error(`the simulator has no ${name}`)
    return Math.hypot(found.re - field.re[i]!, found.im - field.im[i]!)
  })
  return Math.max(...away) / largest
}

// measured 1e-12: the printed figures have 15 digits
const sameSolution = 1e-9

describe('ngspice finds the potentials of', () => {
  test.each([
    ['open-window.yaml', 0, 'an electronic supply with its midpoint grounded'],
    ['core-and-coil-6kv.yaml', 0, 'a core-and-coil one'],
    ['channel-letters.yaml', 0, 'one with a joint back to its midpoint'],
    ['conversion-gone-wrong.yaml', 0, 'one with a plate that floats'],
    ['reference-12-tubes.yaml', 1, 'the second of two supplies'],
  ])('%s, circuit %i: %s', async (name, source) => {
    expect(await disagreement(shipped(name), source)).toBeLessThan(sameSolution)
  })

  const kinds = ['electronic', 'core-and-coil'].flatMap((type) =>
    ['midpoint', 'one-end', 'none'].map((grounding) => [type, grounding] as const),
  )
  test.each(kinds)(
    'two signs on one face, %s, grounding %s, beside a core-and-coil supply',
    async (type, grounding) => {
      const layout = layoutOf(twoSigns(type, grounding))
      expect(await disagreement(layout, 0)).toBeLessThan(sameSolution)
      expect(await disagreement(layout, 1)).toBeLessThan(sameSolution)
    },
  )
})

const twoSigns = (type: string, grounding: string, secondKv = 4) => `layout: 1
title: Two bars
units: mm
face: {size: [900, 400], metal: grounded}
tubes:
  - {id: K, path: [[60, 60], [660, 60]]}
  - {id: k, path: [[60, 90], [660, 90]], fill: argon-mercury}
  - {id: Ö 1, path: [[60, 300], [700, 300]]}
supplies:
  - {id: S1, type: ${type}, no_load_kv: 6, short_circuit_ma: 30, frequency_hz: 24000, grounding: ${grounding}, terminals: [[20, 60], [20, 90]]}
  - {id: S2, type: core-and-coil, no_load_kv: ${secondKv}, short_circuit_ma: 30, frequency_hz: 60, grounding: none, terminals: [[20, 300], [40, 330]]}
circuits:
  - {supply: S1, string: [K, -k]}
  - {supply: S2, string: [Ö 1]}
metal:
  - {id: rail, path: [[0, 200], [800, 200]], diameter: 20, height: 10, grounded: true}
  - {id: bar, path: [[0, 220], [800, 220]], diameter: 20, height: 30, grounded: false}
`

describe('the deck', () => {
  const text = twoSigns('electronic', 'none')

  test('begins with what it is, for whoever finds it in a folder', () => {
    const { deck = '' } = solvedDeck(layoutOf(text))
    const [first, ...rest] = deck.split('\n')
    expect(first).toBe('* Two bars (sign.yaml), lit, fed by S1: written by tubewright')
    const head = rest.slice(0, rest.indexOf('*')).join('\n')
    expect(head).toContain('Units: V and A rms, ohm, farad, henry')
    expect(head).toContain('Condition: lit, 24000 Hz')
    expect(head).toContain('linearised operating point')
    expect(head).toContain('may be negative')
    expect(head).toContain('rshunt')
    expect(head).toContain('Supplies besides S1: S2.')
    expect(deck).toContain('\n.ac lin 1 24000 24000\n')
    expect(deck.endsWith('\n.end\n')).toBe(true)
  })

  test('lists at the end what a run of it must give', async () => {
    const { deck = '' } = solvedDeck(layoutOf(text))
    const volts = await simulated(deck)
    const expected = [...deck.matchAll(/^\* {3}(\w+) {2}([\d.]+) {2}(-?[\d.]+)$/gm)]
    expect(expected.map(([, name]) => name)).toEqual([
      ...['L_S1_1_K_a', 'L_K_b_k_b', 'L_k_a_S1_2', 'L_S2_1_O_1_a', 'L_O_1_b_S2_2'],
    ])
    for (const [, name = '', size, angle] of expected) {
      const { re, im } = volts.get(name.toLowerCase()) ?? { re: 0, im: 0 }
      // printed to a hundredth of a volt and a thousandth of a degree
      expect(Math.abs(Math.hypot(re, im) - Number(size))).toBeLessThanOrEqual(0.0051)
      expect(Math.abs((Math.atan2(im, re) * 180) / Math.PI - Number(angle))).toBeLessThanOrEqual(0.00051)
    }
  })

  test('is the same every time', () => {
    expect(solvedDeck(layoutOf(text)).deck).toBe(solvedDeck(layoutOf(text)).deck)
  })

  test('holds nothing from the file that a simulator could run', () => {
    const hostile = text.replace('title: Two bars', 'title: "Two\\n.control\\nshell date\\n.endc"')
    const { deck = '' } = solvedDeck(layoutOf(hostile))
    expect(deck).not.toMatch(/^\s*(\.control|shell)/m)
    const kinds = /^(\*|R\d|C\d|L\d|V\d|\.print ac |\.ac lin |\.options |\.end$)/
    expect(
      deck
        .trimEnd()
        .split('\n')
        .filter((line) => !kinds.test(line)),
    ).toEqual([])
  })

  test('of a sign with a dark circuit keeps its glass as capacitance, without resistors', async () => {
    // 0.4 kV cannot keep 0.6 m burning
    const layout = layoutOf(twoSigns('electronic', 'midpoint', 0.4))
    const { deck = '', solved } = solvedDeck(layout)
    expect(solved.nominal.circuits.map((c) => c.lit)).toEqual([true, false])
    expect(deck).toContain('* Not lit: S2.')
    expect(deck).not.toMatch(/^R\d+ .*O_1/m)
    expect(deck).toMatch(/^C\d+ .*O_1_0/m)
    expect(await disagreement(layout, 0)).toBeLessThan(sameSolution)
    expect(solvedDeck(layout, 1).deck).toBeUndefined()
  })
})
