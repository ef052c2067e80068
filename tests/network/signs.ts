/** Signs made by hand for the network: tubes on a line, capacitances as a list of capacitors. */
import type { NodeCapacitance } from '../../src/field/field.js'
import type { BarBody, Polyline, TubeBody } from '../../src/geometry/conductors.js'
import type { FixedNodes } from '../../src/geometry/nodes.js'
import { fixedNodes } from '../../src/geometry/nodes.js'
import type { CircuitWiring, Fill, Layout, Supply, Tube, Wiring } from '../../src/layout/layout.js'
import { network } from '../../src/network/network.js'
import { circuitLeads } from '../../src/wiring/leads.js'

/** Numbers in [0, 1) from a seed (mulberry32). */
export function numbers(seed: number): () => number {
  let state = seed
  return () => {
    state = (state + 0x6d2b79f5) | 0
    let t = Math.imul(state ^ (state >>> 15), 1 | state)
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

export interface SignParts {
  readonly layout: Layout
  readonly wiring: Wiring
  readonly tubes: readonly TubeBody[]
  readonly bars: readonly BarBody[]
  readonly nodes: FixedNodes
}

const straight = (length: number): Polyline => ({
  points: Float64Array.of(0, 0, 0, length, 0, 0),
  at: Float64Array.of(0, length),
  length,
})

const round = { coreRadius: 0.005, outerRadius: 0.006, permittivity: 7.1, equivalentRadius: 0.0058 }

export interface TubeSketch {
  readonly id: string
  readonly length: number
  readonly diameter?: number
  readonly fill?: Fill
}

export const supplyOf = (id: string, figures: Partial<Supply> = {}): Supply => ({
  id,
  type: 'electronic',
  noLoadVoltage: 8000,
  shortCircuitCurrent: 0.03,
  frequency: 24000,
  grounding: 'midpoint',
  openCircuitProtection: false,
  chart: [],
  terminals: [
    { x: 0, y: 0 },
    { x: 0.1, y: 0 },
  ],
  ...figures,
})

/** `K -I` for K then I entered at b. */
export const stringOf = (text: string) =>
  text.split(' ').map((name) => ({ tube: name.replace('-', ''), reversed: name.startsWith('-') }))

export const wired = (supply: string, string: string, more: Partial<CircuitWiring> = {}): CircuitWiring => ({
  supply,
  string: stringOf(string),
  ...more,
})

export function sketch(
  tubes: readonly TubeSketch[],
  supplies: readonly Supply[],
  circuits: readonly CircuitWiring[],
  options: { readonly bars?: readonly boolean[]; readonly face?: boolean; readonly spacing?: number } = {},
): SignParts {
  const bodies = tubes.map(({ id, length, diameter = 0.012, fill = 'neon' }): TubeBody => {
    const outerRadius = diameter / 2
    return { ...round, outerRadius, kind: 'tube', name: id, line: straight(length), fill, boots: true }
  })
  const bars = (options.bars ?? []).map(
    (grounded, k): BarBody => ({ ...round, kind: 'bar', name: `bar${k}`, line: straight(1), grounded }),
  )
  const wiring: Wiring = { circuits }
  const layout: Layout = {
    title: 'sketch',
    units: 'mm',
    altitude: 0,
    face: { metal: options.face ? 'floating' : 'grounded' },
    tubes: tubes.map(({ id, length, diameter = 0.012, fill = 'neon' }): Tube => {
      const path = [
        { x: 0, y: 0 },
        { x: length, y: 0 },
      ]
      return { id, path, height: 0.04, diameter, wall: 0.001, permittivity: 7.1, fill, boots: true }
    }),
    lead: { conductor: 0.0012, diameter: 0.007, permittivity: 3, height: 0.02 },
    supplies,
    metal: [],
    wiring,
    routes: [],
    variants: [],
    rules: [],
    assumed: [],
  }
  const nodes = fixedNodes([...bodies, ...bars], options.face ?? false, options.spacing)
  return { layout, wiring, tubes: bodies, bars, nodes }
}

/** Maxwell matrix of capacitors between nodes, or to ground (`undefined`). */
export function capacitors(count: number) {
  const matrix = new Float64Array(count * count)
  const at = (i: number, j: number, c: number) => {
    matrix[i * count + j] = matrix[i * count + j]! + c
  }
  const connect = (i: number, j: number | undefined, c: number) => {
    at(i, i, c)
    if (j === undefined) return
    at(j, j, c)
    at(i, j, -c)
    at(j, i, -c)
  }
  const capacitance: NodeCapacitance = { count, matrix }
  return { capacitance, connect }
}

export interface StrayOptions {
  /** F/m of the columns to ground, F of each lead to ground */
  readonly perLength?: number
  readonly lead?: number
  /** F, mean of couplings between nodes, and how many there are for each node */
  readonly coupling?: number
  readonly couplings?: number
  readonly seed?: number
}

/** Columns as pi sections to ground, leads, and random couplings between any two nodes. */
export function strayOf({ wiring, nodes }: SignParts, options: StrayOptions = {}): NodeCapacitance {
  const { perLength = 20e-12, lead = 6e-12, coupling = 0.02e-12, couplings = 5, seed = 1 } = options
  const count = nodes.count + circuitLeads(wiring).length
  const { capacitance, connect } = capacitors(count)
  for (const { first, at } of nodes.tubes) {
    for (let k = 0; k + 1 < at.length; k++) {
      const half = (perLength * (at[k + 1]! - at[k]!)) / 2
      connect(first + k, undefined, half)
      connect(first + k + 1, undefined, half)
    }
  }
  for (let i = nodes.count; i < count && lead > 0; i++) connect(i, undefined, lead)
  // metal must hang on something
  for (let i = nodes.firstBar; i < nodes.count; i++) connect(i, undefined, 3e-12)
  const random = numbers(seed)
  for (let n = 0; n < couplings * count; n++) {
    const i = Math.floor(random() * count)
    const j = Math.floor(random() * count)
    const c = 2 * coupling * random()
    if (i !== j && c > 0) connect(i, j, c)
  }
  return capacitance
}

export const networkOf = (parts: SignParts, capacitance: NodeCapacitance = strayOf(parts)) =>
  network(parts.layout, parts.wiring, parts.tubes, parts.bars, parts.nodes, capacitance)
