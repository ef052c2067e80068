/**
 * One supply's phasor problem over the whole sign: (G + jωC) V = I with every other supply as the load it is.
 *
 * ωC is a small disturbance of the conductances along the strings, so the strings alone, with what capacitance fits
 * into a chain, precondition a conjugate-gradient iteration for complex-symmetric matrices (H. A. van der Vorst,
 * J. B. M. Melissen, IEEE Trans. Magnetics 26, 1990; from memory). Potentials and charges stay between calls, so that
 * a next solution with slightly different resistances starts where the last one ended.
 */
import type { Chains } from '../math/complex-symmetric.js'
import {
  emptyChains,
  factorChains,
  factorDense,
  realTimesComplex,
  solveChains,
  solveDense,
} from '../math/complex-symmetric.js'
import type { Network } from './network.js'
import { rowSums } from './network.js'
import type { Attachment } from './supplies.js'
import { attachment } from './supplies.js'

interface Vector {
  readonly re: Float64Array
  readonly im: Float64Array
}
const vector = (n: number): Vector => ({ re: new Float64Array(n), im: new Float64Array(n) })

interface Bridge {
  readonly nodes: readonly [number, number]
  readonly susceptance: number
}

/** A workspace: `volts` and `charge` are the solution, changed by `solvePhasors`. Indexed by node. */
export interface PhasorProblem {
  readonly network: Network
  /** index of the circuit whose supply is the source */
  readonly source: number
  readonly omega: number
  /** nodes whose potential is imposed */
  readonly held: Uint8Array
  /** [kept, dropped]: pairs of nodes with an imposed difference, one unknown */
  readonly merged: readonly (readonly [number, number])[]
  /** supplies' susceptance of each node to ground, and between pairs of nodes, S */
  readonly susceptance: Float64Array
  /**
   * Place of the joint at the midpoint, of an electronic source: either half then holds the short-circuit current by
   * itself (one ideal voltage over two falling columns side by side has no stable state). Volts are as they are, not
   * of 1 V.
   */
  readonly halves?: number
  readonly bridges: readonly Bridge[]
  /** imaginary part of the current that sources behind reactances drive into each node, A; the real part is 0 */
  readonly drive: Float64Array
  /** row sums of C over the free nodes, F */
  readonly freeRowSum: Float64Array
  readonly volts: Vector
  /** C · volts */
  readonly charge: Vector
  readonly chains: Chains
  readonly scratch: {
    readonly residual: Vector
    readonly correction: Vector
    readonly direction: Vector
    readonly image: Vector
    readonly charge: Vector
    readonly places: Vector
  }
}

/** `grounded`: one more node held at 0 V. Solved at the frequency of the source. */
export function phasorProblem(network: Network, source: number, grounded?: number): PhasorProblem {
  const { count: n } = network.capacitance
  const fed = network.circuits[source]!
  const halves =
    fed.supply.type === 'electronic' && fed.supply.grounding === 'midpoint' ? fed.midpointReturn : undefined
  const ports = { held: new Uint8Array(n), susceptance: new Float64Array(n), drive: new Float64Array(n) }
  const attached: Ports = { ...ports, merged: [], bridges: [], volts: vector(n) }
  const { held, merged, volts } = attached
  for (const node of network.grounded) held[node] = 1
  if (grounded !== undefined) held[grounded] = 1
  for (const [c, circuit] of network.circuits.entries()) {
    const ends = [network.node[circuit.from]!, network.node[circuit.to]!] as const
    attach(attached, ends, attachment(circuit.supply, c === source, fed.supply.frequency))
    // a joint at the supply's midpoint is grounded where that is
    const { midpointReturn: joint } = circuit
    if (joint !== undefined && circuit.supply.grounding === 'midpoint') held[network.node[joint]!] = 1
  }
  const problem: PhasorProblem = {
    network,
    source,
    ...attached,
    ...(halves === undefined ? {} : { halves }),
    omega: 2 * Math.PI * fed.supply.frequency,
    freeRowSum: rowSums(
      network.capacitance,
      Array.from(held.keys()).filter((i) => held[i] === 1),
    ),
    volts,
    charge: vector(n),
    chains: emptyChains(network.node.length, chainRanges(network, merged)),
    scratch: {
      residual: vector(n),
      correction: vector(n),
      direction: vector(n),
      image: vector(n),
      charge: vector(n),
      places: vector(network.node.length),
    },
  }
  chargeNodes(problem)
  return problem
}

