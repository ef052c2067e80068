/** What the gaps between tubes, and between tubes and metal, allow: once per sign. */
import type { BodyRef } from '../geometry/runs.js'
import type { Prepared } from '../inspection.js'
import { circuitOf } from '../rules/passing.js'
import { type Limit, type LimitContext, limitOf, runLimit, severityAt, swappedLimit } from './limits.js'
import type { Model } from './model.js'

/** Limits of all runs that the wiring does not move. */
export function fixedLimits(
  { runs, tubes }: Prepared,
  context: LimitContext,
  along: (code: number, places: Float64Array) => Float64Array,
  still: (places: Float64Array) => Float64Array,
  drop: Float64Array,
  most: number,
): Pick<Model, 'steady' | 'steadyFix' | 'metal' | 'pairs'> {
  const codes = 2 * tubes.length
  const steady: number[] = []
  let steadyFix = 0
  const metal: Limit[][] = Array.from({ length: codes }, () => [])
  const pairs: (Limit[] | undefined)[] = new Array(codes * codes)
  const tubeOf = (ref: BodyRef) => (ref.kind === 'fixed' && ref.index < tubes.length ? ref.index : -1)
  const note = (code: number, other: number, limits: readonly Limit[]) => {
    const at = code * codes + other
    if (limits.length > 0) pairs[at] = [...(pairs[at] ?? []), ...limits]
  }
  for (const run of runs) {
    const [t, u] = [tubeOf(run.a), tubeOf(run.b)]
    // tubes that no circuit uses stand at no potential
    if ([t, u].some((tube) => tube >= 0 && circuitOf(context.parts, { kind: 'fixed', index: tube }) < 0))
      continue
    const limit = runLimit(context, run)
    if (t === u) {
      for (const own of limitOf(limit, along(2 * t, run.atA), along(2 * t, run.atB), drop[t]!)) {
        const severity = severityAt(own, 0, 0)
        steady.push(severity)
        if (own.broken || severity > 1) steadyFix++
      }
    } else if (u < 0) {
      for (const code of [2 * t, 2 * t + 1])
        metal[code]!.push(...limitOf(limit, along(code, run.atA), still(run.atB), most))
    } else
      for (const code of [2 * t, 2 * t + 1])
        for (const other of [2 * u, 2 * u + 1]) {
          const there = limitOf(limit, along(code, run.atA), along(other, run.atB), most)
          note(code, other, there)
          note(other, code, there.map(swappedLimit))
        }
  }
  return { steady, steadyFix, metal, pairs }
}
