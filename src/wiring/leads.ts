/** The leads a wiring needs, in the order in which networks and fields number them. */
import { enteringEnd, leavingEnd } from '../layout/ends.js'
import type { EndName, Wiring } from '../layout/layout.js'

export interface CircuitLead {
  /** index among the wiring's circuits */
  readonly circuit: number
  /** place along the string: lead i lies in front of string[i], the last one behind the last tube */
  readonly place: number
  readonly role: 'feed' | 'jumper'
  /** the two ends it joins, in the direction from terminal 1 to terminal 2 */
  readonly between: readonly [EndName, EndName]
}

/** Circuit after circuit, from terminal 1 to terminal 2: n + 1 leads for a string of n tubes. */
export function circuitLeads(wiring: Wiring): readonly CircuitLead[] {
  return wiring.circuits.flatMap(({ supply, string }, circuit) =>
    Array.from({ length: string.length + 1 }, (_, place): CircuitLead => {
      const before = string[place - 1]
      const behind = string[place]
      return {
        circuit,
        place,
        role: before === undefined || behind === undefined ? 'feed' : 'jumper',
        between: [
          before === undefined ? `${supply}.1` : leavingEnd(before),
          behind === undefined ? `${supply}.2` : enteringEnd(behind),
        ],
      }
    }),
  )
}
