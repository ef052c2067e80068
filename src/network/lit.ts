/** The lit state of a sign: which circuits burn, and their potentials and currents. */
import type { Complex } from '../math/complex.js'
import { magnitude, minus, plus } from '../math/complex.js'
import { firstDark, leastLit, leastShares, tooWeak } from './dark.js'
import type { CircuitString, Network, StringTube } from './network.js'
import type { Burning, Effort, OperatingPoint } from './operating-point.js'
import { bandEffort, operatingPoint } from './operating-point.js'
import type { PhasorProblem } from './phasors.js'
import { phasorProblem, placeCurrent, startFrom } from './phasors.js'
import type { CircuitOutcome, CircuitSolution, ColumnCurrents, LitState, PotentialField } from './solution.js'
import { noLoadVoltage } from './supplies.js'

/** What measurement says of a circuit's tubes: a factor on gradient and electrode drop; undefined: not measured. */
export type Calibrations = readonly (number | undefined)[]

export interface LitOptions {
  /** common factor on gradient and electrode drop of every tube; counts a sixth of its distance from 1 where measured */
  readonly factor: number
  readonly calibrations?: Calibrations | undefined
  /** the state at another factor: speeds the solution up, does not change it */
  readonly start?: LitState | undefined
  /** how closely currents have to agree; 1e-10 where not given */
  readonly effort?: Effort
}

/** the band of the column law, and the share of it that remains where a circuit was measured (±30 % → ±5 %) */
const bandWidth = 0.3
const measuredShare = 1 / 6

/** The band of the column law of a circuit, as a share: ±30 %, ±5 % with a factor that was measured. */
export const lawBand = (calibration: number | undefined): number =>
  calibration === undefined ? bandWidth : bandWidth * measuredShare

/** Three lit states: the nominal law, and the weakest and strongest columns that its uncertainty allows. */
export function solveBand(
  network: Network,
  calibrations?: Calibrations,
): { nominal: LitState; others: readonly LitState[] } {
  const nominal = solveLit(network, { factor: 1, calibrations })
  const others = [1 - bandWidth, 1 + bandWidth].map((factor) =>
    solveLit(network, { factor, calibrations, start: nominal, effort: bandEffort }),
  )
  return { nominal, others }
}

/** The factor that one circuit's tubes really get. */
const circuitFactor = (factor: number, calibration: number | undefined): number =>
  calibration === undefined ? factor : calibration * (1 + (factor - 1) * measuredShare)

/** Solves the whole sign. Circuits that cannot burn are left out one after the other, and the others solved again. */
export function solveLit(network: Network, { factor, calibrations, start, effort }: LitOptions): LitState {
  const { circuits } = network
  const factors = circuits.map((_, c) => circuitFactor(factor, calibrations?.[c]))
  const unlit = new Map<number, CircuitOutcome>()
  for (const c of circuits.keys()) {
    const dark = tooWeak(network, c)
    const weaker = start?.circuits[c]
    if (dark.length > 0) unlit.set(c, outcome(circuits[c]!, dark, 'not-enough-current'))
    // what does not burn with these columns does not with stronger ones
    else if (weaker?.lit === false && start!.factor <= factor && weaker.neededVoltage === undefined)
      unlit.set(c, weaker)
  }
  for (;;) {
    const burning: Burning = { lit: circuits.map((_, c) => !unlit.has(c)), factors }
    if (!burning.lit.includes(true)) return litState(network, factor, undefined, unlit)
    const warm = start === undefined ? undefined : warmStart(network, burning, start)
    const point = operatingPoint(network, burning, warm, effort)
    const darkOf = (c: number) => firstDark(network, burning, c, brightFactor(start, c, calibrations))
    if ('failed' in point) {
      const c = point.failed
      unlit.set(c, outcome(circuits[c]!, darkOf(c), 'no-stable-point'))
      continue
    }
    const refused = refusal(network, burning, point, darkOf)
    if (refused === undefined) return litState(network, factor, point, unlit)
    unlit.set(refused.circuit, refused.outcome)
  }
}

/** The factor at which this circuit burns in the state started from. */
const brightFactor = (start: LitState | undefined, c: number, calibrations: Calibrations | undefined) =>
  start?.circuits[c]?.lit ? circuitFactor(start.factor, calibrations?.[c]) : undefined

const outcome = (
  { supply }: CircuitString,
  dark: readonly number[],
  why: 'no-stable-point' | 'not-enough-current',
): CircuitOutcome => ({ lit: false, supply: supply.id, dark, why })

/** The circuit that this point asks too much of, if any: the one with the weakest column, then the most volts. */
function refusal(
  network: Network,
  burning: Burning,
  point: OperatingPoint,
  darkOf: (circuit: number) => readonly number[],
): { circuit: number; outcome: CircuitOutcome } | undefined {
  const lit = [...burning.lit.keys()].filter((c) => burning.lit[c])
  for (const c of lit) {
    if (leastShares(network, point.current, c).every(({ share }) => share >= leastLit)) continue
    return { circuit: c, outcome: outcome(network.circuits[c]!, darkOf(c), 'not-enough-current') }
  }
  let worst: { circuit: number; outcome: CircuitOutcome } | undefined
  let most = 1
  for (const c of lit) {
    const { supply } = network.circuits[c]!
    const neededVoltage = running(point, c)
    const load = neededVoltage / noLoadVoltage(supply)
    if (supply.type !== 'electronic' || load <= most) continue
    most = load
    // with too little voltage every tube of the string goes out, the one with the least current first
    const dark = leastShares(network, point.current, c).map(({ tube }) => tube)
    const why = 'needs-more-than-no-load'
    worst = { circuit: c, outcome: { lit: false, supply: supply.id, dark, neededVoltage, why } }
  }
  return worst
}

