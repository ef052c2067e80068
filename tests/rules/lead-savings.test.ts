/** What laying an output lead otherwise gives back, and what makes the residual. */
import { describe, expect, test, vi } from 'vitest'
import { liftFor } from '../../src/geometry/relaid.js'
import { inspection, prepare, solver } from '../../src/inspection.js'
import type { Layout } from '../../src/layout/layout.js'
import { magnitude } from '../../src/math/complex.js'
import { leadSavings } from '../../src/rules/lead-savings.js'
import { layoutOf } from './signs.js'

// a machine that does other things at the same time is slow
vi.setConfig({ testTimeout: 30_000 })

/** One bar over a grounded face; its first lead makes a detour of 2 m at `height` (mm), `conduit` or none. */
const detour = (height: number, conduit = 'none'): Layout =>
  layoutOf(`layout: 1
title: detour
units: mm
altitude_m: 0
face: {size: [6000, 6000], metal: grounded}
defaults:
  tube: {diameter: 12, wall: 1, glass: soda-lime, fill: neon, height: ${height}, boots: true}
  lead: {conductor: 1.2, diameter: 7, insulation: silicone, height: ${height}}
tubes:
  - {id: A, path: [[2000, 2000], [3000, 2000]]}
supplies:
  - id: S1
    type: electronic
    no_load_kv: 6
    short_circuit_ma: 30
    frequency_hz: 24000
    grounding: midpoint
    terminals: [[1000, 2000, ${height}], [3100, 2000, ${height}]]
circuits:
  - supply: S1
    string: [A]
    leads:
      - {between: [S1.1, A.a], path: [[1000, 2000], [1000, 3000], [2000, 3000], [2000, 2000]], conduit: ${conduit}${conduit === 'metal' ? ', bore: 16' : ''}}
      - {between: [A.b, S1.2], path: [[3000, 2000], [3100, 2000]]}
`)

function savingsOf(layout: Layout) {
  const prepared = prepare(layout)
  const solve = solver(prepared)
  const now = solve(layout.wiring)
  const found = inspection(prepared, layout.wiring, now)
  const savings = leadSavings({ layout, ...found }, now, (laid) => solve(layout.wiring, laid))
  return { found, circuit: found.circuits[0]!, savings }
}

/**
 * A of a lead (wire 1.2 mm in 7 mm of silicone) at so many mm over a grounded plane: ωC'lV with
 * C' = 2πε0/acosh(h/a_eq), exact for the cylinder over a plane, a_eq = b (a/b)^(1/εr) (physics: capacitance)
 */
function strayOver(height: number, length: number, volts: number): number {
  const equivalent = 3.5 * (0.6 / 3.5) ** (1 / 3)
  const perMetre = 55.632503e-12 / Math.acosh(height / equivalent)
  return 2 * Math.PI * 24_000 * perMetre * length * volts
}

describe('cut to length', () => {
  const { circuit, savings } = savingsOf(detour(40))
  test('a detour of 2 m gives back the stray current of 2 m', () => {
    const [first, second] = savings
    expect(first?.between).toEqual(['S1.1', 'A.a'])
    expect(first?.cut?.length).toBeCloseTo(1, 9)
    // the corners see each other, and the terminal's kV change a little without the detour
    const expected = strayOver(40, 2, circuit.leads[0]?.voltage ?? 0)
    expect((first?.cut?.stray ?? 0) / expected).toBeGreaterThan(0.9)
    expect((first?.cut?.stray ?? 0) / expected).toBeLessThan(1.1)
    // the other lead is straight, and both have their 25 mm of air
    expect(second?.cut).toBeUndefined()
    expect(savings.map(({ lift }) => lift)).toEqual([undefined, undefined])
  })
  test('what the lead does not eat reaches the tube', () => {
    expect(savings[0]?.cut?.least).toBeGreaterThan(0)
  })
})

describe('lifted off the metal', () => {
  const { circuit, savings } = savingsOf(detour(8))
  test('by as much as 25 mm of air take', () => {
    // 8 mm to the axis of a lead of 7 mm: 4.5 mm of air
    expect(savings.map(({ lift }) => lift?.by)).toEqual([
      expect.closeTo(0.0205, 9),
      expect.closeTo(0.0205, 9),
    ])
  })
  test('gives back what the formula of a cylinder over a plane says', () => {
    const volts = circuit.leads[0]?.voltage ?? 0
    const expected = strayOver(8, 3, volts) - strayOver(28.5, 3, volts)
    const gained = savings[0]?.lift?.stray ?? 0
    // beside the kV that change: the short pieces up to the lifted lead
    expect(gained / expected).toBeGreaterThan(0.85)
    expect(gained / expected).toBeLessThan(1.15)
  })
  test('in metal conduit there is nothing to lift', () => {
    const inMetal = savingsOf(detour(8, 'metal')).savings[0]
    expect(inMetal?.lift).toBeUndefined()
    expect(inMetal?.cut).toBeDefined()
  })
})

test.each([
  // straight above, below, beside (3-4-5: 40 mm between axes 32 mm aside need 24 mm of height), far enough
  [[0, 0, 0.008], [0, 0, 0], 0.0045, 0.0205],
  [[0, 0, -0.008], [0, 0, 0], 0.0045, -0.0205],
  [[0.032, 0, 0], [0, 0, 0], 0.017, 0.024],
  [[0, 0, 0.05], [0, 0, 0], 0.0465, 0],
] as const)('a lead at %j over metal at %j with %d m of air rises by %d m', (lead, metal, gap, by) => {
  expect(liftFor(lead, metal, gap, 0.025)).toBeCloseTo(by, 9)
})

test('the parts make up the residual, in step with it (Kirchhoff: nothing else leads to ground)', () => {
  const { circuit } = savingsOf(detour(20))
  const parts = [...circuit.tubes, ...circuit.leads].map(({ ofResidual }) => ofResidual ?? Number.NaN)
  const sum = parts.reduce((total, share) => total + share, 0)
  expect(circuit.residual).toBeGreaterThan(1e-3)
  expect(sum / (circuit.residual ?? 0)).toBeCloseTo(1, 9)
  // the terminals' currents say the same: what goes out and does not come back
  const [one, two] = circuit.terminals.map(({ current }) => current)
  expect(magnitude({ re: one!.re + two!.re, im: one!.im + two!.im }) / sum).toBeCloseTo(1, 9)
})
