import { expect, it } from 'vitest'
import { plateCapacitance } from '../../src/field/face-plate.js'

it('a square sheet of side 1 m: 40.811 pF (F. H. Read, J. Comput. Phys. 133, 1997; from memory)', () => {
  expect(Math.abs(plateCapacitance(1, 1) / 40.811e-12 - 1)).toBeLessThan(0.02)
})
it('sheets do not mind being turned, and grow with their size', () => {
  expect(plateCapacitance(0.3, 1.2) / plateCapacitance(1.2, 0.3)).toBeCloseTo(1, 9)
  expect(plateCapacitance(3, 12) / plateCapacitance(0.3, 1.2)).toBeCloseTo(10, 9)
})