/** |V1 − V2|, V */
function running(point: OperatingPoint, c: number): number {
  const [one, two] = terminalVolts(point.problems[c]!, point.scales[c]!)
  return magnitude(minus(one, two))
}

function terminalVolts({ network, source, volts }: PhasorProblem, scale: number): [Complex, Complex] {
  const { from, to } = network.circuits[source]!
  const at = (place: number): Complex => {
    const node = network.node[place]!
    return { re: volts.re[node]! * scale, im: volts.im[node]! * scale }
  }
  return [at(from), at(to)]
}

/** Currents and potentials of the circuits that burn in `start`, where it is a state of the same sign. */
function warmStart(
  network: Network,
  { lit }: Burning,
  start: LitState,
): Parameters<typeof operatingPoint>[2] {
  const current = new Float64Array(network.node.length)
  const { circuits } = network
  for (const [c, solved] of start.circuits.entries()) {
    const own = circuits[c]
    if (own === undefined || !solved.lit || solved.supply !== own.supply.id) return undefined
    for (const along of own.tubes) {
      const column = solved.columns.get(along.tube)
      if (column === undefined || column.re.length !== along.to - along.from) return undefined
      const pieces = column.re.length
      current[along.from - 1] = magnitude(along.reversed ? column.atB : column.atA)
      current[along.to] = magnitude(along.reversed ? column.atA : column.atB)
      for (let k = 0; k < pieces; k++) {
        const piece = along.reversed ? pieces - 1 - k : k
        current[along.from + k] = Math.hypot(column.re[piece]!, column.im[piece]!)
      }
    }
  }
  const problems = circuits.map((_, c) => {
    const field = start.fields[c]
    if (!lit[c] || field === undefined || field.re.length !== network.capacitance.count) return undefined
    return startedProblem(network, c, field, start.circuits[c]!)
  })
  return { current, problems }
}

function startedProblem(
  network: Network,
  c: number,
  field: PotentialField,
  solved: CircuitOutcome,
): PhasorProblem {
  const problem = phasorProblem(network, c)
  startFrom(problem, field, solved.neededVoltage ?? 1)
  return problem
}

function litState(
  network: Network,
  factor: number,
  point: OperatingPoint | undefined,
  unlit: ReadonlyMap<number, CircuitOutcome>,
): LitState {
  const fields: PotentialField[] = []
  const circuits = network.circuits.map((_, c): CircuitOutcome => {
    const dark = unlit.get(c)
    if (dark !== undefined || point === undefined) return dark!
    fields.push(fieldOf(point.problems[c]!, point.scales[c]!))
    return { lit: true, ...solutionOf(network, point, c) }
  })
  return { factor, circuits, fields }
}

function fieldOf({ network, source, volts }: PhasorProblem, scale: number): PotentialField {
  const { supply } = network.circuits[source]!
  return {
    supply: supply.id,
    frequency: supply.frequency,
    re: volts.re.map((v) => v * scale),
    im: volts.im.map((v) => v * scale),
  }
}

function solutionOf(network: Network, point: OperatingPoint, c: number): CircuitSolution {
  const problem = point.problems[c]!
  const scale = point.scales[c]!
  const { supply, from, to, tubes, midpointReturn } = network.circuits[c]!
  const delivered = (place: number): Complex => {
    const [re, im] = placeCurrent(problem, point.conductance, place)
    return { re: re * scale, im: im * scale }
  }
  const terminalVoltage = terminalVolts(problem, scale)
  const terminalCurrent: [Complex, Complex] = [delivered(from), delivered(to)]
  // what comes back in the midpoint conductor does not return through ground
  const back =
    midpointReturn === undefined || supply.grounding !== 'midpoint' ? undefined : delivered(midpointReturn)
  const residual = plus(terminalCurrent[0], terminalCurrent[1])
  let power = 0
  for (let k = from; k < to; k++) power += point.current[k]! ** 2 / point.conductance[k]!
  return {
    supply: supply.id,
    columns: new Map(
      tubes.map((along) => [along.tube, columnCurrents(problem, point.conductance, scale, along)]),
    ),
    terminalVoltage,
    terminalCurrent,
    neededVoltage: running(point, c),
    power,
    residual: back === undefined ? residual : plus(residual, back),
    iterations: point.passes,
  }
}

/** Currents along one tube from end a to end b, whichever way the string runs through it. */
function columnCurrents(
  { network, volts }: PhasorProblem,
  conductance: Float64Array,
  scale: number,
  { from, to, reversed }: StringTube,
): ColumnCurrents {
  // current of the stretch behind a place, positive from a to b
  const along = (k: number): Complex => {
    const g = (reversed ? -1 : 1) * scale * conductance[k]!
    const [i, j] = [network.node[k]!, network.node[k + 1]!]
    return { re: g * (volts.re[i]! - volts.re[j]!), im: g * (volts.im[i]! - volts.im[j]!) }
  }
  const pieces = Array.from({ length: to - from }, (_, k) => along(reversed ? to - 1 - k : from + k))
  return {
    re: Float64Array.from(pieces, ({ re }) => re),
    im: Float64Array.from(pieces, ({ im }) => im),
    atA: along(reversed ? to : from - 1),
    atB: along(reversed ? from - 1 : to),
  }
}
