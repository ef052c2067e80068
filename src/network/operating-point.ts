/**
 * The operating point: resistances that agree with the currents they cause.
 *
 * Unknown is the logarithm u of the rms current, over all supplies, of every stretch of the lit circuits; one pass
 * solves every supply's phasor problem with the resistances of u and returns the logarithms of the new currents.
 * Passes are repeated from a high current. Where they contract, the last few are combined (D. G. Anderson,
 * J. ACM 12, 1965; from memory). A point reached that way must attract plain passes too: an unstable operating point
 * is a fixed point as well.
 */
import type { Network } from './network.js'
import type { PhasorProblem } from './phasors.js'
import { phasorProblem, placeCurrent, scaleHalves, solvePhasors } from './phasors.js'

/** A circuit that burns and how: `factor` multiplies gradient and electrode drop of its tubes. */
export interface Burning {
  readonly lit: readonly boolean[]
  readonly factors: readonly number[]
}

export interface OperatingPoint {
  /** rms current over all supplies between place k and k + 1, A; 0 in unlit circuits */
  readonly current: Float64Array
  /** S, of the same stretches */
  readonly conductance: Float64Array
  /** one for each circuit; undefined where it is unlit */
  readonly problems: readonly (PhasorProblem | undefined)[]
  /** potentials of a problem times this are those of the sign */
  readonly scales: Float64Array
  /** passes and products with C that it took */
  readonly passes: number
  readonly products: number
}

/** No point was found; the circuit whose current fell furthest. */
export interface NoPoint {
  readonly failed: number
}

export interface Effort {
  /** relative change of any current at which a point counts as found */
  readonly settled: number
  readonly mostPasses: number
  /** combine no passes: slow, the judge of the fast way */
  readonly plain?: boolean
}
const fullEffort: Effort = { settled: 1e-10, mostPasses: 350 }
/** enough for the ends of a band of ±30 % */
export const bandEffort: Effort = { settled: 1e-7, mostPasses: 350 }
/** enough to see which side of a limit a point lies on */
export const roughEffort: Effort = { settled: 1e-5, mostPasses: 40 }

/** accuracy of a pass against the change that the last one made */
const innerShare = 1e-2
/** lowest current a resistance is taken at, share of the rated current */
const floor = 1e-4
/** three plain passes below this share of the rated current: the column is going out */
const goingOut = 0.03

interface Work extends Burning {
  readonly network: Network
  readonly problems: readonly (PhasorProblem | undefined)[]
  readonly scales: Float64Array
  readonly conductance: Float64Array
  readonly power: Float64Array
  /** stretches of lit circuits, and the circuit of each */
  readonly active: Int32Array
  readonly circuit: Int32Array
  products: number
  /** how far halves that hold their own current were from it, share */
  unbalance: number
}

/**
 * Looks for the point all `lit` circuits burn at. `currents` (A, per stretch) start the search, I_sc otherwise;
 * `problems` of an earlier point of the same network are taken over with their potentials.
 */
export function operatingPoint(
  network: Network,
  burning: Burning,
  start?: { readonly current?: Float64Array; readonly problems?: OperatingPoint['problems'] },
  effort = fullEffort,
): OperatingPoint | NoPoint {
  const work = prepare(network, burning, start?.problems)
  const u = Float64Array.from(work.active, (k, a) => {
    const warm = start?.current?.[k] ?? 0
    return Math.log(warm > 0 ? warm : network.circuits[work.circuit[a]!]!.supply.shortCircuitCurrent)
  })
  const passes = settle(work, u, effort)
  if (typeof passes !== 'number') return passes
  const current = new Float64Array(network.node.length)
  for (const [a, k] of work.active.entries()) current[k] = Math.exp(u[a]!)
  const { conductance, problems, scales, products } = work
  return { current, conductance, problems, scales, passes, products }
}

