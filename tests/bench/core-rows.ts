/** From the text to the first solution, and from an edit to its complete result. In process, warm. */

import { prepareField } from '../../src/field/fixed-field.js'
import { leadField } from '../../src/field/lead-field.js'
import { nodeCapacitance } from '../../src/field/node-capacitance.js'
import type { LeadBody } from '../../src/geometry/conductors.js'
import { inspection, type Prepared, prepare, solver } from '../../src/inspection.js'
import type { Wiring } from '../../src/layout/layout.js'
import { measuredCircuits } from '../../src/network/calibration.js'
import { solveBand } from '../../src/network/lit.js'
import { network } from '../../src/network/network.js'
import { strayShares } from '../../src/network/stray.js'
import { editsWithNewLeads, type NamedWiring } from './edits.js'
import { type Bench, type BenchSign, bench, inspectionSum, parsed } from './sign.js'
import { ratio, row, timeRow } from './table.js'
import { least, median, quantile, type Timing, timed, timing } from './timing.js'

const editCount = 60
const editGoalMs = 30
/** walks over all edits, each on a sign prepared anew */
const walks = 3

/** Parse, geometry, field, first solution. Answers with the least that preparing the file takes, ms. */
export function fileRows({ source, path, layout }: BenchSign): number {
  const parse = timed(5, 30, () => parsed(source, path).tubes.length)
  const geometry = timed(3, 15, () => prepare(layout).nodes.count)
  const prepared = prepare(layout)
  const { bodies, nodes } = prepared
  const field = timed(1, 5, () => prepareField(bodies, nodes, layout.face).nodeMatrix[0]!)
  // every run has a fresh solver, so that no lead is known
  const solvers = Array.from({ length: 6 }, () => solver(prepare(layout)))
  const first = timed(0, 6, (run) => solvers[run]!(layout.wiring).outcomes.length)
  // the least, as edits are told by the least of several walks
  const preparing = least(parse) + least(geometry) + least(field)
  timeRow('parse the file', parse)
  timeRow('prepare: bodies, nodes, close runs', geometry)
  timeRow('prepareField: glass, bars, face', field)
  row('preparing the file (the least of the three)', `${preparing.toFixed(1).padStart(5)} ms`)
  timeRow('first solution: leads, capacitance, network', first)
  return preparing
}

/** Times of one edit, ms, with a sum of its answers. */
interface EditTimes {
  readonly paper: number
  readonly solution: number
  readonly findings: number
  readonly whole: number
  /** processor time of all threads: what of `whole` other programs have not caused */
  readonly processor: number
  readonly sum: number
}

/** One edit as the inspector works it out: the answer on paper, the lit solution, the findings. */
function editTimes({ prepared, solve }: Bench, wiring: Wiring): EditTimes {
  const before = process.cpuUsage()
  const start = performance.now()
  const onPaper = inspection(prepared, wiring)
  const papered = performance.now()
  const solved = solve(wiring)
  const lit = performance.now()
  const found = inspection(prepared, wiring, solved)
  const end = performance.now()
  const { user, system } = process.cpuUsage(before)
  return {
    paper: papered - start,
    solution: lit - papered,
    findings: end - lit,
    whole: end - start,
    processor: (user + system) / 1000,
    sum: inspectionSum(onPaper) + inspectionSum(found),
  }
}

/** What one solution is made of, by the same steps as `solver`; ms. */
interface PartTimes {
  readonly fields: number
  readonly capacitance: number
  readonly band: number
}

