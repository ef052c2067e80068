/** Which potentials are on the screen: the fields of the condition, at the instant chosen. */
import { instantPotential, type NodeMix } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import type { State } from './state.js'

type Shown = Pick<State, 'condition' | 'inspection' | 'instant'>

/** Lit fields where they are solved, else the nameplate condition. */
export const fieldsShown = ({ condition, inspection }: Shown): readonly PotentialField[] =>
  condition === 'lit' && inspection.lit ? inspection.lit : inspection.nameplate

/** Radians: the instant counts from the peak of terminal 1 of the first supply. */
export function phaseShown(state: Shown): number {
  const field = fieldsShown(state)[0]
  const terminal = state.inspection.probe.nodes.count
  const zero = field && field.frequency > 0 ? Math.atan2(field.im[terminal] ?? 0, field.re[terminal] ?? 0) : 0
  return (state.instant * Math.PI) / 6 - zero
}

/** the highest potential of the sign at any instant, V peak: what the scale must hold */
export function peakPotential(state: Shown): number {
  const fields = fieldsShown(state)
  let peak = 0
  for (let i = 0; i < (fields[0]?.re.length ?? 0); i++) {
    let sum = 0
    for (const { re, im } of fields) sum += Math.hypot(re[i]!, im[i]!)
    peak = Math.max(peak, sum)
  }
  return peak * Math.SQRT2
}

export const instantAt = (state: Shown, mix: NodeMix): number =>
  instantPotential(fieldsShown(state), mix, phaseShown(state))
