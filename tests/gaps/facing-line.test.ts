import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  type AirShare,
  airShare,
  facingLine,
  fieldShape,
  lengthOfField,
  type Surface,
  utilisation,
  wallAsAir,
} from '../../src/gaps/facing-line.js'

/** field in the air (V/m) at distance s (m) from the more curved surface, for a difference in volts */
const fieldAlong = ({ fieldPerVolt, line }: AirShare, difference: number, s: number): number =>
  difference * fieldPerVolt * fieldShape(line, s)

const length = fc.double({ min: 1e-4, max: 1, noNaN: true })

describe('utilisation factor', () => {
  // Schwaiger's factor acosh(u')/√(u'² − 1), check values [C]
  const table = [
    [1.05, 0.98366],
    [1.2, 0.938247],
    [1.5, 0.860818],
    [2, 0.760346],
    [3, 0.623225],
    [5, 0.467941],
  ] as const
  test.each(table)("at u' = %d is %d for equal cylinders (u' = 1 + d/2b)", (u, eta) => {
    expect(utilisation(6, 6, 12 * (u - 1))).toBeCloseTo(eta, 6)
  })
  test.each(table)("at u' = %d is %d for a cylinder over metal (u' = 1 + d/b)", (u, eta) => {
    expect(utilisation(6, Number.POSITIVE_INFINITY, 6 * (u - 1))).toBeCloseTo(eta, 6)
  })

  test('for unequal radii is the two-cylinder formula as it is written in text books', () => {
    // η = b1(h − b1) acosh(u)/(σ d), h = (D² + b1² − b2²)/2D [C]; 1e-7: that form cancels at small gaps
    fc.assert(
      fc.property(length, length, length, (p, r, d) => {
        const [b1, b2] = p < r ? [p, r] : [r, p]
        fc.pre(d > 0.01 * b2)
        const D = b1 + b2 + d
        const h = (D * D + b1 * b1 - b2 * b2) / (2 * D)
        const sigma = Math.sqrt(h * h - b1 * b1)
        const u = (D * D - b1 * b1 - b2 * b2) / (2 * b1 * b2)
        const eta = (b1 * (h - b1) * Math.acosh(u)) / (sigma * d)
        expect(Math.abs(utilisation(p, r, d) / eta - 1)).toBeLessThan(1e-7)
      }),
    )
  })

  test('does not change when all lengths are scaled, nor when the two are exchanged', () => {
    fc.assert(
      fc.property(length, length, length, fc.constantFrom(1e-3, 1e3, 1e6), (p, r, d, scale) => {
        const eta = utilisation(p, r, d)
        expect(Math.abs(utilisation(scale * p, scale * r, scale * d) / eta - 1)).toBeLessThan(1e-12)
        expect(utilisation(r, p, d)).toBe(eta)
      }),
    )
  })

  test('is 1 at no gap and falls as the gap opens', () => {
    expect(utilisation(6, 9, 0)).toBe(1)
    expect(utilisation(6, 9, 1e-12)).toBeCloseTo(1, 9)
    let last = 1
    for (let d = 0.01; d < 1e3; d *= 1.3) {
      expect(utilisation(6, 9, d)).toBeLessThan(last)
      last = utilisation(6, 9, d)
    }
  })
})

