import fc from 'fast-check'
import { expect, test } from 'vitest'
import { aboutZero, potentialScale, potentialStep, scaleEntries, stepGlyphs } from '../../src/view/scale.js'

const volts = fc.double({ min: 1e-3, max: 1e6, noNaN: true })

test('a potential and its negative lie on mirrored steps', () => {
  fc.assert(
    fc.property(volts, fc.double({ min: -2e6, max: 2e6, noNaN: true }), (peak, v) => {
      const scale = potentialScale(peak)
      expect(potentialStep(scale, v) + potentialStep(scale, -v)).toBe(2 * aboutZero)
    }),
  )
})

test('steps rise with the potential, through all seven', () => {
  const scale = potentialScale(6000)
  const steps = Array.from({ length: 1201 }, (_, k) => potentialStep(scale, -6000 + 10 * k))
  expect([...new Set(steps)]).toEqual([0, 1, 2, 3, 4, 5, 6])
  expect(steps).toEqual([...steps].sort((a, b) => a - b))
})

test('full scale holds the peak and is less than twice as large', () => {
  fc.assert(
    fc.property(volts, (peak) => {
      const { full } = potentialScale(peak)
      // the largest step between round ends is from 1.5 to 3, so a peak just above 1.5 meets the factor 2
      expect(full / peak).toBeGreaterThanOrEqual(1 - 1e-9)
      expect(full / peak).toBeLessThanOrEqual(2 + 1e-9)
    }),
  )
})

test('a peak that is a round end stays the end', () => {
  for (const full of [1500, 3000, 4500, 6000, 7500, 9000, 12000, 15000, 450, 0.3])
    expect(potentialScale(full).full).toBeCloseTo(full, 9)
})

test('a sign without potential still has a scale, on which 0 is about 0', () => {
  for (const peak of [0, Number.NaN, Infinity, -1]) {
    const scale = potentialScale(peak)
    expect(scale.full).toBe(1500)
    expect(potentialStep(scale, 0)).toBe(aboutZero)
  }
})

test('the legend names bounds in kV with their sign', () => {
  expect(scaleEntries(potentialScale(4400)).map(({ glyph, text }) => `${glyph} ${text}`)).toEqual([
    '= -4.5…-3',
    '~ -3…-1.5',
    '- -1.5…-0.3',
    'o about 0',
    '+ +0.3…+1.5',
    '* +1.5…+3',
    '# +3…+4.5',
  ])
})

test('a potential inside the bounds of a legend entry has the step and the character of that entry', () => {
  const scale = potentialScale(12000)
  for (const { low, high, step, glyph } of scaleEntries(scale)) {
    expect(potentialStep(scale, (low + high) / 2)).toBe(step)
    expect(stepGlyphs[step]).toBe(glyph)
  }
})

test('each step has a character of its own', () => {
  expect(new Set(stepGlyphs).size).toBe(7)
})
