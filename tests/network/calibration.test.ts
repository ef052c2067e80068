import { expect, test } from 'vitest'
import type { Measured, Supply, Wiring } from '../../src/layout/layout.js'
import { magnitude } from '../../src/math/complex.js'
import { measuredCircuits, measuredLaw } from '../../src/network/calibration.js'
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
  return { net, found: measuredCircuits(parts.layout, parts.wiring, net).map((circuit) => circuit?.factor) }
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

test('what was measured stands beside what the default law has', () => {
  const byDefault = trueState({}, 1)
  const parts = signOf({}, { primaryPower: 60, currents: new Map([['I.b', 0.021]]) })
  const [found] = measuredCircuits(parts.layout, parts.wiring, networkOf(parts))
  expect(found).toMatchObject({ from: 'watts', primaryPower: { measured: 60 } })
  // 0.85: the efficiency taken for every supply (ours)
  expect(found?.primaryPower?.computed).toBeCloseTo(byDefault.power / 0.85, 6)
  expect(found?.currents).toEqual([
    { end: 'I.b', measured: 0.021, computed: magnitude(byDefault.columns.get(1)!.atB) },
  ])
})

test('milliamps of an electronic supply are told and scale nothing', () => {
  const parts = signOf({}, { currents: new Map([['S.1', 0.03]]) })
  const [found] = measuredCircuits(parts.layout, parts.wiring, networkOf(parts))
  expect(found).toMatchObject({ from: 'nothing', currents: [{ end: 'S.1', measured: 0.03 }] })
  expect(found).not.toHaveProperty('factor')
  // an electronic supply holds the larger of its terminal currents
  expect(found?.currents[0]?.computed).toBeGreaterThan(0.029)
})

test('a string that the default law does not light has nothing computed', () => {
  const parts = signOf({ noLoadVoltage: 500 }, { primaryPower: 60, currents: new Map() })
  const [found] = measuredCircuits(parts.layout, parts.wiring, networkOf(parts))
  expect(found).toEqual({ primaryPower: { measured: 60 }, currents: [], from: 'watts' })
})

test('under edit the factor stays that of the wiring which was measured, and is sought once', () => {
  const primaryPower = trueState({}, 1.2).power / 0.85
  const parts = signOf({}, { primaryPower, currents: new Map() })
  let solved = 0
  const law = measuredLaw(parts.layout, (wiring) => {
    solved++
    return networkOf({ ...parts, wiring })
  })
  const edited: Wiring = {
    // a copy, as an answer from another thread would be
    circuits: [
      {
        supply: 'S',
        string: parts.wiring.circuits[0]!.string.slice().reverse(),
        measured: { primaryPower, currents: new Map() },
      },
    ],
  }
  expect(law(parts.wiring)[0]?.factor).toBeCloseTo(1.2, 4)
  expect(law(edited)[0]?.factor).toBe(law(parts.wiring)[0]?.factor)
  expect(solved).toBe(1)
  // a variant says nothing of its own: the glass is the same
  expect(law({ circuits: [{ supply: 'S', string: edited.circuits[0]!.string }] })[0]?.factor).toBeCloseTo(
    1.2,
    4,
  )
  // a tube has left: nothing is known of the glass then
  expect(law({ circuits: [{ supply: 'S', string: edited.circuits[0]!.string.slice(1) }] })).toEqual([
    undefined,
  ])
})