describe('field along the facing line', () => {
  test('is the bipolar field 2σU/((σ² − x²) acosh u) of two bare cylinders', () => {
    fc.assert(
      fc.property(length, length, length, fc.double({ min: 0, max: 1, noNaN: true }), (p, r, d, t) => {
        const [b1, b2] = p < r ? [p, r] : [r, p]
        fc.pre(d > 0.01 * b2)
        const D = b1 + b2 + d
        const h = (D * D + b1 * b1 - b2 * b2) / (2 * D)
        const sigma = Math.sqrt(h * h - b1 * b1)
        const u = (D * D - b1 * b1 - b2 * b2) / (2 * b1 * b2)
        const x = t * d - (h - b1)
        const exact = (2 * sigma) / ((sigma * sigma - x * x) * Math.acosh(u))
        const bare = (radius: number): Surface => ({
          kind: 'bare',
          outerRadius: radius,
          wall: 0,
          permittivity: 1,
        })
        expect(Math.abs(fieldAlong(airShare(d, bare(b1), bare(b2)), 1, t * d) / exact - 1)).toBeLessThan(1e-7)
      }),
    )
  })

  test('adds up to the voltage across the air, in closed form and by quadrature', () => {
    for (const [p, r, d] of [
      [0.006, 0.006, 0.003],
      [0.0006, 0.02, 0.03],
      [0.004, 1e6, 0.001],
    ] as const) {
      const line = facingLine(1 / p, 1 / r, d)
      expect(lengthOfField(line, 0, d) / (line.utilisation * d)).toBeCloseTo(1, 9)
      const cut = d * 0.3
      let sum = 0
      for (let i = 0; i < 20_000; i++) sum += (fieldShape(line, (cut * (i + 0.5)) / 20_000) * cut) / 20_000
      expect(lengthOfField(line, 0, cut) / sum).toBeCloseTo(1, 7)
    }
  })
})

describe('walls in series with the air', () => {
  const glass: Surface = { kind: 'glass', outerRadius: 0.006, wall: 0.001, permittivity: 5 }

  test('are worth t/εr at no gap and b ln(b/a)/εr at a large one', () => {
    expect(wallAsAir(glass, glass, 1e-9)).toBeCloseTo(0.001 / 5, 9)
    expect(wallAsAir(glass, glass, 10) / ((0.006 * Math.log(6 / 5)) / 5)).toBeCloseTo(1, 3)
  })

  test('leave the whole difference to the air when there are none', () => {
    const bare: Surface = { kind: 'bare', outerRadius: 0.003, wall: 0, permittivity: 1 }
    expect(airShare(0.004, bare, bare).share).toBe(1)
  })

  test('of permittivity 1 are air: two walled wires divide the voltage as bare ones do (within 6 %)', () => {
    // 6 %: the series formula is not exact, this is the case that tells most on it
    const wire: Surface = { kind: 'insulated', outerRadius: 0.0035, wall: 0.0026, permittivity: 1 }
    for (const d of [0.003, 0.01, 0.03]) {
      const whole = facingLine(1 / 0.0009, 1 / 0.0009, d + 0.0052)
      const exact = lengthOfField(whole, 0.0026, 0.0026 + d) / lengthOfField(whole, 0, whole.gap)
      expect(Math.abs(airShare(d, wire, wire).share / exact - 1)).toBeLessThan(0.06)
    }
  })

  // 2-D finite elements (getdp 3.2.0, gmsh 4.8.4), 0.3 %: two tubes, bore radius 6.5 mm, outer 7.5 mm, permittivity 6.5,
  // axes 40 mm over ground, ±0.5 V: V/m at the facing glass (0.02 mm out) and midway. From the project's
  // reference/cross-sections.json, `air_field`
  const airField = [
    [1, 767.5, 751.4],
    [2, 444.6, 419.2],
    [3, 316.5, 290.9],
    [5, 205.3, 178.0],
    [8, 138.8, 110.8],
    [12, 100.4, 72.3],
    [25, 59.16, 32.13],
  ] as const
  test.each(airField)('%d mm gap: field at glass and midway within 4 % of finite elements', (mm, at, mid) => {
    const tube: Surface = { kind: 'glass', outerRadius: 0.0075, wall: 0.001, permittivity: 6.5 }
    const d = mm / 1e3
    const shared = airShare(d, tube, tube)
    expect(Math.abs(fieldAlong(shared, 1, 0.02e-3) / at - 1)).toBeLessThan(0.04)
    expect(Math.abs(fieldAlong(shared, 1, d / 2) / mid - 1)).toBeLessThan(0.04)
  })
})
