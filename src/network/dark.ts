/** Which tubes go dark where a circuit cannot keep all of them lit. */
import type { Network } from './network.js'
import type { Burning, OperatingPoint } from './operating-point.js'
import { operatingPoint, roughEffort } from './operating-point.js'

/** least current a lit column carries anywhere, share of its rated current (ours) */
export const leastLit = 0.1

/** Each tube of a circuit with the least current in its column over the rated one, the weakest first. */
export function leastShares(
  { circuits, rated }: Network,
  current: Float64Array,
  circuit: number,
): readonly { readonly tube: number; readonly share: number }[] {
  return circuits[circuit]!.tubes.map(({ tube, from, to }) => {
    let share = Number.POSITIVE_INFINITY
    for (let k = from; k < to; k++) share = Math.min(share, current[k]! / rated[k]!)
    return { tube, share }
  }).sort((a, b) => a.share - b.share)
}

/** Tubes that would not burn properly even on the supply's short-circuit current. */
export function tooWeak(network: Network, circuit: number): readonly number[] {
  const { supply } = network.circuits[circuit]!
  const everywhere = new Float64Array(network.node.length).fill(supply.shortCircuitCurrent)
  return leastShares(network, everywhere, circuit).flatMap(({ tube, share }) =>
    share < leastLit ? [tube] : [],
  )
}

/**
 * Read off the last state in which everything is lit, on a ramp of the gradient up to the circuit's own: tubes whose
 * current is about to fall, the weakest first. Only that state's numbers are used, none of a failed search. `bright`:
 * a factor known to be lit, where there is one.
 */
export function firstDark(
  network: Network,
  burning: Burning,
  circuit: number,
  bright = burning.factors[circuit]! / 2,
): readonly number[] {
  const at = (factor: number, from?: OperatingPoint): OperatingPoint | undefined => {
    const factors = burning.factors.map((own, c) => (c === circuit ? factor : own))
    const point = operatingPoint(network, { ...burning, factors }, from, roughEffort)
    if ('failed' in point) return undefined
    return leastShares(network, point.current, circuit).every(({ share }) => share >= leastLit)
      ? point
      : undefined
  }
  // a factor at which everything is lit, and one at which it is not
  let low = bright
  let high = burning.factors[circuit]!
  let last = at(low)
  for (let n = 0; last === undefined && n < 5; n++) {
    high = low
    low /= 3
    last = at(low)
  }
  if (last === undefined) return network.circuits[circuit]!.tubes.map(({ tube }) => tube)

  // towards the limit, halving the distance until it is within 5 %
  while (high > 1.05 * low) {
    const factor = Math.sqrt(low * high)
    const point = at(factor, last)
    if (point === undefined) high = factor
    else {
      last = point
      low = factor
    }
  }
  return falling(network, circuit, last, at(low * 0.97, last))
}

/** Tubes whose current falls at least half as fast as the fastest between two points of the ramp. */
function falling(
  network: Network,
  circuit: number,
  last: OperatingPoint,
  before: OperatingPoint | undefined,
): readonly number[] {
  const now = leastShares(network, last.current, circuit)
  if (before === undefined) return now.map(({ tube }) => tube)
  const earlier = new Map(
    leastShares(network, before.current, circuit).map(({ tube, share }) => [tube, share]),
  )
  const fall = now.map(({ tube, share }) => ({ tube, by: Math.log(earlier.get(tube)! / share) }))
  const most = Math.max(...fall.map(({ by }) => by))
  return fall.filter(({ by }) => by >= most / 2).map(({ tube }) => tube)
}
