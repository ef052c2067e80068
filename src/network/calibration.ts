/**
 * What was safely measured on a running circuit, as a factor on the column law of its tubes: watts at the plug times
 * the efficiency of the supply are the watts of the string; milliamps count where there are no watts and the supply
 * does not hold its current by itself.
 */
import type { CircuitWiring, EndName, Layout, Measured, Wiring } from '../layout/layout.js'
import { magnitude } from '../math/complex.js'
import type { Calibrations } from './lit.js'
import { solveLit } from './lit.js'
import type { CircuitString, Network } from './network.js'
import type { CircuitSolution } from './solution.js'
import { supplyEfficiency } from './supplies.js'

/** factors outside are not believed */
const believable = [0.4, 2.5] as const

/** What was measured on a circuit, and what the law without that knowledge has in its place. W, A. */
export interface MeasuredCircuit {
  /** on gradient and electrode drop; absent where the figures say nothing of the glass or no believable factor explains them */
  readonly factor?: number
  readonly primaryPower?: MeasuredFigure
  readonly currents: readonly (MeasuredFigure & { readonly end: EndName })[]
  /** the figures that the factor comes from */
  readonly from: 'watts' | 'milliamps' | 'nothing'
}
export interface MeasuredFigure {
  readonly measured: number
  /** absent where the law does not light the string */
  readonly computed?: number
}

/** One for each circuit; undefined where nothing was measured. */
export function measuredCircuits(
  layout: Layout,
  wiring: Wiring,
  network: Network,
): readonly (MeasuredCircuit | undefined)[] {
  const factors: (number | undefined)[] = network.circuits.map(() => undefined)
  return wiring.circuits.map(({ measured }, c) => {
    if (measured === undefined) return undefined
    const circuit = network.circuits[c]!
    const solved = solveLit(network, { factor: 1, calibrations: factors }).circuits[c]!
    const from = saysOf(circuit, measured)
    if (from !== 'nothing') factors[c] = measuredFactor(layout, network, c, measured, factors)
    const factor = factors[c]
    const { primaryPower, currents } = measured
    const figure = (value: number, computed: (lit: CircuitSolution) => number): MeasuredFigure =>
      solved.lit ? { measured: value, computed: computed(solved) } : { measured: value }
    return {
      ...(factor !== undefined && { factor }),
      ...(primaryPower !== undefined && {
        primaryPower: figure(primaryPower, ({ power }) => power / supplyEfficiency),
      }),
      currents: [...currents].map(([end, amperes]) => ({
        end,
        ...figure(amperes, (lit) => currentAt(layout, circuit.supply.id, lit, end)),
      })),
      from,
    }
  })
}

/**
 * The same for a wiring under edit: its figures were measured on the wiring they stand with in the file (or in a
 * variant), so that one is solved for them, once. A circuit without figures has those of the file's circuit where both
 * hold the same tubes: the law is the glass's. `networkOf` makes the network of a wiring of the layout.
 */
export function measuredLaw(
  layout: Layout,
  networkOf: (wiring: Wiring) => Network,
): (wiring: Wiring) => readonly (MeasuredCircuit | undefined)[] {
  const known = new Map<Wiring, readonly (MeasuredCircuit | undefined)[]>()
  const bases = [layout.wiring, ...layout.variants]
  return (wiring) => {
    const told = wiring.circuits.map((circuit) => withFigures(layout.wiring, circuit))
    if (told.every(({ measured }) => measured === undefined)) return told.map(() => undefined)
    const base = bases.find((one) => sameMeasured(one, { circuits: told })) ?? { circuits: told }
    const found = known.get(base) ?? measuredCircuits(layout, base, networkOf(base))
    if (bases.includes(base)) known.set(base, found)
    return told.map(({ measured }, c) => (measured === undefined ? undefined : found[c]))
  }
}

function withFigures({ circuits }: Wiring, circuit: CircuitWiring): CircuitWiring {
  const tubes = (of: CircuitWiring) =>
    of.string
      .map(({ tube }) => tube)
      .sort()
      .join('\n')
  const filed = circuits.find(({ supply }) => supply === circuit.supply)
  const figures = filed !== undefined && tubes(filed) === tubes(circuit) ? filed.measured : undefined
  return circuit.measured !== undefined || figures === undefined ? circuit : { ...circuit, measured: figures }
}

/** Do all figures of a wiring stand with the same circuits of another one? */
const sameMeasured = (one: Wiring, other: Wiring): boolean =>
  other.circuits.every(({ measured, supply }, c) => {
    const base = one.circuits[c]
    return (
      measured === undefined ||
      (base?.supply === supply && measuredText(base.measured) === measuredText(measured))
    )
  })
const measuredText = (measured: Measured | undefined): string =>
  JSON.stringify([measured?.primaryPower, ...(measured?.currents ?? [])])

/** An electronic supply's milliamps are the supply's doing and say little of the glass. */
function saysOf({ supply }: CircuitString, { primaryPower, currents }: Measured): MeasuredCircuit['from'] {
  if (primaryPower !== undefined) return 'watts'
  return currents.size > 0 && supply.type === 'core-and-coil' ? 'milliamps' : 'nothing'
}

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
