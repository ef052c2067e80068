/** Which samples of a run deserve a verdict of their own beside the one with the most voltage for its gap. */
import type { CloseRun } from '../geometry/runs.js'
import { type ChosenRule, widestFixed } from './pair-rules.js'
import { type Parts, placeBits } from './passing.js'

/** Samples where the same rules hold and the same surfaces meet. */
interface Stretch {
  readonly bits: readonly [number, number]
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
  const stretches = new Map<number, Stretch>()
  const keyOf = ([a, b]: readonly [number, number]) => a * 4096 + b
  const bitsAt = (i: number): [number, number] => [
    placeBits(parts, run.a, run.atA[i]!),
    placeBits(parts, run.b, run.atB[i]!),
  ]
  for (let i = 0; i < run.gap.length; i++) {
    const bits = bitsAt(i)
    const known = stretches.get(keyOf(bits))
    if (!known) {
      stretches.set(keyOf(bits), { bits, heaviest: i, narrowest: i })
      continue
    }
    if (weights[i]! > weights[known.heaviest]!) known.heaviest = i
    if (run.gap[i]! < run.gap[known.narrowest]!) known.narrowest = i
  }
  const here = keyOf(bitsAt(worst))
  const places = new Set<number>()
  for (const [key, { bits, heaviest, narrowest }] of stretches) {
    if (key !== here) places.add(heaviest)
    if (run.gap[narrowest]! < widestFixed(rules, ...bits)) places.add(narrowest)
  }
  places.delete(worst)
  return [...places]
}
