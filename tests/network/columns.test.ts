import { describe, expect, test } from 'vitest'
import { columnLaw } from '../../src/network/columns.js'

describe('the column law', () => {
  test('passes through the published points: 1000 V/m near 8 mm, 400 V/m near 30 mm', () => {
    // German Wikipedia, "Leuchtröhre", 2006 [R]; "near" taken as 1 %
    expect(columnLaw(0.008, 'neon').gradient(0.025)).toBeCloseTo(1000, 9)
    expect(Math.abs(columnLaw(0.03, 'neon').gradient(0.1) / 400 - 1)).toBeLessThan(0.01)
  })

  test('gives neon 1.2 times the gradient of argon-mercury', () => {
    // published neon/mercury ratio, encyclopedia [R]; 0.83 is 1/1.2 to two digits
    const ratio = columnLaw(0.012, 'neon').gradient(0.02) / columnLaw(0.012, 'argon-mercury').gradient(0.02)
    expect(ratio).toBeCloseTo(1.2, 1)
  })

  test.each([
    [8, 25],
    [15, 25],
    [17.5, 37.5],
    [20, 50],
    [22.5, 75],
    [25, 100],
    [30, 100],
  ])('rates a tube of %f mm at %f mA', (mm, mA) => {
    // physics page: 25 mA up to 15 mm, 50 mA at 20 mm, 100 mA from 25 mm, linear between
    expect(columnLaw(mm / 1000, 'neon').ratedCurrent).toBeCloseTo(mA / 1000, 12)
  })

  test('falls with the current, and its slope is the derivative', () => {
    const { gradient, gradientSlope } = columnLaw(0.012, 'neon-mercury')
    const h = 1e-7
    for (const current of [0.005, 0.02, 0.06]) {
      expect(gradient(current * 16)).toBeCloseTo(gradient(current) / 2, 9)
      const difference = (gradient(current + h) - gradient(current - h)) / (2 * h)
      expect(gradientSlope(current) / difference).toBeCloseTo(1, 6)
    }
  })

  test('takes a common factor on gradient and electrode drop', () => {
    const [plain, strong] = [columnLaw(0.012, 'neon'), columnLaw(0.012, 'neon', 1.3)]
    expect(plain.electrodeDrop).toBe(200)
    expect(strong.electrodeDrop).toBeCloseTo(260, 9)
    expect(strong.gradient(0.03) / plain.gradient(0.03)).toBeCloseTo(1.3, 12)
  })
})
