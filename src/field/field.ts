/**
 * Capacitances of the sign: what the field folder gives to the rest. F; node order as in geometry/nodes.ts.
 *
 *   const fixed = prepareField(bodies, nodes, face)      once per file (fixed-field.ts)
 *   const lead = leadField(fixed, leadBody)              once per lead and route; worth keeping between edits (lead-field.ts)
 *   const C = nodeCapacitance(fixed, leads)              per wiring (node-capacitance.ts)
 */
export interface NodeCapacitance {
  readonly count: number
  /** Maxwell matrix, row-major, symmetric: charge of node i = Σ_j C_ij V_j */
  readonly matrix: Float64Array
}
