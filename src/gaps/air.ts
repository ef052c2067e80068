/** What altitude and frequency do to the strength of air. */

/** Which of two readings of thin evidence: the likeliest value, or one that errs on the safe side. */
export type StartMode = 'best' | 'cautious'

export interface AirState {
  /** δ, density relative to 20 °C at sea level */
  readonly density: number
  /** Pa, at that altitude */
  readonly pressure: number
}

const seaLevelPressure = 101_325 // Pa
/** the pressure law holds in the troposphere: altitudes outside it are taken as its edges, m */
const troposphere = [-500, 11_000] as const

/**
 * Air at an altitude (m) and temperature (°C): p = 101325 Pa (1 − 2.25577e-5 H)^5.25588, the international standard
 * atmosphere (ISO 2533:1975, from memory); δ = (p/101325 Pa)(293/(273 + t)), as IEC 60060-1:2010 (from memory).
 * The temperature stays what is said: signs hang in warm rooms on mountains too.
 */
export function airDensity(altitudeM: number, temperatureC = 20): AirState {
  const height = Math.min(troposphere[1], Math.max(troposphere[0], altitudeM))
  const share = (1 - 2.25577e-5 * height) ** 5.25588
  return { density: (share * 293) / (273 + temperatureC), pressure: share * seaLevelPressure }
}

/** The pressure (bar) that the breakdown formulas, written for 20 °C, take in air of relative density δ. */
export const effectivePressureBar = (density: number): number => 1.01325 * density

/** Share of the 50 Hz strength left at 40 kHz: published drops of 26 % at 1 mm and 12 % at 10 mm (second-hand). */
function shareAt40kHz(gap: number): number {
  const decades = Math.min(1, Math.max(0, Math.log10(Math.max(gap, 1e-9) / 1e-3)))
  return 0.74 + 0.14 * decades
}

/**
 * What a start voltage at 50 Hz is multiplied with at `frequency` (Hz) for a gap (m). Best: 1 up to 20 kHz, falling
 * linearly to the measured share at 40 kHz, constant above. Cautious: the measured share or 0.80, whichever is
 * lower, from 20 kHz on.
 */
export function frequencyFactor(frequency: number, gap: number, mode: StartMode): number {
  const share = shareAt40kHz(gap)
  if (mode === 'cautious') return frequency < 20e3 ? 1 : Math.min(0.8, share)
  const way = Math.min(1, Math.max(0, (frequency - 20e3) / 20e3))
  return 1 - way * (1 - share)
}