interface Ports extends Pick<PhasorProblem, 'held' | 'susceptance' | 'drive' | 'volts'> {
  readonly merged: (readonly [number, number])[]
  readonly bridges: Bridge[]
}

/** Puts one supply, as source or as load, between its terminals' nodes. */
function attach(
  { held, susceptance, drive, merged, bridges, volts }: Ports,
  [one, two]: readonly [number, number],
  attached: Attachment,
): void {
  switch (attached.kind) {
    case 'held':
      held[one] = held[two] = 1
      volts.re[one] = attached.volts[0]
      volts.re[two] = attached.volts[1]
      break
    case 'merged':
      merged.push([one, two])
      volts.re[one] = attached.volts / 2
      volts.re[two] = -attached.volts / 2
      break
    case 'legs':
      susceptance[one] = attached.susceptance
      drive[one] = attached.susceptance * attached.volts[0]
      if (attached.both) {
        susceptance[two] = attached.susceptance
        drive[two] = attached.susceptance * attached.volts[1]
      } else held[two] = 1
      break
    case 'bridge':
      bridges.push({ nodes: [one, two], susceptance: attached.susceptance })
      drive[one] = attached.susceptance * attached.volts
      drive[two] = -attached.susceptance * attached.volts
  }
}

/** A string whose terminals are merged is a ring without its last place, which becomes a chain of one. */
function chainRanges(network: Network, merged: readonly (readonly [number, number])[]): Chains['ranges'] {
  const closed = new Set(merged.map(([kept]) => kept))
  return network.circuits.flatMap(({ from, to }): [number, number][] =>
    closed.has(network.node[from]!)
      ? [
          [from, to - 1],
          [to, to],
        ]
      : [[from, to]],
  )
}

/**
 * Takes over potentials that are near the solution, as those of another factor. `field` is of the sign; a problem
 * whose source gives 1 V gets it divided by `needed`, the voltage between the terminals.
 */
export function startFrom(
  problem: PhasorProblem,
  field: { readonly re: Float64Array; readonly im: Float64Array },
  needed: number,
): void {
  const { volts, held, merged, network, halves, source } = problem
  const scale = 1 / sourceVolts(problem, needed)
  const offsets = merged.map(([kept, dropped]) => volts.re[kept]! - volts.re[dropped]!)
  for (let i = 0; i < held.length; i++) {
    if (held[i] === 1) continue
    volts.re[i] = field.re[i]! * scale
    volts.im[i] = field.im[i]! * scale
  }
  for (const [k, [kept, dropped]] of merged.entries()) {
    volts.re[dropped] = volts.re[kept]! - offsets[k]!
    volts.im[dropped] = volts.im[kept]!
  }
  if (halves !== undefined) {
    const { from, to } = network.circuits[source]!
    for (const place of [from, to]) volts.re[network.node[place]!] = field.re[network.node[place]!]!
  }
  chargeNodes(problem)
}

/** What a problem's potentials are to be multiplied by, where the supply needs `needed` between its terminals. */
export const sourceVolts = ({ network, source, halves }: PhasorProblem, needed: number): number =>
  network.circuits[source]!.supply.type === 'electronic' && halves === undefined ? needed : 1

/** Multiplies the potentials of the two halves of a string, to either side of the joint at the midpoint. */
export function scaleHalves(problem: PhasorProblem, first: number, second: number): void {
  const { network, source, volts, halves } = problem
  const { from, to } = network.circuits[source]!
  for (let k = from; k <= to; k++) {
    const node = network.node[k]!
    const scale = k < (halves ?? 0) ? first : second
    volts.re[node] = volts.re[node]! * scale
    volts.im[node] = volts.im[node]! * scale
  }
  chargeNodes(problem)
}

function chargeNodes({ network: { capacitance }, volts, charge }: PhasorProblem): void {
  realTimesComplex(capacitance.matrix, capacitance.count, volts.re, volts.im, charge.re, charge.im)
}

