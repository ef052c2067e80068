/** Our ways against the plain ones, as ratios in one run. */
import { prepareField } from '../../src/field/fixed-field.js'
import { leadField } from '../../src/field/lead-field.js'
import { nodeCapacitance } from '../../src/field/node-capacitance.js'
import { pointAt } from '../../src/geometry/polyline.js'
import { inspection, prepare } from '../../src/inspection.js'
import type { Point } from '../../src/layout/layout.js'
import { factorDense, solveDense } from '../../src/math/complex-symmetric.js'
import { factorCholesky } from '../../src/math/dense.js'
import { measuredCircuits } from '../../src/network/calibration.js'
import { solveBand } from '../../src/network/lit.js'
import { type Network, network } from '../../src/network/network.js'
import type { LitState } from '../../src/network/solution.js'
import { inverseFromCholesky } from '../math/inverse.js'
import type { BenchSign } from './sign.js'
import { ms, ratio, row, timeRow } from './table.js'
import { median, type Timing, timed } from './timing.js'

export function ratioRows({ layout }: BenchSign): void {
  const prepared = prepare(layout)
  const { bodies, tubes, nodes } = prepared
  const { leads } = inspection(prepared, layout.wiring)
  const fixed = prepareField(bodies, nodes, layout.face)
  const fields = leads.map((lead) => leadField(fixed, lead))
  const bars = bodies.filter((body) => body.kind === 'bar')
  const net = network(layout, layout.wiring, tubes, bars, nodes, nodeCapacitance(fixed, fields))
  const factors = () => measuredCircuits(layout, layout.wiring, net).map((circuit) => circuit?.factor)
  bandAgainstDense(net, () => solveBand(net, factors()))

  const leadCount = fields.reduce((sum, f) => sum + (f.kind === 'open' ? f.system.segments.count : 0), 0)
  const lines = [...bodies, ...leads].map(({ line }) => line)
  const total = lines.reduce((sum, { length }) => sum + length, 0)
  const count = fixed.system.segments.count + leadCount
  const step = total / count
  const places = lines.flatMap((line) =>
    Array.from({ length: Math.round(line.length / step) }, (_, k) => pointAt(line, (k + 0.5) * step)),
  )
  const edit = timed(2, 10, () => nodeCapacitance(fixed, fields).matrix[0]!)
  storedAgainstInverse(edit, places)
}

/** Passes over the supplies that the three states of the band took together. */
const phasorSolutions = (states: readonly LitState[]): number =>
  states.reduce((sum, { circuits }) => {
    const lit = circuits.flatMap((c) => (c.lit ? [c.iterations] : []))
    return sum + lit.reduce((a, b) => a + b, 0)
  }, 0)

function bandAgainstDense(net: Network, solve: () => ReturnType<typeof solveBand>): void {
  let solutions = 0
  const band = timed(5, 30, () => {
    const { nominal, others } = solve()
    solutions = phasorSolutions([nominal, ...others])
    return nominal.circuits.length
  })
  const dense = timed(3, 15, () => denseSolution(net))
  timeRow(`band of three states (${solutions} phasor solutions)`, band)
  timeRow(`one dense LDLᵀ solution, ${net.capacitance.count} nodes`, dense)
  row('  dense over ours, each phasor solution', ratio((median(dense) * solutions) / median(band)))
  row('  the band over one dense solution', ratio(median(band) / median(dense)))
}

/** (G + jωC) V = I by one factorisation of the whole matrix, every column at its supply's short-circuit current. */
function denseSolution({ capacitance, circuits, node, coefficient, exponent }: Network): number {
  const { count: n, matrix } = capacitance
  const re = new Float64Array(n * n)
  const omega = 2 * Math.PI * circuits[0]!.supply.frequency
  const im = matrix.map((c) => omega * c)
  for (const { supply, from, to } of circuits) {
    for (let k = from; k < to; k++) {
      const g = supply.shortCircuitCurrent ** exponent[k]! / coefficient[k]!
      const [i, j] = [node[k]!, node[k + 1]!]
      re[i * n + i]! += g
      re[j * n + j]! += g
      re[i * n + j]! -= g
      re[j * n + i]! -= g
    }
  }
  const xRe = new Float64Array(n)
  const xIm = new Float64Array(n)
  xRe[node[circuits[0]!.from]!] = 1
  const factor = factorDense(re, im, n)
  if (factor) solveDense(factor, xRe, xIm)
  return xRe[0]!
}

/** What an edit would cost without the stored factor: all coefficients of potential inverted anew. */
function storedAgainstInverse(edit: Timing, places: readonly Point[]): void {
  const n = places.length
  const inverse = timed(0, 3, () => {
    const matrix = pointPotentials(places)
    return factorCholesky(matrix, n) ? inverseFromCholesky(matrix, n)[0]! : Number.NaN
  })
  timeRow('nodeCapacitance, leads known', edit)
  timeRow(`dense inverse of all ${n} charges`, inverse)
  row(
    '  inverse over ours',
    `${ratio(median(inverse) / median(edit))}   (${ms(median(inverse)).trim()} an edit)`,
  )
}

/** Coefficients of point charges a tube's radius in size: as many as the sign has segments, positive definite. */
function pointPotentials(places: readonly Point[], size = 0.006): Float64Array {
  const n = places.length
  const matrix = new Float64Array(n * n)
  for (const [i, p] of places.entries())
    for (const [j, q] of places.entries())
      matrix[i * n + j] = 1 / Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2], size)
  return matrix
}
