import { expect, test } from 'vitest'
import type { Measured, Supply } from '../../src/layout/layout.js'
import { magnitude } from '../../src/math/complex.js'
import { calibrations } from '../../src/network/calibration.js'
import { solveBand, solveLit } from '../../src/network/lit.js'
import { networkOf, sketch, supplyOf, wired } from './signs.js'

const tubes = [
  { id: 'K', length: 0.9 },
  { id: 'I', length: 0.7 },
]
const coreAndCoil: Partial<Supply> = { type: 'core-and-coil', frequency: 60, noLoadVoltage: 5000 }

const signOf = (figures: Partial<Supply>, measured?: Measured) =>
  sketch(tubes, [supplyOf('S', figures)], [wired('S', 'K -I', measured === undefined ? {} : { measured })])

const trueState = (figures: Partial<Supply>, factor: number) => {
  const circuit = solveLit(networkOf(signOf(figures)), { factor }).circuits[0]!
  if (!circuit.lit) throw new Error('not lit')
  return circuit
}

const calibrated = (figures: Partial<Supply>, measured: Measured) => {
  const parts = signOf(figures, measured)
  const net = networkOf(parts)
  return { net, found: calibrations(parts.layout, parts.wiring, net) }
}

test.each([
  ['electronic', {}, 0.8],
  ['electronic', {}, 1.25],
  ['core-and-coil', coreAndCoil, 0.85],
])('watts at the plug of %s give back the factor they came from', (_type, figures, factor) => {
  // 0.85: the efficiency taken for every supply (ours)
  const primaryPower = trueState(figures, factor).power / 0.85
  const { net, found } = calibrated(figures, { primaryPower, currents: new Map() })
  expect(found[0]).toBeCloseTo(factor, 4)
  const { nominal } = solveBand(net, found)
  const [circuit] = nominal.circuits
  expect(circuit!.lit && circuit!.power).toBeCloseTo(0.85 * primaryPower, 3)
})

test('milliamps calibrate a core-and-coil circuit, not an electronic one', () => {
  const current = magnitude(trueState(coreAndCoil, 1.1).columns.get(0)!.atA)
  expect(calibrated(coreAndCoil, { currents: new Map([['K.a', current]]) }).found[0]).toBeCloseTo(1.1, 4)
  expect(calibrated({}, { currents: new Map([['K.a', 0.028]]) }).found).toEqual([undefined])
})

test('what no believable column explains is not used', () => {
  expect(calibrated({}, { primaryPower: 2000, currents: new Map() }).found).toEqual([undefined])
  expect(calibrated(coreAndCoil, { primaryPower: 2000, currents: new Map() }).found).toEqual([undefined])
})
