/** How long computations take. Times in ms. */

/** Times of one computation, sorted, and the sum of what it returned: shown, so that nothing is optimised away. */
export interface Timing {
  readonly sorted: readonly number[]
  readonly checksum: number
}

/** Runs a computation `warm` times unseen, then `runs` times by the clock. It gets the number of the run. */
export function timed(warm: number, runs: number, compute: (run: number) => number): Timing {
  let checksum = 0
  for (let run = 0; run < warm; run++) compute(run)
  const times: number[] = []
  for (let run = 0; run < runs; run++) {
    const start = performance.now()
    checksum += compute(run)
    times.push(performance.now() - start)
  }
  return timing(times, checksum)
}

export const timing = (times: readonly number[], checksum = 0): Timing => ({
  sorted: [...times].sort((a, b) => a - b),
  checksum,
})

/** The value below which this share of the times lies. */
export const quantile = ({ sorted }: Timing, share: number): number =>
  sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? Number.NaN

export const median = (of: Timing): number => quantile(of, 0.5)
export const least = ({ sorted }: Timing): number => sorted[0] ?? Number.NaN
export const most = ({ sorted }: Timing): number => sorted.at(-1) ?? Number.NaN

/** Numbers from 0 to below 1, the same in every run (linear congruence of Numerical Recipes). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 32
  }
}
