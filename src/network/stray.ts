/** Where stray current goes, and what ungrounded metal floats to. A and V rms. */
import type { Complex } from '../math/complex.js'
import { magnitude, minus } from '../math/complex.js'
import { realTimesComplex } from '../math/complex-symmetric.js'
import type { Network } from './network.js'
import { nodeCurrent, phasorProblem, solvePhasors, sourceVolts, startFrom } from './phasors.js'
import type { CircuitSolution, LitState, PotentialField } from './solution.js'

/** Capacitive current of one part in the field of its own supply. */
export interface StrayShare {
  /** what the part loses: the phasor sum of the other two */
  readonly total: number
  /** to ground and grounded metal */
  readonly toGround: number
  /** to every other part of the sign */
  readonly toNeighbours: number
  /** to ground as a phasor: these of all parts add up to what the supply gets back through ground */
  readonly ground: Complex
}

export interface FloatingMetal {
  /** of the metal, or `face` */
  readonly id: string
  /** potential it floats to, root of the sum of squares over the supplies */
  readonly voltage: number
  /** current to ground through a person touching it; absent where no solution was found */
  readonly touch?: number
}

export interface StrayShares {
  /** in the order of the layout's tubes and of the wiring's leads; undefined in unlit circuits */
  readonly tubes: readonly (StrayShare | undefined)[]
  readonly leads: readonly (StrayShare | undefined)[]
}

/** One product with C for each lit circuit, and one solution for each lit circuit and floating metal. */
export function strayShares(
  network: Network,
  state: LitState,
): { readonly stray: StrayShares; readonly floating: readonly FloatingMetal[] } {
  const { circuits, nodes, capacitance } = network
  const tubes: (StrayShare | undefined)[] = nodes.tubes.map(() => undefined)
  const leads: (StrayShare | undefined)[] = Array.from(
    { length: capacitance.count - nodes.count },
    () => undefined,
  )
  for (const field of state.fields) {
    const circuit = circuits.find(({ supply }) => supply.id === field.supply)!
    const shareOf = shares(network, field)
    for (const { tube } of circuit.tubes) {
      const { first, at } = nodes.tubes[tube]!
      tubes[tube] = shareOf(first, first + at.length)
    }
    const firstLead = network.node[circuit.from]!
    for (let k = 0; k <= circuit.tubes.length; k++) {
      leads[firstLead + k - nodes.count] = shareOf(firstLead + k, firstLead + k + 1)
    }
  }
  return { stray: { tubes, leads }, floating: floatingMetal(network, state) }
}

/** Shares of the part that owns the nodes from one index up to another. */
function shares(
  { capacitance: { matrix, count }, toGround }: Network,
  { re, im, frequency }: PotentialField,
): (from: number, to: number) => StrayShare {
  const omega = 2 * Math.PI * frequency
  const chargeRe = new Float64Array(count)
  const chargeIm = new Float64Array(count)
  realTimesComplex(matrix, count, re, im, chargeRe, chargeIm)
  return (from, to) => {
    let all: Complex = { re: 0, im: 0 }
    let ground: Complex = { re: 0, im: 0 }
    for (let i = from; i < to; i++) {
      const c = omega * toGround[i]!
      all = { re: all.re - omega * chargeIm[i]!, im: all.im + omega * chargeRe[i]! }
      ground = { re: ground.re - c * im[i]!, im: ground.im + c * re[i]! }
    }
    return {
      total: magnitude(all),
      toGround: magnitude(ground),
      toNeighbours: magnitude(minus(all, ground)),
      ground,
    }
  }
}

function floatingMetal(network: Network, state: LitState): readonly FloatingMetal[] {
  if (network.floating.length === 0) return []
  const conductance = conductances(network, state)
  return network.floating.map(({ id, node }) => {
    const voltage = Math.hypot(...state.fields.map(({ re, im }) => Math.hypot(re[node]!, im[node]!)))
    const currents = state.fields.map((field) => touchCurrent(network, state, field, node, conductance))
    const found = currents.filter((current) => current !== undefined)
    return { id, voltage, ...(found.length === currents.length && { touch: Math.hypot(...found) }) }
  })
}

/** The same sources and resistances with this node at 0 V; undefined where that has no solution. */
function touchCurrent(
  network: Network,
  state: LitState,
  field: PotentialField,
  node: number,
  conductance: Float64Array,
): number | undefined {
  const c = network.circuits.findIndex(({ supply }) => supply.id === field.supply)
  const needed = state.circuits[c]!.neededVoltage ?? 0
  const problem = phasorProblem(network, c, node)
  startFrom(problem, field, needed)
  if (solvePhasors(problem, conductance, 1e-9) === undefined) return undefined
  return sourceVolts(problem, needed) * nodeCurrent(problem, node)
}

/** One resistor of a string. Ω, between two nodes. */
export interface StringResistance {
  readonly nodes: readonly [number, number]
  readonly ohms: number
  /** index among the layout's tubes */
  readonly tube: number
  readonly part: 'electrode' | 'column'
}

/** The resistors that the currents of a state make of the columns, in string order; none in unlit circuits. */
export function stringResistances(network: Network, state: LitState): readonly StringResistance[] {
  const conductance = conductances(network, state)
  return network.circuits.flatMap((circuit, c) => {
    if (!state.circuits[c]?.lit) return []
    return circuit.tubes.flatMap(({ tube, from, to }) =>
      Array.from({ length: to - from + 2 }, (_, n): StringResistance => {
        const k = from - 1 + n
        const part = n === 0 || k === to ? 'electrode' : 'column'
        return { nodes: [network.node[k]!, network.node[k + 1]!], ohms: 1 / conductance[k]!, tube, part }
      }),
    )
  })
}

/** Conductances of the strings: own current over own voltage drop in each stretch; S, 0 in unlit circuits. */
function conductances(network: Network, state: LitState): Float64Array {
  const conductance = new Float64Array(network.node.length)
  for (const [c, { supply, tubes }] of network.circuits.entries()) {
    const solved = state.circuits[c]
    const field = state.fields.find((one) => one.supply === supply.id)
    if (!solved?.lit || field === undefined) continue
    for (const along of tubes) {
      const current = stretchCurrents(solved, along.tube, along.reversed)
      for (const [n, amperes] of current.entries()) {
        const k = along.from - 1 + n
        const [i, j] = [network.node[k]!, network.node[k + 1]!]
        conductance[k] = amperes / Math.hypot(field.re[i]! - field.re[j]!, field.im[i]! - field.im[j]!)
      }
    }
  }
  return conductance
}

/** Magnitudes along a tube in the direction of its string, electrodes first and last. */
function stretchCurrents({ columns }: CircuitSolution, tube: number, reversed: boolean): number[] {
  const { atA, atB, re, im } = columns.get(tube)!
  const fromA = [magnitude(atA), ...Array.from(re, (x, k) => Math.hypot(x, im[k]!)), magnitude(atB)]
  return reversed ? fromA.reverse() : fromA
}