/** out = currents into the strings and, with `loads`, into the supplies' reactances, plus what charges the nodes. */
function currents(
  problem: PhasorProblem,
  conductance: Float64Array,
  { re, im }: Vector,
  charge: Vector,
  out: Vector,
  loads: boolean,
): void {
  const { omega, susceptance, network } = problem
  for (let i = 0; i < re.length; i++) {
    const s = loads ? susceptance[i]! : 0
    out.re[i] = -omega * charge.im[i]! - s * im[i]!
    out.im[i] = omega * charge.re[i]! + s * re[i]!
  }
  for (let k = 0; k + 1 < network.node.length; k++) {
    const g = conductance[k]!
    if (g === 0) continue
    const i = network.node[k]!
    const j = network.node[k + 1]!
    const flowRe = g * (re[i]! - re[j]!)
    const flowIm = g * (im[i]! - im[j]!)
    out.re[i] = out.re[i]! + flowRe
    out.im[i] = out.im[i]! + flowIm
    out.re[j] = out.re[j]! - flowRe
    out.im[j] = out.im[j]! - flowIm
  }
  if (!loads) return
  for (const {
    nodes: [i, j],
    susceptance: s,
  } of problem.bridges) {
    const flowRe = -s * (im[i]! - im[j]!)
    const flowIm = s * (re[i]! - re[j]!)
    out.re[i] = out.re[i]! + flowRe
    out.im[i] = out.im[i]! + flowIm
    out.re[j] = out.re[j]! - flowRe
    out.im[j] = out.im[j]! - flowIm
  }
}

/** Keeps only the unknowns: nothing at held nodes, merged pairs added up. */
function reduce({ held, merged }: PhasorProblem, { re, im }: Vector): void {
  for (const [kept, dropped] of merged) {
    re[kept] = re[kept]! + re[dropped]!
    im[kept] = im[kept]! + im[dropped]!
    re[dropped] = im[dropped] = 0
  }
  for (let i = 0; i < held.length; i++) if (held[i] === 1) re[i] = im[i] = 0
}

/** The strings as chains, with the capacitance that fits: neighbours as they are, the rest lumped to ground. */
function prepareChains(problem: PhasorProblem, conductance: Float64Array): void {
  const { network, omega, held, chains, freeRowSum, susceptance } = problem
  const { matrix, count: n } = network.capacitance
  const { diagonalRe, diagonalIm, nextRe, nextIm, closureRe, closureIm } = chains
  diagonalRe.fill(0)
  diagonalIm.fill(0)
  nextRe.fill(0)
  nextIm.fill(0)
  closureRe.fill(0)
  closureIm.fill(0)
  for (const { from, to } of network.circuits) {
    for (let k = from; k <= to; k++) {
      const i = network.node[k]!
      const open = (k === from || conductance[k - 1] === 0) && (k === to || conductance[k] === 0)
      diagonalIm[k] = diagonalIm[k]! + susceptance[i]! + omega * (open ? matrix[i * n + i]! : freeRowSum[i]!)
      if (k === to) break
      const j = network.node[k + 1]!
      const g = conductance[k]!
      const mutual = omega * matrix[i * n + j]!
      const lumped = open ? 0 : mutual
      diagonalRe[k] = diagonalRe[k]! + g
      diagonalRe[k + 1] = diagonalRe[k + 1]! + g
      if (held[j] === 0) diagonalIm[k] = diagonalIm[k]! - lumped
      if (held[i] === 0) diagonalIm[k + 1] = diagonalIm[k + 1]! - lumped
      nextRe[k] = -g
      nextIm[k] = mutual
    }
  }
  closeRings(problem)
  for (let k = 0; k < network.node.length; k++) {
    if (held[network.node[k]!] === 0) continue
    diagonalRe[k] = 1
    diagonalIm[k] = nextRe[k] = nextIm[k] = 0
    if (k > 0) nextRe[k - 1] = nextIm[k - 1] = 0
  }
  factorChains(chains)
}

/** Supplies that join their terminals close their string to a ring. */
function closeRings({ network, chains, merged, bridges }: PhasorProblem): void {
  const { diagonalRe, diagonalIm, nextRe, nextIm, closureRe, closureIm } = chains
  for (const [c, [first, last]] of chains.ranges.entries()) {
    const one = network.node[first]!
    if (merged.some(([kept]) => kept === one)) {
      // the last place joins the first
      const dropped = last + 1
      diagonalRe[first] = diagonalRe[first]! + diagonalRe[dropped]!
      diagonalIm[first] = diagonalIm[first]! + diagonalIm[dropped]!
      closureRe[c] = nextRe[last]!
      closureIm[c] = nextIm[last]!
      nextRe[last] = nextIm[last] = 0
      diagonalRe[dropped] = 1
      diagonalIm[dropped] = 0
    }
    const bridge = bridges.find(({ nodes }) => nodes[0] === one)
    if (bridge === undefined) continue
    diagonalIm[first] = diagonalIm[first]! + bridge.susceptance
    diagonalIm[last] = diagonalIm[last]! + bridge.susceptance
    closureIm[c] = -bridge.susceptance
  }
}

