/** Why an edit cannot be made, in a sentence. */
import type { Refusal } from '../wiring/edit.js'

const figureNames: Readonly<Record<string, string>> = {
  noLoadVoltage: 'No-load voltage',
  shortCircuitCurrent: 'Short-circuit current',
  frequency: 'Frequency',
  height: 'Height',
}

export function refusalText(why: Refusal): string {
  switch (why.code) {
    case 'no-such-part':
      return `There is no ${why.part} in the wiring.`
    case 'nothing-to-change':
      return `Nothing to change: ${why.what}.`
    case 'same-tube':
      return `Both ends belong to ${why.tube}: a jumper there would short the tube.`
    case 'both-terminals':
      return `Both ends are terminals of ${why.supply}: a jumper there would short the supply.`
    case 'other-circuit':
      return `${why.ends[0]} and ${why.ends[1]} belong to different circuits.`
    case 'out-of-range':
      return `${figureNames[why.what] ?? why.what} must be ${why.allowed}.`
    case 'empty-circuit':
      return `${why.tube} is the only tube of ${why.supply}: a circuit cannot be empty.`
    case 'no-joint':
      return `${why.end} is joined to the supply: a midpoint return needs a joint between two tubes.`
    case 'no-midpoint':
      return `${why.supply} has no grounded midpoint to go back to.`
    case 'midpoint-used':
      return `${why.end} goes back to the midpoint of ${why.supply} in the variant "${why.variant}": take that away there first.`
    case 'only-tube':
      return `${why.supply} has one tube only: its feed has nowhere else to go. Swap the terminals (x) instead.`
  }
}
