/**
 * The law of a discharge column and its electrodes (±30 %: every result that rests on it is shown with a band).
 *
 *   E(d, I) = Kg · 1000 V/m · (8 mm/d)^0.69 · (I/I0)^(−0.25)
 *
 * through 400 V/m near 30 mm and 1000 V/m near 8 mm (German Wikipedia, "Leuchtröhre", 2006); the falling
 * characteristic and the electrode drop are from memory.
 */
import type { Fill } from '../layout/layout.js'

export interface ColumnLaw {
  /** I0, A rms */
  readonly ratedCurrent: number
  /** n of the falling characteristic */
  readonly exponent: number
  /** V rms of the electrode pair, independent of the current */
  readonly electrodeDrop: number
  /** V/m rms at this local current, A rms */
  readonly gradient: (current: number) => number
  /** dE/dI, V/m per A */
  readonly gradientSlope: (current: number) => number
}

const strength: Record<Fill, number> = { neon: 1, 'argon-mercury': 0.83, 'neon-mercury': 0.9 }
const pairDrop: Record<Fill, number> = { neon: 200, 'argon-mercury': 220, 'neon-mercury': 220 }
const exponent = 0.25

/** `diameter`: outside of the glass, m. `factor` multiplies gradient and electrode drop. */
export function columnLaw(diameter: number, fill: Fill, factor = 1): ColumnLaw {
  const ratedCurrent = ratedCurrentOf(diameter)
  const atRated = factor * strength[fill] * 1000 * (0.008 / diameter) ** 0.69
  const gradient = (current: number) => atRated * (current / ratedCurrent) ** -exponent
  return {
    ratedCurrent,
    exponent,
    electrodeDrop: factor * pairDrop[fill],
    gradient,
    gradientSlope: (current) => (-exponent * gradient(current)) / current,
  }
}

/** 25 mA up to 15 mm, 50 mA at 20 mm, 100 mA from 25 mm, straight lines between. */
function ratedCurrentOf(diameter: number): number {
  const d = diameter * 1000
  if (d <= 15) return 0.025
  if (d <= 20) return 0.025 + 0.005 * (d - 15)
  return d < 25 ? 0.05 + 0.01 * (d - 20) : 0.1
}