/** z = M⁻¹ r: the chains for the strings, the own capacitance for every other node. */
function precondition(problem: PhasorProblem, r: Vector, z: Vector): void {
  const { network, held, merged, omega, chains } = problem
  const { places } = problem.scratch
  const { matrix, count: n } = network.capacitance
  for (let i = 0; i < n; i++) {
    const own = omega * matrix[i * n + i]!
    z.re[i] = held[i] === 1 ? 0 : r.im[i]! / own
    z.im[i] = held[i] === 1 ? 0 : -r.re[i]! / own
  }
  for (let k = 0; k < network.node.length; k++) {
    places.re[k] = r.re[network.node[k]!]!
    places.im[k] = r.im[network.node[k]!]!
  }
  solveChains(chains, places.re, places.im)
  for (let k = 0; k < network.node.length; k++) {
    z.re[network.node[k]!] = places.re[k]!
    z.im[network.node[k]!] = places.im[k]!
  }
  for (const [kept, dropped] of merged) {
    z.re[dropped] = z.re[kept]!
    z.im[dropped] = z.im[kept]!
  }
}

const largest = ({ re, im }: Vector): number => {
  let most = 0
  for (let i = 0; i < re.length; i++) most = Math.max(most, re[i]! * re[i]! + im[i]! * im[i]!)
  return Math.sqrt(most)
}

/** Largest number of steps before the dense factorisation takes over. */
const patience = 60

/**
 * Solves for `volts` with these conductances (between place k and k + 1, S; 0 open) until the correction still to
 * come is below `tolerance` of the largest potential. Returns the number of products with C; undefined where even the
 * dense factorisation finds no solution.
 */
export function solvePhasors(
  problem: PhasorProblem,
  conductance: Float64Array,
  tolerance: number,
): number | undefined {
  const { volts, charge, drive } = problem
  const { residual: r, correction: z, direction: p, image: q, charge: moved } = problem.scratch
  const { matrix, count: n } = problem.network.capacitance
  prepareChains(problem, conductance)
  currents(problem, conductance, volts, charge, r, true)
  for (let i = 0; i < n; i++) {
    r.re[i] = -r.re[i]!
    r.im[i] = drive[i]! - r.im[i]!
  }
  reduce(problem, r)
  precondition(problem, r, z)
  p.re.set(z.re)
  p.im.set(z.im)
  let [rhoRe, rhoIm] = dot(r, z)
  for (let step = 0; step < patience; step++) {
    if (largest(z) <= tolerance * largest(volts)) return step
    realTimesComplex(matrix, n, p.re, p.im, moved.re, moved.im)
    currents(problem, conductance, p, moved, q, true)
    reduce(problem, q)
    // α = ρ / pᵀq
    const [pqRe, pqIm] = dot(p, q)
    const [aRe, aIm] = quotient(rhoRe, rhoIm, pqRe, pqIm)
    if (!Number.isFinite(aRe + aIm)) break
    add(volts, p, aRe, aIm)
    add(charge, moved, aRe, aIm)
    add(r, q, -aRe, -aIm)
    precondition(problem, r, z)
    const [nextRe, nextIm] = dot(r, z)
    const [bRe, bIm] = quotient(nextRe, nextIm, rhoRe, rhoIm)
    rhoRe = nextRe
    rhoIm = nextIm
    for (let i = 0; i < n; i++) {
      const re = p.re[i]!
      p.re[i] = z.re[i]! + bRe * re - bIm * p.im[i]!
      p.im[i] = z.im[i]! + bRe * p.im[i]! + bIm * re
    }
  }
  return solveDirectly(problem, conductance) ? patience : undefined
}

const dot = (a: Vector, b: Vector): [number, number] => {
  let re = 0
  let im = 0
  for (let i = 0; i < a.re.length; i++) {
    re += a.re[i]! * b.re[i]! - a.im[i]! * b.im[i]!
    im += a.re[i]! * b.im[i]! + a.im[i]! * b.re[i]!
  }
  return [re, im]
}

