/** Where a column is dimmest. A rms. */
import type { Complex } from '../math/complex.js'
import type { CircuitSolution, ColumnCurrents } from './solution.js'

/** The least current of a column: its magnitude, its phasor from end a to end b, and in which stretch it flows. */
export interface Least {
  readonly current: number
  readonly phasor: Complex
  readonly stretch: number
}

export function leastOf({ re, im }: ColumnCurrents): Least {
  let current = Infinity
  let stretch = 0
  for (let k = 0; k < re.length; k++) {
    const here = Math.hypot(re[k]!, im[k]!)
    if (here >= current) continue
    current = here
    stretch = k
  }
  return { current, phasor: { re: re[stretch]!, im: im[stretch]! }, stretch }
}

/** The least over the tubes of a string. */
export const leastOfString = ({ columns }: Pick<CircuitSolution, 'columns'>): Least =>
  [...columns.values()].map(leastOf).reduce((least, one) => (one.current < least.current ? one : least))