function prepare(network: Network, { lit, factors }: Burning, earlier?: OperatingPoint['problems']): Work {
  const active: number[] = []
  const circuit: number[] = []
  for (const [c, { from, to }] of network.circuits.entries()) {
    for (let k = from; k < to && lit[c]; k++) {
      active.push(k)
      circuit.push(c)
    }
  }
  return {
    network,
    lit,
    factors,
    problems: lit.map((on, c) => (on ? (earlier?.[c] ?? phasorProblem(network, c)) : undefined)),
    scales: new Float64Array(lit.length).fill(1),
    conductance: new Float64Array(network.node.length),
    power: new Float64Array(network.node.length),
    active: Int32Array.from(active),
    circuit: Int32Array.from(circuit),
    products: 0,
    unbalance: 0,
  }
}

/** One pass: logarithms of the currents that the resistances of `u` cause. Undefined where a solution fails. */
function pass(work: Work, u: Float64Array, tolerance: number): Float64Array | undefined {
  const { network, active, circuit, conductance, factors, power, problems, scales } = work
  for (const [a, k] of active.entries()) {
    const current = Math.max(Math.exp(u[a]!), floor * network.rated[k]!)
    conductance[k] = current ** network.exponent[k]! / (factors[circuit[a]!]! * network.coefficient[k]!)
  }
  power.fill(0)
  work.unbalance = 0
  for (const [c, problem] of problems.entries()) {
    if (problem === undefined) continue
    const products = solvePhasors(problem, conductance, tolerance)
    if (products === undefined) return undefined
    work.products += products
    scales[c] = 1
    if (problem.network.circuits[c]!.supply.type === 'electronic') {
      const [one, two] = terminalScales(problem, conductance)
      if (problem.halves === undefined) scales[c] = Math.min(one, two)
      else {
        scaleHalves(problem, one, two)
        work.unbalance = Math.max(work.unbalance, Math.abs(one - 1), Math.abs(two - 1))
      }
    }
    addPower(work, problem, scales[c]!)
  }
  return Float64Array.from(
    active,
    (k) => 0.5 * Math.log(Math.max(power[k]!, (floor * network.rated[k]!) ** 2)),
  )
}

/** What would bring the current of either terminal to the short-circuit current, which the greater of them keeps. */
function terminalScales(problem: PhasorProblem, conductance: Float64Array): readonly [number, number] {
  const { supply, from, to } = problem.network.circuits[problem.source]!
  const scale = (place: number) =>
    supply.shortCircuitCurrent / Math.hypot(...placeCurrent(problem, conductance, place))
  return [scale(from), scale(to)]
}

/** Adds |I|² of one supply to every stretch. */
function addPower(
  { network, active, conductance, power }: Work,
  problem: PhasorProblem,
  scale: number,
): void {
  const { re, im } = problem.volts
  for (const k of active) {
    const i = network.node[k]!
    const j = network.node[k + 1]!
    const g = conductance[k]! * scale
    power[k] = power[k]! + g * g * ((re[i]! - re[j]!) ** 2 + (im[i]! - im[j]!) ** 2)
  }
}

/** Repeats passes on `u` until nothing changes: how many it took, or the circuit that failed. */
function settle(work: Work, u: Float64Array, { settled, mostPasses, plain }: Effort): number | NoPoint {
  let last = Number.POSITIVE_INFINITY
  let ratio = 1
  let falling = 0
  let mixing: Mixing | undefined
  let mixingFrom = 2
  let tolerance = 1e-3
  for (let n = 1; n <= mostPasses; n++) {
    const next = pass(work, u, tolerance)
    if (next === undefined) return { failed: weakest(work, u).circuit }
    const change = difference(next, u)
    const size = Math.max(largest(change), work.unbalance)
    if (size < settled) {
      if (mixing === undefined || mixing.ratio < 0.5 || attracts(work, next, mixing.mode)) {
        u.set(next)
        return n
      }
      return { failed: weakest(work, u).circuit }
    }
    const before = ratio
    ratio = size / last
    last = size
    tolerance = Math.min(1e-3, Math.max(1e-13, innerShare * size))

    if (mixing === undefined) {
      // plain passes from above never end below the point they go to
      const low = weakest(work, next)
      falling = low.share < goingOut ? falling + 1 : 0
      if (falling === 3) return { failed: low.circuit }
      if (!plain && n > mixingFrom && Math.max(ratio, before) < 0.95) {
        mixing = { ratio, mode: change, best: size, retreat: next, steps: [], changes: [] }
      }
      if (mixing === undefined) {
        u.set(next)
        continue
      }
    }
    if (size > 3 * mixing.best) {
      // combined passes lead away: go on plainly from where they began
      u.set(mixing.retreat)
      mixing = undefined
      mixingFrom = n + 10
      ratio = 1
      continue
    }
    mixing.best = Math.min(mixing.best, size)
    u.set(mixed(mixing, next, change))
  }
  return { failed: weakest(work, u).circuit }
}

