import { describe, expect, test } from 'vitest'
import { altitudeFactor, distanceAt, voltageAt } from '../../src/rules/distance-table.js'
import { shippedSet } from '../../src/rules/resolve.js'
import type { DistanceTable, PairRule } from '../../src/rules/rule-set.js'

function pairRule(name: string, clause: string): PairRule {
  const rule = shippedSet(name)?.rules.find((r) => r.clause === clause)
  if (rule?.kind !== 'pair') throw new Error(`no pair rule ${clause}`)
  return rule
}
function tableOf(name: string, clause: string): DistanceTable {
  const { distance } = pairRule(name, clause)
  if (typeof distance === 'number') throw new Error('a fixed distance')
  return distance
}
const clearance = tableOf('iec-60664-1', 'table F.8')
const thumb = tableOf('common-practice', 'thumb')
const mm = (distance: number) => distance * 1000

describe('IEC 60664-1:2020 table F.8, clearance for peak voltage, inhomogeneous field [S2]', () => {
  const kv = [0.5, 0.6, 0.8, 1.0, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10, 12, 15, 20, 25, 30, 40, 50]
  const millimetres = [
    0.04, 0.06, 0.13, 0.26, 0.42, 0.76, 1.27, 1.8, 2.4, 3.8, 5.7, 7.9, 11.0, 15.2, 19, 25, 34, 44, 55, 77,
    100,
  ]
  test.each(kv.map((k, i) => [k, millimetres[i]]))('%f kV peak asks for %f mm', (k, expected) => {
    expect(mm(distanceAt(clearance, k * 1000))).toBeCloseTo(expected ?? Number.NaN, 10)
  })

  // interpolated checks for rms voltages with peak = √2 rms, given to a tenth of a millimetre [S2]
  test.each([
    [2, 2.2],
    [4, 7.1],
    [5, 9.6],
    [7.5, 16.4],
    [10, 23.3],
    [15, 36.4],
  ])('%f kV rms asks for %f mm between the rows', (k, expected) => {
    expect(Math.abs(mm(distanceAt(clearance, Math.SQRT2 * k * 1000)) - expected)).toBeLessThanOrEqual(
      0.05 + 1e-9,
    )
  })

  test('below the first row its distance holds; above the last row the slope goes on', () => {
    expect(mm(distanceAt(clearance, 100))).toBeCloseTo(0.04, 10)
    expect(mm(distanceAt(clearance, 60_000))).toBeCloseTo(123, 8)
    expect(voltageAt(clearance, 0.123)).toBeCloseTo(60_000, 4)
  })

  test('the altitude factor (table A.2 [S2]) is 1 up to 2000 m, 1.14, 1.29 and 1.48 at 3000, 4000 and 5000 m', () => {
    const { altitude } = pairRule('iec-60664-1', 'table F.8')
    const factors = [-300, 0, 2000, 3000, 4000, 5000].map((height) => altitudeFactor(altitude, height))
    expect(factors).toEqual([1, 1, 1, 1.14, 1.29, 1.48])
    expect(altitudeFactor(altitude, 2500)).toBeCloseTo(1.07, 12)
    expect(altitudeFactor(altitude, 6000)).toBeCloseTo(1.67, 12)
    expect(altitudeFactor([], 4000)).toBe(1)
  })
})

describe('the thumb: 3 kV rms over 25 mm, in proportion (common practice, no published source; 3 kV ours)', () => {
  test.each([
    [0, 0],
    [1.5, 12.5],
    [3, 25],
    [9, 25],
  ])('%f kV asks for %f mm', (k, expected) => {
    expect(mm(distanceAt(thumb, k * 1000))).toBeCloseTo(expected, 10)
  })
  test('a full thumb may have any voltage, half a thumb 1.5 kV, no gap none', () => {
    expect(voltageAt(thumb, 0.025)).toBe(Infinity)
    expect(voltageAt(thumb, 0.0125)).toBeCloseTo(1500, 8)
    expect(voltageAt(thumb, 0)).toBe(0)
  })
})

describe('steps', () => {
  const steps = tableOf('japan-186', 'wire to building surface')
  test.each([
    [0, 0],
    [1, 20],
    [6, 20],
    [6.01, 30],
    [9, 30],
    [9.01, 40],
    [15, 40],
  ])('%f kV asks for %f mm: each row from above its voltage to the next', (k, expected) => {
    expect(mm(distanceAt(steps, k * 1000))).toBeCloseTo(expected, 10)
  })
  test('a distance may have the voltage of the step it does not reach', () => {
    expect([0.01, 0.02, 0.029, 0.03, 0.04].map((d) => voltageAt(steps, d))).toEqual([
      0,
      6000,
      6000,
      9000,
      Infinity,
    ])
  })
})

test('the voltage that a distance may have is the highest that asks for no more than it', () => {
  const flat: DistanceTable = {
    voltages: [1000, 2000, 3000, 5000],
    distances: [0.002, 0.005, 0.005, 0.01],
    interpolation: 'linear',
    beyond: 'slope',
  }
  for (const table of [clearance, thumb, flat])
    for (let distance = 0.0005; distance < 0.024; distance += 0.0007) {
      const most = voltageAt(table, distance)
      if (most === 0) expect(distanceAt(table, 1)).toBeGreaterThan(distance)
      else {
        expect(distanceAt(table, most)).toBeLessThanOrEqual(distance + 1e-9)
        expect(distanceAt(table, most * 1.001 + 1)).toBeGreaterThan(distance)
      }
    }
})
