/**
 * The whole path from a layout and a wiring to the answers. Start reading here.
 *
 *   prepare(layout)                    what the wiring does not move: bodies, nodes, close runs       once per file
 *   solver(prepared)                   capacitances of the glass, kept; gives solve(wiring)           once per file
 *   inspection(prepared, wiring)       potentials as shared out on paper, and what follows            at once
 *   inspection(prepared, wiring, s)    the same with the lit solution s = solve(wiring)               per edit
 */
import { type LeadField, leadField, nodeCapacitance, prepareField } from './field/field.js'
import { fixedBodies } from './geometry/bodies.js'
import { fixedRuns, leadLeadRuns, leadRuns, withLeadIndex } from './geometry/close-runs.js'
import type { FixedBody, LeadBody, TubeBody } from './geometry/conductors.js'
import { leadBody } from './geometry/leads.js'
import { type FixedNodes, fixedNodes } from './geometry/nodes.js'
import type { CloseRun } from './geometry/runs.js'
import type { EndName, Layout, Wiring } from './layout/layout.js'
import { nameplateField } from './network/nameplate.js'
import { network } from './network/network.js'
import { type Probe, probe } from './network/potentials.js'
import type { CircuitOutcome, PotentialField } from './network/solution.js'
import { solveBand } from './network/solve.js'
import { type StrayShares, strayShares } from './network/stray.js'
import { cautions } from './rules/cautions.js'
import { circuitFindings, supplyOf } from './rules/circuits.js'
import type { Caution, CircuitFinding, FloatingFinding, PairFinding } from './rules/findings.js'
import { type LitFields, type PairContext, pairFindings } from './rules/pairs.js'
import { type CircuitLead, circuitLeads } from './wiring/leads.js'

/** A lead in its place with where it passes glass and metal. Depends on its two ends only: kept between edits. */
interface PlacedLead {
  readonly body: LeadBody
  readonly runs: readonly CloseRun[]
}

export interface Prepared {
  readonly layout: Layout
  readonly bodies: readonly FixedBody[]
  readonly tubes: readonly TubeBody[]
  readonly nodes: FixedNodes
  readonly runs: readonly CloseRun[]
  /** memo of leads and of where pairs of leads pass each other, by name */
  readonly leads: Map<string, PlacedLead>
  readonly crossings: Map<string, readonly CloseRun[]>
}

export function prepare(layout: Layout): Prepared {
  const bodies = fixedBodies(layout)
  return {
    layout,
    bodies,
    tubes: bodies.filter((body) => body.kind === 'tube'),
    nodes: fixedNodes(bodies, layout.face.metal === 'floating'),
    runs: fixedRuns(bodies, layout),
    leads: new Map(),
    crossings: new Map(),
  }
}

/** What solving the network gives: plain numbers that can cross from a worker thread. */
export interface Solved {
  readonly outcomes: readonly CircuitOutcome[]
  readonly lit: LitFields
  readonly stray: StrayShares
  readonly floating: readonly FloatingFinding[]
  /** supplies whose string is lit by the nominal law and not at the upper end of its band */
  readonly mayGoDark: readonly string[]
}

/** Prepares the capacitances of the glass (the slow part) and gives the function that solves a wiring. */
export function solver(prepared: Prepared): (wiring: Wiring) => Solved {
  const { layout, bodies, tubes, nodes } = prepared
  const fixed = prepareField(bodies, nodes, layout.face)
  const known = new Map<string, LeadField>()
  const fieldOf = (body: LeadBody): LeadField => {
    const field = known.get(body.name) ?? leadField(fixed, body)
    known.set(body.name, field)
    return field
  }
  return (wiring) => {
    const leads = circuitLeads(wiring).map(({ between }) => placedLead(prepared, between).body)
    const capacitance = nodeCapacitance(fixed, leads.map(fieldOf))
    return solved(network(layout, wiring, tubes, bars(bodies), nodes, capacitance))
  }
}

/** Everything that is known of a wiring. Without `solved` only the nameplate condition is. */
export interface Inspection {
  readonly wiring: Wiring
  readonly leads: readonly LeadBody[]
  readonly places: readonly CircuitLead[]
  readonly probe: Probe
  readonly context: PairContext
  readonly solved: boolean
  readonly circuits: readonly CircuitFinding[]
  /** worst first */
  readonly pairs: readonly PairFinding[]
  readonly floating: readonly FloatingFinding[]
  readonly cautions: readonly Caution[]
}
