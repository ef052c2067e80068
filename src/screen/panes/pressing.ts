/** What presses most about the sign: its cautions, and the worst of the pairs to fix among them. */
import type { Caution, PairFinding } from '../../rules/findings.js'
import { length, needOf, spotText } from '../../view/words.js'
import type { State } from '../state.js'

/** Worst first. Pairs that are within the rules, or only to watch, are for the list to show. */
export function pressing({ inspection, present }: Pick<State, 'inspection' | 'present'>): Caution[] {
  const { cautions, pairs } = inspection
  const bad = pairs.filter((pair) => pair.verdict === 'fix')
  const [worst] = bad
  if (!worst) return [...cautions]
  // what a touch can kill, and a string that does not burn, come before a gap
  const first = cautions.filter((c) => c.level === 'danger' || c.code === 'dark')
  const { units } = present.sign.layout
  return [
    ...first,
    { level: 'fix', code: 'pairs', text: pairsText(worst, bad.length, units) },
    ...cautions.filter((c) => !first.includes(c)),
  ]
}

function pairsText(worst: PairFinding, count: number, units: 'mm' | 'in'): string {
  const need = needOf(worst)
  const which = `${spotText(worst.a, units)} to ${spotText(worst.b, units)} has a gap of ${length(worst.gap, units)}`
  const asked = need === undefined ? worst.governs : `${length(need, units)} by ${worst.governs}`
  return `${which}, needs ${asked}${count > 1 ? ` (the worst of ${count} pairs)` : ''}.`
}
