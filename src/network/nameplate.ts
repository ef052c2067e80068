/**
 * The nameplate condition: the no-load voltage shared over the string in proportion to each tube's drop at the
 * short-circuit current, linear along the column, half of the electrode drop at each end, no drop in leads, no stray
 * current. What is done on paper; signed, terminal 1 positive.
 */
import type { TubeBody } from '../geometry/conductors.js'
import type { FixedNodes } from '../geometry/nodes.js'
import type { Layout, Wiring } from '../layout/layout.js'
import type { CircuitString, StringLadders } from './network.js'
import { stringLadders } from './network.js'
import type { PotentialField } from './solution.js'
import { noLoadVoltage } from './supplies.js'

/**
 * One field for each circuit, in the order of the wiring; V rms, snapshot at the terminals' peak over √2. All nodes
 * that are not of the circuit, with floating metal among them, stand at 0 V: cautious for gaps to metal.
 */
export function nameplateField(
  layout: Layout,
  wiring: Wiring,
  tubes: readonly TubeBody[],
  nodes: FixedNodes,
  leadCount: number,
): readonly PotentialField[] {
  const ladders = stringLadders(layout, wiring, tubes, nodes)
  return ladders.circuits.map((circuit) => {
    const re = new Float64Array(nodes.count + leadCount)
    for (const part of parts(circuit)) share(ladders, circuit, part, re)
    return { supply: circuit.supply.id, frequency: 0, re, im: new Float64Array(re.length) }
  })
}

interface Part {
  readonly from: number
  readonly to: number
  readonly high: number
  readonly low: number
}

/** The string between places of known potential: the terminals, and the joint at the midpoint where there is one. */
function parts({ supply, from, to, midpointReturn }: CircuitString): readonly Part[] {
  const volts = noLoadVoltage(supply)
  if (supply.grounding === 'one-end') return [{ from, to, high: volts, low: 0 }]
  const half = volts / 2
  if (midpointReturn === undefined || supply.grounding === 'none')
    return [{ from, to, high: half, low: -half }]
  return [
    { from, to: midpointReturn, high: half, low: 0 },
    { from: midpointReturn, to, high: 0, low: -half },
  ]
}

function share(
  { node, coefficient, exponent }: StringLadders,
  { supply }: CircuitString,
  { from, to, high, low }: Part,
  out: Float64Array,
): void {
  const drop = (k: number) => coefficient[k]! * supply.shortCircuitCurrent ** (1 - exponent[k]!)
  let total = 0
  for (let k = from; k < to; k++) total += drop(k)
  let passed = 0
  for (let k = from; k <= to; k++) {
    out[node[k]!] = high - ((high - low) * passed) / total
    if (k < to) passed += drop(k)
  }
  out[node[to]!] = low
}
