/** The best wirings met so far, each once: overall, and for each number of changed jumpers. */
import { compareScores, type Score } from './score.js'

export interface Candidate {
  /** coded strings, circuit after circuit */
  readonly codes: readonly number[]
  readonly score: Score
}

/** how many the full solution may look at */
export const poolSize = 12
/** so many of the best are what a proof is about: the first one, and what the full solution may put before it */
export const proven = 4
/** with few changes, so that there is also something less thorough to propose */
const perChange = 3
const fewChanges = 8

export interface Pool {
  readonly offer: (codes: ArrayLike<number>, score: Score) => void
  /** what is worse than this need not be looked at by a proof */
  readonly bar: () => Score | undefined
  /** the best ones, then those with few changes that are not among them */
  readonly candidates: () => Candidate[]
}

export function candidatePool(): Pool {
  const best: Candidate[] = []
  const few = new Map<number, Candidate[]>()
  return {
    offer: (codes, score) => {
      put(best, poolSize, codes, score)
      if (score.changed > fewChanges) return
      const list = few.get(score.changed) ?? []
      few.set(score.changed, list)
      put(list, perChange, codes, score)
    },
    bar: () => best[proven - 1]?.score,
    candidates: () => {
      const seen = new Set(best.map(nameOf))
      const others = [...few.entries()].sort(([a], [b]) => a - b).flatMap(([, list]) => list)
      return [...best, ...others.filter((one) => !seen.has(nameOf(one)))]
    },
  }
}

const nameOf = ({ codes }: Candidate): string => codes.join(' ')

function put(list: Candidate[], most: number, codes: ArrayLike<number>, score: Score): void {
  const last = list.at(-1)
  if (list.length === most && last && compareScores(score, last.score) >= 0) return
  let at = list.length
  while (at > 0 && compareScores(score, list[at - 1]!.score) < 0) at--
  const own = Array.from(codes)
  const name = own.join(' ')
  if (list.some((one) => nameOf(one) === name)) return
  list.splice(at, 0, { codes: own, score: { ...score, severities: Float64Array.from(score.severities) } })
  if (list.length > most) list.pop()
}