const quotient = (aRe: number, aIm: number, bRe: number, bIm: number): [number, number] => {
  const size = bRe * bRe + bIm * bIm
  return [(aRe * bRe + aIm * bIm) / size, (aIm * bRe - aRe * bIm) / size]
}

function add(to: Vector, v: Vector, re: number, im: number): void {
  for (let i = 0; i < to.re.length; i++) {
    to.re[i] = to.re[i]! + re * v.re[i]! - im * v.im[i]!
    to.im[i] = to.im[i]! + re * v.im[i]! + im * v.re[i]!
  }
}

/** The same solution by one dense LDLᵀ of the whole matrix: slow, and the judge of the fast way. */
export function solveDirectly(problem: PhasorProblem, conductance: Float64Array): boolean {
  const { volts, charge, drive, held, merged, network } = problem
  const { residual: r } = problem.scratch
  const { matrix, count: n } = network.capacitance
  const dropped = new Map(merged.map(([kept, other]) => [other, kept]))
  const free = Array.from(held.keys()).filter((i) => held[i] === 0 && !dropped.has(i))
  const unknown = new Int32Array(n).fill(-1)
  for (const [k, i] of free.entries()) unknown[i] = k
  for (const [other, kept] of dropped) unknown[other] = unknown[kept]!
  const m = free.length
  const re = new Float64Array(m * m)
  const im = new Float64Array(m * m)
  const put = (i: number, j: number, g: number, b: number) => {
    const [row, column] = [unknown[i]!, unknown[j]!]
    if (row < 0 || column < 0) return
    re[row * m + column] = re[row * m + column]! + g
    im[row * m + column] = im[row * m + column]! + b
  }
  const between = (i: number, j: number, g: number, b: number) => {
    put(i, i, g, b)
    put(j, j, g, b)
    put(i, j, -g, -b)
    put(j, i, -g, -b)
  }
  for (let i = 0; i < n; i++) {
    put(i, i, 0, problem.susceptance[i]!)
    for (let j = 0; j < n; j++) put(i, j, 0, problem.omega * matrix[i * n + j]!)
  }
  for (let k = 0; k + 1 < network.node.length; k++)
    if (conductance[k] !== 0) between(network.node[k]!, network.node[k + 1]!, conductance[k]!, 0)
  for (const { nodes, susceptance } of problem.bridges) between(nodes[0], nodes[1], 0, susceptance)
  const factor = factorDense(re, im, m)
  if (factor === undefined) return false

  // twice: the second pass takes off the rounding of the first
  for (let pass = 0; pass < 2; pass++) {
    chargeNodes(problem)
    currents(problem, conductance, volts, charge, r, true)
    for (let i = 0; i < n; i++) {
      r.re[i] = -r.re[i]!
      r.im[i] = drive[i]! - r.im[i]!
    }
    reduce(problem, r)
    const xRe = Float64Array.from(free, (i) => r.re[i]!)
    const xIm = Float64Array.from(free, (i) => r.im[i]!)
    solveDense(factor, xRe, xIm)
    for (let i = 0; i < n; i++) {
      if (unknown[i]! < 0) continue
      volts.re[i] = volts.re[i]! + xRe[unknown[i]!]!
      volts.im[i] = volts.im[i]! + xIm[unknown[i]!]!
    }
  }
  chargeNodes(problem)
  return true
}

/** |jωCV| of one node: what flows to ground from metal held at 0 V. A for the problem's own source. */
export const nodeCurrent = ({ charge, omega }: PhasorProblem, node: number): number =>
  omega * Math.hypot(charge.re[node]!, charge.im[node]!)

/** Current that leaves a place of a string into its neighbours and as charge: at a terminal, what the supply gives. */
export function placeCurrent(
  { network, volts, charge, omega }: PhasorProblem,
  conductance: Float64Array,
  place: number,
): readonly [number, number] {
  const i = network.node[place]!
  let re = -omega * charge.im[i]!
  let im = omega * charge.re[i]!
  for (const [other, g] of [
    [place - 1, conductance[place - 1] ?? 0],
    [place + 1, conductance[place] ?? 0],
  ] as const) {
    if (g === 0) continue
    const j = network.node[other]!
    re += g * (volts.re[i]! - volts.re[j]!)
    im += g * (volts.im[i]! - volts.im[j]!)
  }
  return [re, im]
}