/** A solver that says what its parts take. It keeps lead fields as `solver` does. */
function partSolver(prepared: Prepared): (wiring: Wiring) => PartTimes {
  const { bodies, tubes, nodes, layout } = prepared
  const bars = bodies.filter((body) => body.kind === 'bar')
  const fixed = prepareField(bodies, nodes, layout.face)
  const known = new WeakMap<LeadBody, ReturnType<typeof leadField>>()
  const fieldOf = (body: LeadBody) => {
    const field = known.get(body) ?? leadField(fixed, body)
    known.set(body, field)
    return field
  }
  return (wiring) => {
    const { leads } = inspection(prepared, wiring)
    const start = performance.now()
    const fields = leads.map(fieldOf)
    const fielded = performance.now()
    const capacitance = nodeCapacitance(fixed, fields)
    const capacitances = performance.now()
    const net = network(layout, wiring, tubes, bars, nodes, capacitance)
    const factors = measuredCircuits(layout, wiring, net).map((circuit) => circuit?.factor)
    const { nominal } = solveBand(net, factors)
    strayShares(net, nominal)
    return {
      fields: fielded - start,
      capacitance: capacitances - fielded,
      band: performance.now() - capacitances,
    }
  }
}

/** A walk over the edits: with leads new to it, then once more with all of them known. */
function walk<Times>(
  edits: readonly NamedWiring[],
  filed: Wiring,
  timesOf: (wiring: Wiring) => Times,
): [Times[], Times[]] {
  // the file's own leads are known before the first edit
  timesOf(filed)
  const once = () => edits.map(({ wiring }) => timesOf(wiring))
  return [once(), once()]
}

/** For every edit the least of all walks: what else the machine does comes and goes. */
function leastTimes<Times>(walks: readonly Times[][], time: (times: Times) => number): Timing {
  const [first = []] = walks
  return timing(first.map((_, k) => Math.min(...walks.map((one) => time(one[k]!)))))
}

export function editRows(sign: BenchSign, preparing: number): void {
  const { layout } = sign
  const edits = [...editsWithNewLeads(layout, editCount)]
  const fresh = edits.reduce((sum, { newLeads }) => sum + newLeads, 0)
  const runs = Array.from({ length: walks }, () => {
    const on = bench(layout)
    return walk(edits, layout.wiring, (wiring) => editTimes(on, wiring))
  })
  const partRuns = Array.from({ length: walks }, () =>
    walk(edits, layout.wiring, partSolver(prepare(layout))),
  )
  const { solve } = bench(layout)
  const dark = edits.filter(({ wiring }) => solve(wiring).outcomes.some(({ lit }) => !lit)).length
  row(
    'edits',
    `${edits.length}, ${(fresh / edits.length).toFixed(1)} new leads each, ${dark} leave a circuit dark; ` +
      `each the least of ${walks} walks`,
  )
  for (const [pass, kind] of [
    [0, 'leads new'],
    [1, 'leads known'],
  ] as const) {
    const times = runs.map((run) => run[pass])
    const whole = leastTimes(times, (t) => t.whole)
    const checksum = times[0]!.reduce((sum, t) => sum + t.sum, 0)
    timeRow(`edit → complete result, ${kind}`, { ...whole, checksum }, editGoalMs)
    timeRow(
      '  processor time of it',
      leastTimes(times, (t) => t.processor),
    )
    const share = median(whole) / preparing
    row('  share of preparing the file', ratio(share), share, { most: 0.1, unit: '' })
    const parts = partRuns.map((run) => run[pass])
    partRows(median(whole), [
      ['answer on paper (nameplate)', leastTimes(times, (t) => t.paper)],
      ['solution', leastTimes(times, (t) => t.solution)],
      ['  lead fields', leastTimes(parts, (t) => t.fields)],
      ['  nodeCapacitance', leastTimes(parts, (t) => t.capacitance)],
      ['  network, band of three, stray', leastTimes(parts, (t) => t.band)],
      ['findings', leastTimes(times, (t) => t.findings)],
    ])
  }
}

function partRows(whole: number, stages: readonly (readonly [string, Timing])[]): void {
  for (const [name, of] of stages) {
    const figures = `${median(of).toFixed(2).padStart(5)} ms  p90 ${quantile(of, 0.9).toFixed(2).padStart(5)} ms`
    row(`  ${name}`, `${figures}  ${((100 * median(of)) / whole).toFixed(0).padStart(3)} % of the edit`)
  }
}
