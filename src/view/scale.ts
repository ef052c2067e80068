/**
 * The scale of instantaneous potential: seven steps, symmetric about 0. Step 0 is the most negative, 3 is "about 0",
 * 6 the most positive; a step is at the same time the index of its meaning in theme.ts. Volts.
 */

export interface PotentialScale {
  /** the end of the scale: the peak of the sign, rounded up */
  readonly full: number
  /** below this |v| counts as about 0 */
  readonly dead: number
}

export const aboutZero = 3
export const stepCount = 7

/** round thirds and a round dead zone: every bound of such a scale is a short decimal number */
const roundFulls = [1.5, 3, 4.5, 6, 7.5, 9, 12, 15]
/** an unlit sign has no peak to scale by */
const fullWithoutPeak = 1500

/** The scale for a sign whose largest |v| is `peak`: its end rounded up, its dead zone a fifteenth of that. */
export function potentialScale(peak: number): PotentialScale {
  const full = Number.isFinite(peak) && peak > 0 ? roundedUp(peak) : fullWithoutPeak
  return { full, dead: full / 15 }
}

function roundedUp(peak: number): number {
  const power = 10 ** Math.floor(Math.log10(peak / 1.5))
  // a peak that is a round end already must not climb to the next for a rounding error
  const round = roundFulls.find((full) => full * power >= peak * (1 - 1e-9))
  return (round ?? 15) * power
}

/** The step of v: 0 … 6. Beyond the end of the scale the outer steps go on. */
export function potentialStep({ full, dead }: PotentialScale, v: number): number {
  const size = Math.abs(v)
  if (size < dead) return aboutZero
  const steps = size < full / 3 ? 1 : size < (2 * full) / 3 ? 2 : 3
  return v < 0 ? aboutZero - steps : aboutZero + steps
}

/**
 * One character for each step, so that a sign is read without colour. The family says which side of 0 (negative lies
 * flat, positive is crossed), the ink says how far from it. Plain ASCII: line weights of box drawing look too alike.
 */
export const stepGlyphs = ['=', '~', '-', 'o', '+', '*', '#'] as const
/** no potential is known: glass that does not light */
export const unknownGlyph = '?'

export const stepGlyph = (step: number): string => stepGlyphs[step] ?? unknownGlyph

export interface ScaleEntry {
  readonly step: number
  readonly glyph: string
  /** bounds, V; the outer steps end at full scale */
  readonly low: number
  readonly high: number
  /** bounds in kV as `+3…+4.5`; `about 0` in the middle */
  readonly text: string
}

/** The legend, from the most negative to the most positive step. `dots` stands between two bounds. */
export function scaleEntries({ full, dead }: PotentialScale, dots = '…'): ScaleEntry[] {
  const bounds = [-full, (-2 * full) / 3, -full / 3, -dead, dead, full / 3, (2 * full) / 3, full]
  return stepGlyphs.map((glyph, step) => {
    const low = bounds[step]!
    const high = bounds[step + 1]!
    const text = step === aboutZero ? 'about 0' : `${signedKv(low)}${dots}${signedKv(high)}`
    return { step, glyph, low, high, text }
  })
}

/** `+4.5`, `-0.3`: the bounds of a scale are short numbers, so what is beyond six figures is rounding. */
function signedKv(volts: number): string {
  const kv = Number((volts / 1000).toPrecision(6))
  return kv > 0 ? `+${kv}` : String(kv)
}