/** Stretch with the least share of its rated current. */
function weakest({ network, active, circuit }: Work, u: Float64Array): { circuit: number; share: number } {
  let share = Number.POSITIVE_INFINITY
  let at = 0
  for (const [a, k] of active.entries()) {
    const own = Math.exp(u[a]!) / network.rated[k]!
    if (own >= share) continue
    share = own
    at = circuit[a]!
  }
  return { circuit: at, share }
}

interface Mixing {
  /** contraction of plain passes when combining began, and the direction they contracted in */
  readonly ratio: number
  readonly mode: Float64Array
  best: number
  readonly retreat: Float64Array
  /** results of the last passes and their changes, the newest last */
  readonly steps: Float64Array[]
  readonly changes: Float64Array[]
}
const mixingDepth = 3

/** The combination of the last passes whose changes cancel best. */
function mixed({ steps, changes }: Mixing, next: Float64Array, change: Float64Array): Float64Array {
  steps.push(next)
  changes.push(change)
  if (steps.length > mixingDepth + 1) {
    steps.shift()
    changes.shift()
  }
  const m = steps.length - 1
  const towards = Array.from({ length: m }, (_, k) => difference(change, changes[k]!))
  const weights = leastSquares(towards, change)
  const result = Float64Array.from(next)
  for (let k = 0; k < m; k++) {
    const earlier = steps[k]!
    const w = weights[k]!
    for (let a = 0; a < result.length; a++) result[a] = result[a]! - w * (next[a]! - earlier[a]!)
  }
  return result
}

/** Weights w that make |f − Σ w_k d_k| least, by orthogonalisation; a direction that adds nothing gets weight 0. */
function leastSquares(directions: readonly Float64Array[], f: Float64Array): number[] {
  const m = directions.length
  const basis: Float64Array[] = []
  const triangle: number[][] = []
  for (const d of directions) {
    const q = Float64Array.from(d)
    const column = basis.map((b) => {
      const along = inner(b, q)
      for (let a = 0; a < q.length; a++) q[a] = q[a]! - along * b[a]!
      return along
    })
    const length = Math.sqrt(inner(q, q))
    const useful = length > 1e-8 * Math.sqrt(inner(d, d))
    for (let a = 0; a < q.length; a++) q[a] = useful ? q[a]! / length : 0
    basis.push(q)
    triangle.push([...column, useful ? length : 1])
  }
  const weights = basis.map((b) => inner(b, f))
  for (let k = m - 1; k >= 0; k--) {
    weights[k] = weights[k]! / triangle[k]![k]!
    for (let r = 0; r < k; r++) weights[r] = weights[r]! - triangle[k]![r]! * weights[k]!
  }
  return weights
}

/** Do plain passes return to `u` from a small step along the direction in which they contracted last? */
function attracts(work: Work, u: Float64Array, mode: Float64Array): boolean {
  const step = 1e-4
  let direction = mode
  let ratio = 0
  for (let n = 0; n < 3; n++) {
    const size = largest(direction)
    const moved = u.map((value, a) => value + (step * direction[a]!) / size)
    const back = pass(work, moved, 1e-3 * step)
    if (back === undefined) return false
    direction = difference(back, u)
    ratio = largest(direction) / step
  }
  // leave the solution at the point itself
  return pass(work, u, 1e-13) !== undefined && ratio < 1
}

const difference = (a: Float64Array, b: Float64Array): Float64Array => a.map((value, k) => value - b[k]!)

function inner(a: Float64Array, b: Float64Array): number {
  let sum = 0
  for (let k = 0; k < a.length; k++) sum += a[k]! * b[k]!
  return sum
}

function largest(v: Float64Array): number {
  let most = 0
  for (let k = 0; k < v.length; k++) most = Math.max(most, Math.abs(v[k]!))
  return most
}
