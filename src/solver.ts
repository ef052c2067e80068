/** Capacitances kept, and from them the lit solution of any wiring. */
import { type FieldOptions, prepareField, usualField } from './field/fixed-field.js'
import { type LeadField, leadField } from './field/lead-field.js'
import { nodeCapacitance } from './field/node-capacitance.js'
import type { Layout, Wiring } from './layout/layout.js'
import { supplyOf } from './layout/parts.js'
import { type MeasuredCircuit, measuredLaw } from './network/calibration.js'
import { solveBand } from './network/lit.js'
import { type Network, network } from './network/network.js'
import type { CircuitOutcome, LitState } from './network/solution.js'
import { type StrayShares, strayShares } from './network/stray.js'
import { noLoadVoltage } from './network/supplies.js'
import { type PlacedLead, type Prepared, placedLead, preparedAgain } from './prepared.js'
import type { FloatingFinding } from './rules/findings.js'
import type { LitFields } from './rules/voltages.js'
import { circuitLeads } from './wiring/leads.js'

/** What solving the network gives: plain numbers that can cross from a worker thread. */
export interface Solved {
  readonly outcomes: readonly CircuitOutcome[]
  readonly lit: LitFields
  readonly stray: StrayShares
  readonly floating: readonly FloatingFinding[]
  readonly measured: readonly (MeasuredCircuit | undefined)[]
  /** supplies whose string is lit by the nominal law and not at the upper end of its band */
  readonly mayGoDark: readonly string[]
  /** parts drawn so far into others that capacitances there are rough */
  readonly strained: readonly string[]
}

/** The network of a wiring and its lit states: with the nominal law, and at the ends of its band. */
export interface SolvedNetwork {
  readonly net: Network
  readonly nominal: LitState
  readonly others: readonly LitState[]
  /** of each circuit, what was measured beside what the law has */
  readonly measured: readonly (MeasuredCircuit | undefined)[]
  /** parts drawn so far into others that capacitances there are rough */
  readonly strained: readonly string[]
}

/** Prepares the capacitances of the glass (the slow part) and gives the function that solves the network of a wiring. */
export function networkSolver(
  prepared: Prepared,
  options: FieldOptions = usualField,
): (wiring: Wiring, layout?: Layout) => SolvedNetwork {
  const { bodies, tubes, sheets, nodes } = prepared
  const metal = [...bodies.filter((body) => body.kind === 'bar'), ...sheets]
  const fixed = prepareField(bodies, nodes, prepared.layout.face, options, sheets)
  const { strained } = fixed
  const known = new WeakMap<object, LeadField>()
  const fieldOf = ({ body, conductor }: PlacedLead): LeadField => {
    const field = known.get(conductor) ?? leadField(fixed, body)
    known.set(conductor, field)
    return field
  }
  const networkOf = (placed: Prepared, wiring: Wiring): Network => {
    const leads = circuitLeads(wiring).map(({ between }) => placedLead(placed, between))
    const capacitance = nodeCapacitance(fixed, leads.map(fieldOf))
    return network(placed.layout, wiring, tubes, metal, nodes, capacitance)
  }
  const lawOf = (placed: Prepared) => measuredLaw(placed.layout, (wiring) => networkOf(placed, wiring))
  let now = prepared
  let law = lawOf(now)
  let lawFor = now.layout.supplies
  return (wiring, layout = prepared.layout) => {
    now = preparedAgain(now, layout)
    // what was measured is set against the supply's figures as they stand now
    if (layout.supplies !== lawFor) {
      law = lawOf(now)
      lawFor = layout.supplies
    }
    const net = networkOf(now, wiring)
    const measured = law(wiring)
    const factors = measured.map((circuit) => circuit?.factor)
    return { net, measured, strained, ...solveBand(net, factors) }
  }
}

/** The same with what the findings need of the solution. */
export function solver(
  prepared: Prepared,
  options: FieldOptions = usualField,
): (wiring: Wiring, layout?: Layout) => Solved {
  const solveNetwork = networkSolver(prepared, options)
  return (wiring, layout = prepared.layout) => {
    const { net, nominal, others, measured, strained } = solveNetwork(wiring, layout)
    const noLoads = wiring.circuits.map((circuit) => noLoadVoltage(supplyOf(layout, circuit.supply)))
    return {
      ...litFields(nominal, others, noLoads),
      outcomes: nominal.circuits,
      measured,
      strained,
      ...strayShares(net, nominal),
    }
  }
}

/** The band of the lit fields. Where its upper end does not burn, the nominal one scaled to no-load stands for it. */
function litFields(
  nominal: LitState,
  others: readonly LitState[],
  noLoads: readonly number[],
): Pick<Solved, 'lit' | 'mayGoDark'> {
  const burns = (state: LitState) => state.circuits.every((c, i) => c.lit === nominal.circuits[i]?.lit)
  const mayGoDark = nominal.circuits.flatMap((c, i) =>
    c.lit && others.some((o) => !o.circuits[i]?.lit) ? [c.supply] : [],
  )
  const band = others.filter(burns).map((o) => o.fields)
  const room = nominal.circuits.flatMap((c, i) =>
    c.lit && mayGoDark.includes(c.supply) ? [noLoads[i]! / c.neededVoltage] : [],
  )
  const lit = { nominal: nominal.fields, band, ...(room.length > 0 && { ceiling: Math.max(...room) }) }
  return { lit, mayGoDark }
}
