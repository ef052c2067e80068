/**
 * All wirings of a sign, tube after tube from terminal 1 on. A beginning that is already worse than the bar of the
 * pool is left with all that could follow (branch and bound); without the bound every wiring is scored.
 */
import type { Judge } from './judge.js'
import type { Model } from './model.js'
import type { Pool } from './pool.js'
import { compareScores } from './score.js'

export interface BranchProgress {
  readonly share: number
  /** complete wirings scored, and beginnings looked at */
  readonly judged: number
  readonly nodes: number
  /** every wiring was scored or left with a bound */
  readonly complete: boolean
}

/** Number of wirings of a sign: n! · 2ⁿ for each circuit. */
export const wiringCount = ({ circuits }: Pick<Model, 'circuits'>): number =>
  circuits.reduce((all, tubes) => tubes.reduce((count, _, k) => count * 2 * (k + 1), all), 1)

/** Yields between parts of the tree; `mostNodes` ends it. */
export function* branches(
  model: Model,
  judge: Judge,
  pool: Pool,
  options: { readonly bound: boolean; readonly mostNodes: number },
): Generator<BranchProgress, BranchProgress> {
  const free = model.circuits.map((tubes) => [...tubes])
  const circuitAt = model.circuits.flatMap((tubes, c) => tubes.map(() => c))
  const codes = new Int32Array(circuitAt.length)
  // of each position: the jumpers that come behind it
  const jumpersBehind = circuitAt.map(
    (_, at) => circuitAt.slice(at + 1).filter((c, k) => circuitAt[at + k] === c).length,
  )
  // each tube that is not placed yet will be entered by a lead, which is at least so long
  const least = options.bound ? model.leastLeads() : new Float64Array(model.tubeIds.length)
  let toCome = model.circuits.flat().reduce((sum, t) => sum + least[t]!, 0)
  let judged = 0
  let nodes = 0
  judge.restart()
  const isFree = new Uint8Array(2 * model.tubeIds.length).fill(1)
  // jumpers still to be put on, less those of the file that can still be kept: so many more will change
  const toChange = (at: number): number => {
    let most = 0
    for (const [a, b] of model.jumpers) if (isFree[a] === 1 && isFree[b] === 1) most++
    const wanted = jumpersBehind[at]!
    return 2 * Math.max(0, wanted - most)
  }
  const hopeless = (at: number): boolean => {
    const bar = options.bound ? pool.bar() : undefined
    if (bar === undefined) return false
    const { unfit, fix, severities, changed, lead } = judge.bound()
    const least = { unfit, fix, severities, changed: changed + toChange(at), lead: lead + toCome }
    return compareScores(least, bar) >= 0
  }

  /** tries a tube at this position, and everything behind it */
  const enter = (at: number, tube: number, code: number, visit: () => void): void => {
    const mine = free[circuitAt[at]!]!
    nodes++
    codes[at] = code
    const allowed = judge.place(code)
    toCome -= least[tube]!
    // the end that was left is joined now, the one that was entered too; the other one waits for the next tube
    const left = at > 0 && circuitAt[at - 1] === circuitAt[at] ? codes[at - 1]! ^ 1 : -1
    if (left >= 0) isFree[left] = 0
    isFree[code] = 0
    if (allowed && !hopeless(at)) {
      const where = mine.indexOf(tube)
      mine.splice(where, 1)
      visit()
      mine.splice(where, 0, tube)
    }
    if (left >= 0) isFree[left] = 1
    isFree[code] = 1
    toCome += least[tube]!
    judge.takeBack()
  }
  const walk = (at: number): void => {
    if (nodes > options.mostNodes) return
    if (at === codes.length) {
      judged++
      pool.offer(codes, judge.score())
      return
    }
    for (const tube of [...free[circuitAt[at]!]!])
      for (const code of [2 * tube, 2 * tube + 1]) enter(at, tube, code, () => walk(at + 1))
  }

  // the first two tubes here, so that there is a place to stop at
  const starts = startsOf(circuitAt, free)
  for (const [i, start] of starts.entries()) {
    const [first, second] = start
    if (first === undefined || nodes > options.mostNodes) break
    enter(0, first >> 1, first, () => {
      if (second === undefined) walk(1)
      else enter(1, second >> 1, second, () => walk(2))
    })
    yield { share: (i + 1) / starts.length, judged, nodes, complete: false }
  }
  return { share: 1, judged, nodes, complete: nodes <= options.mostNodes }
}

/** Every way to place the first tube, and the second one where there is one. */
function startsOf(circuitAt: readonly number[], free: readonly (readonly number[])[]): number[][] {
  const both = (tubes: readonly number[]) => tubes.flatMap((t) => [2 * t, 2 * t + 1])
  return both(free[circuitAt[0]!]!).flatMap((first) => {
    if (circuitAt.length < 2) return [[first]]
    const rest = free[circuitAt[1]!]!.filter((t) => t !== first >> 1)
    return both(rest).map((second) => [first, second])
  })
}
