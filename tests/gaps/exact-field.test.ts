import { describe, expect, test } from 'vitest'
import { ionisation, streamerCriterion, uniformBreakdown } from '../../src/gaps/discharge.js'
import { airShare, type Surface } from '../../src/gaps/facing-line.js'
import { gapStart } from '../../src/gaps/gap-stress.js'
import { type CoatedPair, coatedPair } from './coated-pair.js'

const seaLevel = 1.01325
const coated = (s: Surface) => ({
  core: s.outerRadius - s.wall,
  outer: s.outerRadius,
  permittivity: s.permittivity,
})
const round = (
  kind: 'glass' | 'insulated' | 'bare',
  mm: number,
  wallMm: number,
  permittivity: number,
): Surface => ({
  kind,
  outerRadius: mm / 1e3,
  wall: wallMm / 1e3,
  permittivity,
})

/** as many multipoles as the narrowest of our gaps needs: doubling them changes nothing (first test) */
const ordersFor = (d: number, a: Surface, b: Surface) =>
  Math.ceil(22 / Math.sqrt(d / Math.max(a.outerRadius, b.outerRadius)))

const exactPair = (a: Surface, b: Surface, d: number) =>
  coatedPair(coated(a), coated(b), d, ordersFor(d, a, b))

/** difference of the cores at which ∫ᾱ dx = 9.15, by quadrature and bisection */
function exactStreamer(pair: CoatedPair, d: number): number {
  const n = 1500
  const field = Array.from({ length: n }, (_, i) => pair.field((d * (i + 0.5)) / n))
  let [low, high] = [10, 1e6]
  for (let step = 0; step < 40; step++) {
    const volts = (low + high) / 2
    const sum = field.reduce((k, e) => k + (ionisation((e * volts * 1e-6) / seaLevel) * d) / n, 0)
    if (sum * seaLevel * 1e3 < streamerCriterion) low = volts
    else high = volts
  }
  return low
}

describe('the multipole solution that judges', () => {
  const tube = round('glass', 6, 1, 5)

  test('has converged', () => {
    const orders = ordersFor(1e-3, tube, tube)
    const [once, twice] = [orders, 2 * orders].map((n) => coatedPair(coated(tube), coated(tube), 1e-3, n))
    expect(once!.share / twice!.share).toBeCloseTo(1, 9)
    expect(once!.field(0) / twice!.field(0)).toBeCloseTo(1, 6)
  })

  // an earlier, separate solution of the exact 2-D field: start by voltage and by streamer integral, kV peak [C]
  test.each([
    [1, 6.529, 6.599],
    [3, 12.794, 12.711],
    [10, 33.154, 32.411],
  ])('repeats the worked check at %d mm', (mm, byVoltage, byStreamer) => {
    const d = mm / 1e3
    const exact = exactPair(tube, tube, d)
    expect(uniformBreakdown(d, seaLevel) / exact.share / 1e3).toBeCloseTo(byVoltage, 2)
    expect(exactStreamer(exact, d) / 1e3).toBeCloseTo(byStreamer, 2)
  })

  test('is the bipolar field for bare cylinders', () => {
    const wire = round('bare', 2, 0, 1)
    const exact = exactPair(wire, bar, 4e-3)
    expect(exact.share).toBeCloseTo(1, 7)
    expect(exact.field(0) / airShare(4e-3, wire, bar).fieldPerVolt).toBeCloseTo(1, 6)
  })
})

const bar = round('bare', 10, 0, 1)

describe('start of a discharge against the exact 2-D field', () => {
  // pair, gaps in mm, error allowed as share of the exact start: low (safe) and high (unsafe). Measured, with a margin
  const tube8 = round('glass', 4, 1, 6.65)
  const tube15 = round('glass', 7.5, 1.1, 7.1)
  const tube25 = round('glass', 12.5, 1.4, 7.1)
  const polyethylene = round('insulated', 3.5, 2.6, 2.3)
  const silicone = round('insulated', 3.5, 2.9, 3)
  const wire = round('bare', 0.6, 0, 1)
  test.each([
    ['15 mm tubes', tube15, tube15, [1, 3, 10, 25], -0.005, 0.005],
    ['15 mm tubes, close', tube15, tube15, [0.5], -0.01, 0.015],
    ['8 mm tube beside 25 mm tube', tube8, tube25, [1, 3, 10, 25], -0.01, 0.008],
    ['15 mm tube and a bare bar', tube15, bar, [1, 3, 10, 25], -0.005, 0.005],
    ['leads', polyethylene, polyethylene, [1, 3, 10, 25], -0.04, 0.01],
    ['lead and tube', silicone, tube15, [1, 3, 10, 25], -0.02, 0.01],
    ['lead and bare bar', silicone, bar, [1, 3, 10, 25], -0.03, 0.01],
    // with Peek's corona for the bare wire, which lies under the streamer criterion
    ['bare wire and tube', wire, tube15, [0.5, 1, 3, 10, 25], -0.1, 0.025],
    // the known limit of the series formula: unsafe at small gaps
    ['bare wire and lead', wire, silicone, [0.5, 1], 0, 0.17],
    ['bare wire and lead, wider', wire, silicone, [3, 10, 25], -0.1, 0.07],
  ] as const)('%s', (_name, a, b, gaps, low, high) => {
    for (const mm of gaps) {
      const d = mm / 1e3
      const exact = exactPair(a, b, d)
      const first = Math.min(uniformBreakdown(d, seaLevel) / exact.share, exactStreamer(exact, d))
      const start = gapStart({ gap: d, a, b, frequency: 50, altitude: 0, mode: 'best' }).difference
      expect(start / first - 1).toBeGreaterThan(low)
      expect(start / first - 1).toBeLessThan(high)
    }
  })
})
