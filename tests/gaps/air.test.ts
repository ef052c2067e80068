import { describe, expect, test } from 'vitest'
import { airDensity, frequencyFactor } from '../../src/gaps/air.js'

describe('air density', () => {
  test('is 1 at 20 °C and sea level, at 101325 Pa', () => {
    expect(airDensity(0).density).toBe(1)
    expect(airDensity(0, 20).pressure).toBe(101_325)
  })

  // ISO 2533:1975 standard atmosphere, pressure by geopotential altitude, Pa [M]; 1e-4: rounded constants of the law
  test.each([
    [1000, 89_874.6],
    [2000, 79_495.2],
    [3000, 70_108.5],
    [5000, 54_019.9],
  ])('at %i m has the pressure of the standard atmosphere', (altitude, pascal) => {
    expect(Math.abs(airDensity(altitude).pressure / pascal - 1)).toBeLessThan(1e-4)
  })

  test('falls with altitude and with temperature', () => {
    for (let h = 0; h < 9000; h += 250) {
      expect(airDensity(h + 250).density).toBeLessThan(airDensity(h).density)
    }
    expect(airDensity(0, 40).density).toBeCloseTo(293 / 313, 12)
  })

  test('is finite at absurd altitudes', () => {
    for (const h of [-1e9, 1e9]) expect(airDensity(h).density).toBeGreaterThan(0.2)
  })
})

describe('frequency factor', () => {
  // published measurements at 40 kHz: −26 % at 1 mm, −12 % at 10 mm [S]
  test('at 40 kHz is 0.74 at 1 mm and below, 0.88 at 10 mm and above, linear in log d', () => {
    for (const d of [0, 0.2e-3, 1e-3]) expect(frequencyFactor(40e3, d, 'best')).toBeCloseTo(0.74, 12)
    for (const d of [10e-3, 50e-3]) expect(frequencyFactor(40e3, d, 'best')).toBeCloseTo(0.88, 12)
    expect(frequencyFactor(40e3, Math.sqrt(10) * 1e-3, 'best')).toBeCloseTo(0.81, 12)
  })

  test('best is 1 up to 20 kHz, half way down at 30 kHz and constant above 40 kHz', () => {
    for (const f of [0, 50, 20e3]) expect(frequencyFactor(f, 1e-3, 'best')).toBe(1)
    expect(frequencyFactor(30e3, 1e-3, 'best')).toBeCloseTo(0.87, 12)
    expect(frequencyFactor(90e3, 1e-3, 'best')).toBeCloseTo(0.74, 12)
  })

  test('cautious is the lower of 0.80 and the measured share from 20 kHz', () => {
    expect(frequencyFactor(60, 1e-3, 'cautious')).toBe(1)
    expect(frequencyFactor(19_999, 1e-3, 'cautious')).toBe(1)
    expect(frequencyFactor(20e3, 1e-3, 'cautious')).toBeCloseTo(0.74, 12)
    expect(frequencyFactor(24e3, 25e-3, 'cautious')).toBe(0.8)
  })

  test('cautious is never above best', () => {
    for (let f = 0; f < 60e3; f += 500) {
      for (const d of [0, 1e-4, 2e-3, 5e-3, 0.03]) {
        expect(frequencyFactor(f, d, 'cautious')).toBeLessThanOrEqual(frequencyFactor(f, d, 'best'))
      }
    }
  })
})
