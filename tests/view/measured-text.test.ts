import { expect, test } from 'vitest'
import { measuredBriefly, measuredText } from '../../src/view/measured-text.js'

const watts = { primaryPower: { measured: 96, computed: 103 }, currents: [], from: 'watts' } as const

test('watts that scale the law', () => {
  const circuit = { ...watts, factor: 0.92 }
  // physics.md §3: ±30 % by default, ±5 % where measured
  expect(measuredText(circuit)).toBe(
    'measured 96 W at the plug, computed 103 W: the law is scaled by 0.92, band ±5 %',
  )
  expect(measuredBriefly(circuit)).toEqual(['plug 96 W (computed 103 W), law x0.92 ±5 %'])
})

test('what no law explains, and what says nothing of the glass', () => {
  expect(measuredText(watts)).toContain('no believable law explains it, so it is not used, band ±30 %')
  const electronic = {
    currents: [{ end: 'S1.1', measured: 0.029, computed: 0.03 }],
    from: 'nothing',
  } as const
  expect(measuredText(electronic)).toBe(
    'measured 29.0 mA at S1.1, computed 30.0 mA: an electronic supply sets its own mA, so the law stays, band ±30 %',
  )
  expect(measuredBriefly(electronic)).toEqual(['S1.1 29.0 mA (computed 30.0 mA), law as it is ±30 %'])
})

test('a string that is not lit by the default law, with several figures', () => {
  const circuit = {
    primaryPower: { measured: 96 },
    currents: [{ end: 'K.a', measured: 0.028 }],
    from: 'watts',
  } as const
  expect(measuredText(circuit)).toMatch(
    /^measured 96 W at the plug, not lit by the default law; measured 28\.0 mA at K\.a, not lit/,
  )
  expect(measuredBriefly(circuit)).toEqual([
    'plug 96 W (computed: not lit), law as it is ±30 %',
    'K.a 28.0 mA (computed: not lit)',
  ])
})
