/**
 * The search where there are too many wirings to look at each: from a wiring down to the best within one move of it,
 * and again from a shaken one. Moves are made in one circuit: a stretch turned round (one tube: a turn; the whole
 * string: terminals swapped), a stretch of up to three tubes put elsewhere, and the feed at another link.
 */
import type { Judge, Look } from './judge.js'
import type { Pool } from './pool.js'
import { compareScores, type Score } from './score.js'

export interface DescentProgress {
  readonly judged: number
  /** descents so far */
  readonly round: number
  readonly best: Score | undefined
}

type Strings = readonly (readonly number[])[]

/** Numbers from 0 to below 1, the same for the same seed (mulberry32). */
function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = Math.imul(state ^ (state >>> 15), state | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32
  }
}

const turned = (stretch: readonly number[]): number[] => stretch.map((code) => code ^ 1).reverse()

/** How many moves there are in a string of n tubes: turns of stretches, feeds, stretches put elsewhere. */
export const moveCount = (n: number): number => {
  let count = (n * (n + 1)) / 2 + n - 1
  for (let length = 1; length <= Math.min(3, n - 1); length++) count += 2 * (n - length + 1) ** 2
  return count
}

/** The string after the move of this number, from 0 on. */
export function moved(string: readonly number[], move: number): readonly number[] {
  const n = string.length
  let k = move
  for (let from = 0; from < n; from++) {
    if (k < n - from)
      return [
        ...string.slice(0, from),
        ...turned(string.slice(from, from + k + 1)),
        ...string.slice(from + k + 1),
      ]
    k -= n - from
  }
  if (k < n - 1) return [...string.slice(k + 1), ...string.slice(0, k + 1)]
  k -= n - 1
  for (let length = 1; length <= Math.min(3, n - 1); length++) {
    const places = n - length + 1
    if (k < 2 * places ** 2) return carried(string, length, k >> 1, k % 2 === 1)
    k -= 2 * places ** 2
  }
  return string
}

function carried(string: readonly number[], length: number, k: number, turn: boolean): readonly number[] {
  const places = string.length - length + 1
  const [from, to] = [Math.floor(k / places), k % places]
  const stretch = string.slice(from, from + length)
  const rest = [...string.slice(0, from), ...string.slice(from + length)]
  return [...rest.slice(0, to), ...(turn ? turned(stretch) : stretch), ...rest.slice(to)]
}

export interface DescentOptions {
  readonly seed: number
  /** wirings to judge before the last descent is ended */
  readonly most: number
}

/** Yields every few hundred wirings. */
export function* descents(
  judge: Judge,
  pool: Pool,
  start: Strings,
  { seed, most }: DescentOptions,
): Generator<DescentProgress, DescentProgress> {
  const random = seeded(seed)
  let judged = 0
  let round = 0

  const holds = (strings: Strings, bar: Score | undefined, look: Look): boolean => {
    judge.restart(look)
    for (const string of strings)
      for (const code of string)
        if (!judge.place(code) || (bar && compareScores(judge.bound(), bar) >= 0)) return false
    return true
  }
  /** the score, unless a beginning is worse than the bar already */
  const scored = (strings: Strings, bar: Score | undefined): Score | undefined => {
    judged++
    // most are given up before a lead is looked at, which is what takes time while leads are new
    const looks = bar ? (['tubes', 'leads', 'all'] as const) : (['all'] as const)
    if (!looks.every((look) => holds(strings, bar, look))) return undefined
    const score = judge.score()
    const own = { ...score, severities: Float64Array.from(score.severities) }
    pool.offer(strings.flat(), own)
    return own
  }
  const moves = start.flatMap((string, c) =>
    Array.from({ length: moveCount(string.length) }, (_, move) => ({ c, move })),
  )
  const next = (strings: Strings, { c, move }: { c: number; move: number }): Strings =>
    strings.map((own, d) => (d === c ? moved(own, move) : own))

  let here = start
  let score = scored(here, undefined)
  // around the file's wiring all that is better than it is scored: what changes little is to be known
  for (const move of shuffled(moves, random).slice(0, mostNear)) {
    scored(next(start, move), score)
    if (judged % progressEvery === 0) yield { judged, round, best: score }
  }
  let best = { strings: here, score }
  for (; judged < most; round++) {
    if (round > 0) {
      here = shaken(best.strings, random)
      score = scored(here, undefined)
    }
    // round and round the moves until none of them is better
    const order = shuffled(moves, random)
    for (let k = 0, idle = 0; idle < order.length && judged < most; k = (k + 1) % order.length, idle++) {
      const near = next(here, order[k]!)
      const found = scored(near, score)
      if (judged % progressEvery === 0) yield { judged, round, best: best.score }
      if (!found) continue
      here = near
      score = found
      idle = -1
    }
    if (score && (!best.score || compareScores(score, best.score) <= 0)) best = { strings: here, score }
  }
  return { judged, round, best: best.score }
}

/** wirings about the file's own that are scored before the search goes on: all of them up to twelve tubes */
const mostNear = 900
/** wirings between two yields */
const progressEvery = 256

/** A few moves at random in each circuit. */
function shaken(strings: Strings, random: () => number): Strings {
  return strings.map((string) => {
    let shaking = string
    for (let k = 2 + Math.floor(3 * random()); k > 0; k--)
      shaking = moved(shaking, Math.floor(random() * moveCount(shaking.length)))
    return shaking
  })
}

function shuffled<T>(list: readonly T[], random: () => number): T[] {
  const mixed = [...list]
  for (let i = mixed.length - 1; i > 0; i--) {
    const j = Math.floor(random() * (i + 1))
    const [a, b] = [mixed[i]!, mixed[j]!]
    mixed[i] = b
    mixed[j] = a
  }
  return mixed
}
