/** Which condition is on the screen, and in condition broken which tube is open on the map. */
import { inspection } from '../inspection.js'
import { type Break, breaksOf } from '../network/broken.js'
import type { Condition } from '../rules/findings.js'
import { type Next, type State, say, selectedPair } from './state.js'

const following: Record<Condition, Condition> = { lit: 'nameplate', nameplate: 'broken', broken: 'lit' }

export function otherCondition(state: State): Next {
  const condition = following[state.condition]
  const found = inspection(state.prepared, state.inspection.wiring, state.solved, condition)
  const next: State = { ...state, condition, inspection: found }
  switch (condition) {
    case 'lit':
      return say(next, 'Condition lit: the solved potentials of the burning sign.')
    case 'nameplate':
      return say(next, 'Condition nameplate: no-load kV shared out along the string, no stray current.')
    case 'broken': {
      // the break that the pair in view is about, where there is one
      const open = selectedPair(next)?.pair.difference.openTubes[0] ?? openTube(next)
      const shown: State = open === undefined ? next : { ...next, open }
      return say(
        shown,
        `Condition broken: the worst with each tube open in turn. On the map: ${open ?? 'none'} open (d next, D before).`,
      )
    }
  }
}

/** The tube that is open on the map. */
export function openTube({
  open,
  inspection: { wiring },
}: Pick<State, 'open' | 'inspection'>): string | undefined {
  const breaks = breaksOf(wiring)
  return breaks.some(({ tube }) => tube === open) ? open : breaks[0]?.tube
}

export function breakStepped(state: State, by: 1 | -1): Next {
  if (state.condition !== 'broken')
    return say(state, 'Breaks are stepped through in condition broken (c goes there).')
  const breaks: readonly Break[] = breaksOf(state.inspection.wiring)
  const now = breaks.findIndex(({ tube }) => tube === openTube(state))
  const at = (now + by + breaks.length) % breaks.length
  const found = breaks[at]
  if (!found) return say(state, 'No tube to open.')
  const { supply } = state.inspection.wiring.circuits[found.circuit]!
  return say(
    { ...state, open: found.tube },
    `${found.tube} of ${supply} open: break ${at + 1} of ${breaks.length}.`,
  )
}
