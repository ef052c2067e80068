/** The sign as conductors in space: what field, network and gaps work on. SI units. */

import type { Conduit, Fill } from '../layout/layout.js'

/** A path of straight pieces. `points` holds x, y, z of each corner; `at` the path length to each corner. */
export interface Polyline {
  readonly points: Float64Array
  readonly at: Float64Array
  readonly length: number
}

interface ConductorCommon {
  /** `K` for a tube, `S1.1–K.a` for a lead, the id for metal */
  readonly name: string
  readonly line: Polyline
  /** radius of the conducting core (bore of the glass, wire of a lead), m */
  readonly coreRadius: number
  /** outer radius of glass, insulation or bar, m */
  readonly outerRadius: number
  /** relative permittivity between the two; 1 for bare metal */
  readonly permittivity: number
  /** radius of the bare cylinder with the same outside field, b (a/b)^(1/εr), m */
  readonly equivalentRadius: number
}

export interface TubeBody extends ConductorCommon {
  readonly kind: 'tube'
  readonly fill: Fill
  readonly boots: boolean
}
export interface LeadBody extends ConductorCommon {
  readonly kind: 'lead'
  readonly between: readonly [string, string]
  readonly conduit: Conduit
  /** inside radius of a conduit, m */
  readonly boreRadius?: number
  /** no route in the file joins these ends: the path is ours */
  readonly assumed: boolean
  /** m in the drawing from where the route's path begins or ends to the end it should join, the greater of both */
  readonly off: number
}
export interface BarBody extends ConductorCommon {
  readonly kind: 'bar'
  readonly grounded: boolean
}
export type Body = TubeBody | LeadBody | BarBody
/** What the wiring does not move. */
export type FixedBody = TubeBody | BarBody

/**
 * A plate, or an upright wall along a path: thin sheet metal, one conductor of flat rectangles
 * (geometry/rectangles.ts). Not a `Body`: it has no centre-line.
 */
export interface SheetBody {
  readonly kind: 'sheet'
  /** the id */
  readonly name: string
  readonly grounded: boolean
  /** as drawn: what distances are measured to */
  readonly rectangles: Float64Array
  /** the same with the short pieces of a curved wall merged into chords: what carries charge */
  readonly chords: Float64Array
  /** of each chord: is its start and end along u, and along v, an edge of the sheet (1) or joined to the next (0) */
  readonly edges: Uint8Array
}
