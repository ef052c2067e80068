/** What makes one wiring better than another, the weightiest first. */

/** how many of the worst places are compared one by one */
export const compared = 8
/** severities that differ by less are the same (ours: it is what lists show) */
const steps = 100
/** what strains its gap by less than this does not count (ours) */
export const unstrained = 0.1
/** from the second worst place on, whatever strains its gap by less than half counts as half (ours) */
const restful = 50

export interface Score {
  /** circuits with something to fix of their own (overloaded, leads too long); dark ones are never shown */
  readonly unfit: number
  /** pairs with the verdict fix */
  readonly fix: number
  /** severities, the worst first */
  readonly severities: ArrayLike<number>
  /** jumpers that are taken off or put on */
  readonly changed: number
  /** m, all leads together */
  readonly lead: number
}

/** Fewest pairs to fix, then the least worst severity and the next ones, then changed jumpers, then metres of lead. */
export function compareScores(a: Score, b: Score): number {
  return a.unfit - b.unfit || a.fix - b.fix || compareSeverities(a.severities, b.severities) || byWork(a, b)
}

const byWork = (a: Score, b: Score): number =>
  a.changed - b.changed || Math.round(1000 * a.lead) - Math.round(1000 * b.lead)

export function compareSeverities(a: ArrayLike<number>, b: ArrayLike<number>): number {
  for (let k = 0; k < compared; k++) {
    const difference = levelOf(a, k) - levelOf(b, k)
    if (difference !== 0) return difference
  }
  return 0
}

const levelOf = (severities: ArrayLike<number>, k: number): number => {
  const level = Math.round(steps * (severities[k] ?? 0))
  return Math.max(k === 0 ? steps * unstrained : restful, level)
}

/** No worse in anything that a technician would choose by: then the other one is no proposal beside it. */
export const dominates = (a: Score, b: Score): boolean =>
  a.unfit <= b.unfit &&
  a.fix <= b.fix &&
  levelOf(a.severities, 0) <= levelOf(b.severities, 0) &&
  a.changed <= b.changed &&
  Math.round(1000 * a.lead) <= Math.round(1000 * b.lead)
