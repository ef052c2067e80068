/**
 * What a solution needs, put together once per wiring: every string as a row of places from terminal 1 to
 * terminal 2, with the law of the resistance between neighbours.
 *
 * Places of all circuits lie one behind the other. The first place of a circuit is its lead 0 (also terminal 1), then
 * the column nodes of the first tube in the direction of the string, lead 1, and so on to its last lead (terminal 2).
 */
import type { NodeCapacitance } from '../field/field.js'
import type { TubeBody } from '../geometry/conductors.js'
import type { FixedNodes } from '../geometry/nodes.js'
import { enteringEnd, leavingEnd } from '../layout/ends.js'
import type { CircuitWiring, Layout, Supply, Wiring } from '../layout/layout.js'
import { supplyOf } from '../layout/parts.js'
import { columnLaw } from './columns.js'

export interface StringTube {
  /** index among the layout's tubes */
  readonly tube: number
  readonly reversed: boolean
  /** place of the first and of the last column node met from terminal 1 */
  readonly from: number
  readonly to: number
}

export interface CircuitString {
  readonly supply: Supply
  /** first and last place: the leads at terminals 1 and 2 */
  readonly from: number
  readonly to: number
  readonly tubes: readonly StringTube[]
  /** place of the joint that goes back to the supply's midpoint */
  readonly midpointReturn?: number
}

export interface FloatingNode {
  /** of the metal, or `face` */
  readonly id: string
  readonly node: number
}

export interface Network {
  readonly nodes: FixedNodes
  readonly capacitance: NodeCapacitance
  readonly circuits: readonly CircuitString[]
  /** node of each place */
  readonly node: Int32Array
  /** The resistance from place k to k + 1 is factor · coefficient[k] · |I|^(−exponent[k]), Ω; 0 where a string ends. */
  readonly coefficient: Float64Array
  readonly exponent: Float64Array
  /** rated current I0 of the tube that the stretch from place k to k + 1 belongs to, A */
  readonly rated: Float64Array
  /** metal without connection to ground */
  readonly floating: readonly FloatingNode[]
  /** nodes of grounded metal */
  readonly grounded: readonly number[]
  /** of each node: capacitance to everything (row sum), and to ground with all grounded metal, F */
  readonly rowSum: Float64Array
  readonly toGround: Float64Array
}

/**
 * Refuses nothing: layout, wiring and capacitances were made from each other. `metal`: bars, then sheets, in the order
 * of their nodes.
 */
export function network(
  layout: Layout,
  wiring: Wiring,
  tubes: readonly TubeBody[],
  metal: readonly { readonly name: string; readonly grounded: boolean }[],
  nodes: FixedNodes,
  capacitance: NodeCapacitance,
): Network {
  const strings = stringLadders(layout, wiring, tubes, nodes)
  const grounded = metal.flatMap((part, k) => (part.grounded ? [nodes.firstBar + k] : []))
  const floating = metal.flatMap((part, k) =>
    part.grounded ? [] : [{ id: part.name, node: nodes.firstBar + k }],
  )
  if (nodes.face !== undefined) floating.push({ id: 'face', node: nodes.face })
  return {
    ...strings,
    nodes,
    capacitance,
    floating,
    grounded,
    rowSum: rowSums(capacitance, []),
    toGround: rowSums(capacitance, grounded),
  }
}

/** Row sums of the Maxwell matrix without some columns. */
export function rowSums({ count, matrix }: NodeCapacitance, without: readonly number[]): Float64Array {
  const sums = new Float64Array(count)
  for (let i = 0; i < count; i++) {
    let sum = 0
    for (let j = 0; j < count; j++) sum += matrix[i * count + j]!
    for (const j of without) sum -= matrix[i * count + j]!
    sums[i] = sum
  }
  return sums
}

export type StringLadders = Pick<Network, 'circuits' | 'node' | 'coefficient' | 'exponent' | 'rated'>

/** The strings alone: all that conditions without capacitance need. */
export function stringLadders(
  layout: Layout,
  wiring: Wiring,
  tubes: readonly TubeBody[],
  nodes: FixedNodes,
): StringLadders {
  const tubeIndex = new Map(layout.tubes.map(({ id }, k) => [id, k]))
  const node: number[] = []
  const coefficient: number[] = []
  const exponent: number[] = []
  const rated: number[] = []
  let lead = nodes.count

  const stretch = (k: number, p: number, i0: number) => {
    coefficient.push(k)
    exponent.push(p)
    rated.push(i0)
  }
  const alongTube = (tube: number, reversed: boolean): StringTube => {
    const body = tubes[tube]!
    const { first, at } = nodes.tubes[tube]!
    const law = columnLaw(2 * body.outerRadius, body.fill)
    const pieces = at.length - 1
    const from = node.length
    stretch(law.electrodeDrop / 2, 1, law.ratedCurrent)
    for (let k = 0; k <= pieces; k++) {
      node.push(first + (reversed ? pieces - k : k))
      if (k === pieces) break
      const piece = reversed ? pieces - 1 - k : k
      const length = at[piece + 1]! - at[piece]!
      const { ratedCurrent: i0, exponent: n } = law
      stretch(law.gradient(i0) * i0 ** n * length, 1 + n, i0)
    }
    stretch(law.electrodeDrop / 2, 1, law.ratedCurrent)
    return { tube, reversed, from, to: node.length - 1 }
  }

  const circuits = wiring.circuits.map((wired): CircuitString => {
    const from = node.length
    node.push(lead++)
    const along = wired.string.map((entry) => {
      const passed = alongTube(tubeIndex.get(entry.tube)!, entry.reversed)
      node.push(lead++)
      return passed
    })
    stretch(0, 0, 0)
    const supply = supplyOf(layout, wired.supply)
    const back = returnPlace(wired, along)
    return {
      supply,
      from,
      to: node.length - 1,
      tubes: along,
      ...(back === undefined ? {} : { midpointReturn: back }),
    }
  })
  return {
    circuits,
    node: Int32Array.from(node),
    coefficient: Float64Array.from(coefficient),
    exponent: Float64Array.from(exponent),
    rated: Float64Array.from(rated),
  }
}

/** Place of the lead at the tube end that goes back to the midpoint. */
function returnPlace(wired: CircuitWiring, along: readonly StringTube[]): number | undefined {
  for (const [k, entry] of wired.string.entries()) {
    if (wired.midpointReturn === enteringEnd(entry)) return along[k]!.from - 1
    if (wired.midpointReturn === leavingEnd(entry)) return along[k]!.to + 1
  }
  return undefined
}
