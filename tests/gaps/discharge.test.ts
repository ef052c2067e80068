import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  airStart,
  ionisation,
  peekField,
  streamerCriterion,
  streamerIntegral,
  streamerStart,
  uniformBreakdown,
  worstWedge,
} from '../../src/gaps/discharge.js'
import { facingLine, fieldShape } from '../../src/gaps/facing-line.js'
import { touchingStart } from './touching-start.js'

const seaLevel = 1.01325
const flat = (d: number) => facingLine(0, 0, d)

describe('uniform breakdown', () => {
  // standard spheres of 2 cm, IEC 60052, kV peak [M]
  test.each([
    [0.5, 2.8],
    [1, 4.7],
    [2, 8.0],
    [3, 11.2],
    [5, 17.4],
  ])('of %d mm is within 2 %% of the standard sphere value %d kV', (mm, kv) => {
    expect(Math.abs(uniformBreakdown(mm / 1e3, seaLevel) / (kv * 1e3) - 1)).toBeLessThan(0.02)
  })

  test('depends on pressure times distance only', () => {
    expect(uniformBreakdown(4e-3, 0.5)).toBeCloseTo(uniformBreakdown(2e-3, 1), 6)
  })
})

describe('streamer start', () => {
  // uniform gaps, kV peak [C]
  test.each([
    [0.5, 2.818],
    [1, 4.658],
    [2, 7.955],
    [5, 16.989],
    [10, 31.278],
  ])('in a uniform gap of %d mm is %d kV', (mm, kv) => {
    expect(streamerStart(flat(mm / 1e3), seaLevel) / 1e3).toBeCloseTo(kv, 2)
  })

  test('of a uniform gap solves the quadratic by hand', () => {
    // pd·1.6053[(x − 2.165)² − 0.2873] = 9.15, x = E/p
    const pd = 3 * seaLevel
    const x = 2.165 + Math.sqrt(streamerCriterion / (1.6053 * pd) + 0.2873)
    expect(streamerStart(flat(3e-3), seaLevel) / (x * pd * 1e3)).toBeCloseTo(1, 6)
  })

  test('the two pieces of the ionisation law meet within 0.3 % at 7.943 kV/(mm bar), and it never falls', () => {
    const [below, above] = [ionisation(7.943), ionisation(7.943 * (1 + 1e-12))]
    expect(Math.abs(above / below - 1)).toBeLessThan(0.003)
    expect(ionisation(1)).toBe(0) // under the threshold the square grows again: it must not count
    let last = 0
    for (let x = 0; x < 14; x += 0.01) {
      expect(ionisation(x)).toBeGreaterThanOrEqual(last)
      last = ionisation(x)
    }
  })

  const radius = fc.double({ min: 3e-4, max: 0.05, noNaN: true })
  const gap = fc.double({ min: 1e-4, max: 0.08, noNaN: true })
  const pressure = fc.double({ min: 0.5, max: 1.1, noNaN: true })

  test('the closed form agrees with plain quadrature', () => {
    fc.assert(
      fc.property(
        radius,
        radius,
        gap,
        pressure,
        fc.double({ min: 2, max: 20, noNaN: true }),
        (p, r, d, bar, x) => {
          const line = facingLine(1 / p, 1 / r, d)
          const n = 4000
          let sum = 0
          // squared spacing from both ends, where the field is steep
          for (let i = 0; i < n; i++) {
            const t = (i + 0.5) / n
            const s = (d / 2) * t * t
            const ds = (d * t) / n
            sum += ionisation(x * fieldShape(line, s)) * ds + ionisation(x * fieldShape(line, d - s)) * ds
          }
          // 1e-3 and a little: the quadrature's own error at the ends of the ionised stretches
          const { value } = streamerIntegral(line, x, bar)
          expect(Math.abs(value - sum * bar * 1e3)).toBeLessThan(1e-3 * value + 1e-3)
        },
      ),
      { numRuns: 60 },
    )
  })

  test('is where the integral is 9.15', () => {
    fc.assert(
      fc.property(radius, radius, gap, pressure, (p, r, d, bar) => {
        const line = facingLine(1 / p, 1 / r, d)
        const volts = streamerStart(line, bar)
        const x = volts / (line.utilisation * d * bar * 1e6)
        expect(Math.abs(streamerIntegral(line, x, bar).value / streamerCriterion - 1)).toBeLessThan(1e-6)
      }),
    )
  })

  test('obeys similarity: all lengths doubled at half the pressure start at the same voltage', () => {
    fc.assert(
      fc.property(radius, radius, gap, (p, r, d) => {
        const small = streamerStart(facingLine(1 / p, 1 / r, d), 1)
        const large = streamerStart(facingLine(0.5 / p, 0.5 / r, 2 * d), 0.5)
        expect(large / small).toBeCloseTo(1, 8)
      }),
    )
  })

  test('has no step where the greatest field passes the join of the law', () => {
    // 0.15…0.2 mm between plates cross 7.943 kV/(mm bar); the published pieces allow 0.23 % of ᾱ
    let last = streamerStart(facingLine(200, 200, 0.14e-3), seaLevel)
    for (let d = 0.1401e-3; d < 0.22e-3; d += 0.1e-6) {
      const now = streamerStart(facingLine(200, 200, d), seaLevel)
      expect(now).toBeGreaterThan(last)
      expect(now / last - 1).toBeLessThan(0.002)
      last = now
    }
  })

  test('is the lower one at wide gaps, uniform breakdown at narrow ones', () => {
    const wide = facingLine(1 / 0.006, 1 / 0.006, 0.025)
    expect(airStart(wide, seaLevel)).toBe(streamerStart(wide, seaLevel))
    expect(airStart(flat(1e-3), seaLevel)).toBe(uniformBreakdown(1e-3, seaLevel))
  })
})

