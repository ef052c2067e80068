/**
 * What was safely measured on a running circuit, as a factor on the column law of its tubes: watts at the plug times
 * the efficiency of the supply are the watts of the string; milliamps count where there are no watts and the supply
 * does not hold its current by itself.
 */
import type { EndName, Layout, Measured, Wiring } from '../layout/layout.js'
import { magnitude } from '../math/complex.js'
import type { Calibrations } from './lit.js'
import { solveLit } from './lit.js'
import type { CircuitString, Network } from './network.js'
import type { CircuitSolution } from './solution.js'

/** W delivered for each W of mains input (ours) */
export const supplyEfficiency = 0.85
/** factors outside are not believed */
const believable = [0.4, 2.5] as const

/** One for each circuit; undefined where nothing was measured or no believable factor explains it. */
export function calibrations(layout: Layout, wiring: Wiring, network: Network): Calibrations {
  const found: (number | undefined)[] = network.circuits.map(() => undefined)
  for (const [c, { measured }] of wiring.circuits.entries()) {
    if (measured !== undefined && says(network.circuits[c]!, measured))
      found[c] = measuredFactor(layout, network, c, measured, found)
  }
  return found
}

/** An electronic supply's milliamps are the supply's doing and say little of the glass. */
const says = ({ supply }: CircuitString, { primaryPower, currents }: Measured): boolean =>
  primaryPower !== undefined || (currents.size > 0 && supply.type === 'core-and-coil')

/** Secant steps on the logarithms of factor and measured quantity. */
function measuredFactor(
  layout: Layout,
  network: Network,
  c: number,
  measured: Measured,
  others: Calibrations,
): number | undefined {
  const misfit = (x: number): number | undefined => {
    const factors = others.map((other, k) => (k === c ? Math.exp(x) : other))
    const solved = solveLit(network, { factor: 1, calibrations: factors }).circuits[c]!
    return solved.lit ? misfitOf(layout, network.circuits[c]!, solved, measured) : undefined
  }
  let [x, last] = [Math.log(1.02), 0]
  let before = misfit(last)
  for (let n = 0; n < 12; n++) {
    const now = misfit(x)
    if (now === undefined || before === undefined) return undefined
    if (Math.abs(now) < 1e-6) return Math.exp(x)
    const next = x - (now * (x - last)) / (now - before)
    last = x
    before = now
    x = next
    if (!(x > Math.log(believable[0]) && x < Math.log(believable[1]))) return undefined
  }
  return undefined
}

/** Logarithm of computed over measured: watts, or else the mean over the measured currents. */
function misfitOf(
  layout: Layout,
  { supply }: CircuitString,
  solved: CircuitSolution,
  measured: Measured,
): number {
  if (measured.primaryPower !== undefined) {
    return Math.log(solved.power / (supplyEfficiency * measured.primaryPower))
  }
  let sum = 0
  for (const [end, amperes] of measured.currents) {
    sum += Math.log(currentAt(layout, supply.id, solved, end) / amperes) / measured.currents.size
  }
  return sum
}

/** Computed current at a tube end or a terminal, A. */
function currentAt(layout: Layout, supply: string, solved: CircuitSolution, end: EndName): number {
  for (const [tube, { atA, atB }] of solved.columns) {
    const { id } = layout.tubes[tube]!
    if (end === `${id}.a`) return magnitude(atA)
    if (end === `${id}.b`) return magnitude(atB)
  }
  return magnitude(solved.terminalCurrent[end === `${supply}.2` ? 1 : 0])
}
