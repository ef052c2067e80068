/** Which samples of a run deserve a verdict of their own beside the one with the most voltage for its gap. */
import type { CloseRun } from '../geometry/runs.js'
import { type ChosenRule, widestFixed } from './pair-rules.js'
import { bitsAt, bodyBits, type Parts } from './passing.js'

/** more than all part bits together */
const side = 4096

/** Samples where the same rules hold and the same surfaces meet. */
interface Stretch {
  heaviest: number
  narrowest: number
}

/**
 * In each stretch of other surfaces than at `worst` (an electrode's), its heaviest sample; and in every stretch the
 * narrowest sample where a fixed distance may be broken.
 */
export function otherPlaces(
  parts: Parts,
  rules: readonly ChosenRule[],
  run: CloseRun,
  weights: Float64Array,
  worst: number,
): number[] {
  const [one, two] = [bodyBits(parts, run.a), bodyBits(parts, run.b)]
  const keyAt = (i: number) => bitsAt(one, run.atA[i]!) * side + bitsAt(two, run.atB[i]!)
  const stretches = new Map<number, Stretch>()
  let here = -1
  let stretch: Stretch | undefined
  for (let i = 0; i < run.gap.length; i++) {
    const key = keyAt(i)
    if (key !== here || !stretch) {
      here = key
      stretch = stretches.get(key) ?? { heaviest: i, narrowest: i }
      stretches.set(key, stretch)
    }
    if (weights[i]! > weights[stretch.heaviest]!) stretch.heaviest = i
    if (run.gap[i]! < run.gap[stretch.narrowest]!) stretch.narrowest = i
  }
  const places = new Set<number>()
  for (const [key, { heaviest, narrowest }] of stretches) {
    if (key !== keyAt(worst)) places.add(heaviest)
    if (run.gap[narrowest]! < widestFixed(rules, Math.floor(key / side), key % side)) places.add(narrowest)
  }
  places.delete(worst)
  return [...places]
}