describe("Peek's corona field", () => {
  // F. W. Peek's law for parallel wires, 30 kV/cm (1 + 0.301/√r) [S]: by hand at r = 1 cm
  test('is 39.03 kV/cm on a clean wire of 1 cm radius', () => {
    expect(peekField(0.01, 1, 1)).toBeCloseTo(39.03e5, 3)
    expect(peekField(0.01, 1, 0.8)).toBeCloseTo(0.8 * 39.03e5, 3)
  })

  test('and the streamer criterion, two separate pieces of evidence, agree within 10 % on thin wires', () => {
    for (const r of [0.3e-3, 0.6e-3, 2e-3, 6e-3]) {
      for (const ratio of [5, 20, 100]) {
        const line = facingLine(1 / r, 0, r * ratio)
        const peek = peekField(r, 1, 1) * line.utilisation * line.gap
        expect(Math.abs(peek / streamerStart(line, seaLevel) - 1)).toBeLessThan(0.1)
      }
    }
  })
})

describe('touching parts', () => {
  const glass = { thickness: 1e-3, permittivity: 5 }
  test('with one 1 mm wall of permittivity 5 start at 2.764 kV, with two at 4.351 kV [C]', () => {
    expect(touchingStart([glass]) / 1e3).toBeCloseTo(2.764, 3)
    expect(touchingStart([glass, glass]) / 1e3).toBeCloseTo(4.351, 3)
  })

  test('start at the least over all wedge gaps', () => {
    for (const air of [1e-5, 2e-4, 2e-3]) {
      const at = (d: number) => (uniformBreakdown(d, seaLevel) * (d + air)) / d
      const d = worstWedge(air, seaLevel)
      for (const f of [0.5, 0.9, 0.99, 1.01, 1.1, 2]) expect(at(f * d)).toBeGreaterThan(at(d))
    }
  })

  test('of bare metal hold no voltage', () => {
    expect(touchingStart([])).toBe(0)
  })
})
