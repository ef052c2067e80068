/**
 * What a layout file says, in SI units (metres, volts rms, amperes rms, hertz), after parsing.
 * Plain read-only values: an edit makes a new Layout (wiring/edits.ts), nothing is changed in place.
 */

/** A place in metres: x to the right, y down, z out of the face. */
export type Point = readonly [number, number, number]

/** A place of a drawn path, metres. Without `z` it lies at the height of its tube or lead. */
export interface PathPoint {
  readonly x: number
  readonly y: number
  readonly z?: number
}

export type Units = 'mm' | 'in'
export type Fill = 'neon' | 'argon-mercury' | 'neon-mercury'
export type Grounding = 'midpoint' | 'one-end' | 'none'
export type SupplyType = 'electronic' | 'core-and-coil'
export type Conduit = 'none' | 'nonmetallic' | 'metal'

/** The sheet at z = 0. `size` counts for gaps; for capacitance a grounded face is an infinite plane. */
export interface Face {
  readonly metal: 'none' | 'grounded' | 'floating'
  /** width and height, metres; the face spans (0, 0) to size */
  readonly size?: readonly [number, number]
}

export interface Tube {
  readonly id: string
  /** from the electrode at end a to the electrode at end b; curves already flattened to straight pieces */
  readonly path: readonly PathPoint[]
  /** z of the centre-line where the path has none, m */
  readonly height: number
  /** outer diameter and wall of the glass, m */
  readonly diameter: number
  readonly wall: number
  /** relative permittivity of the glass */
  readonly permittivity: number
  readonly fill: Fill
  /** electrode connections under insulating boots */
  readonly boots: boolean
}

/** How much glass of a kind a supply lights, by its maker; m. */
export interface ChartEntry {
  readonly fill: Fill
  /** outer diameter of the glass */
  readonly diameter: number
  readonly length: number
}

export interface Supply {
  readonly id: string
  readonly type: SupplyType
  /** V rms, nameplate */
  readonly noLoadVoltage: number
  /** V peak, where the maker states it */
  readonly noLoadPeak?: number
  /** A rms */
  readonly shortCircuitCurrent: number
  /** Hz */
  readonly frequency: number
  readonly grounding: Grounding
  /** mains input, VA */
  readonly ratedPower?: number
  readonly openCircuitProtection: boolean
  /** A; trip value of the ground-fault device, where there is one */
  readonly groundFaultTrip?: number
  /** m; the longest run its leads allow, uncut */
  readonly maxLead?: number
  /** the maker's tube-length chart; empty where there is none */
  readonly chart: readonly ChartEntry[]
  /** where terminals 1 and 2 are */
  readonly terminals: readonly [PathPoint, PathPoint]
}

/** One end of a tube (`K.a`), or a terminal of a supply (`S1.1`). */
export type EndName = string

/** How a lead runs between two ends. Kept in the file whether or not the wiring uses it. */
export interface Route {
  readonly between: readonly [EndName, EndName]
  /** the path from the first end to the second; absent: assumed straight (geometry/leads.ts) */
  readonly path?: readonly PathPoint[]
  /** m, where the path has no z */
  readonly height?: number
  readonly conduit: Conduit
  /** inside diameter of the conduit, m */
  readonly bore?: number
  /** overrides of the default lead */
  readonly conductor?: number
  readonly diameter?: number
  readonly permittivity?: number
}

/** The lead used where a route does not say otherwise; m. */
export interface LeadDefaults {
  readonly conductor: number
  readonly diameter: number
  readonly permittivity: number
  readonly height: number
}

interface MetalCommon {
  readonly id: string
  readonly grounded: boolean
}
/** A bar, tube or rail along a path. */
export interface Bar extends MetalCommon {
  readonly kind: 'bar'
  readonly path: readonly PathPoint[]
  readonly height: number
  readonly diameter: number
}
/** A flat sheet parallel to the face: opposite corners and its height. */
export interface Plate extends MetalCommon {
  readonly kind: 'plate'
  readonly corners: readonly [PathPoint, PathPoint]
  readonly height: number
}
/** An upright sheet along a path, as the side of a channel letter; spans z = from … to. */
export interface Wall extends MetalCommon {
  readonly kind: 'wall'
  readonly path: readonly PathPoint[]
  readonly from: number
  readonly to: number
}
export type Metal = Bar | Plate | Wall

/** A place in a string: the tube, entered at `a`, or at `b` when reversed. */
export interface StringEntry {
  readonly tube: string
  readonly reversed: boolean
}

/** What was measured on the running sign: W at the plug, A at named ends. */
export interface Measured {
  readonly primaryPower?: number
  readonly currents: ReadonlyMap<EndName, number>
}

/** One supply and its string, from terminal 1 to terminal 2. */
export interface CircuitWiring {
  readonly supply: string
  readonly string: readonly StringEntry[]
  /** this joint goes back to the supply's midpoint */
  readonly midpointReturn?: EndName
  readonly measured?: Measured
}

/** The edited thing: how the same glass is connected. */
export interface Wiring {
  readonly circuits: readonly CircuitWiring[]
}

export interface Variant extends Wiring {
  readonly name: string
}

/** Something the file did not say, and what was taken instead, in plain words. */
export interface Assumption {
  /** the part or place it is about, as `K` or `S1` */
  readonly about: string
  readonly text: string
}

export interface Layout {
  readonly title: string
  readonly units: Units
  /** m above sea level */
  readonly altitude: number
  readonly face: Face
  readonly tubes: readonly Tube[]
  readonly lead: LeadDefaults
  readonly supplies: readonly Supply[]
  readonly metal: readonly Metal[]
  /** the wiring of the file */
  readonly wiring: Wiring
  /** the library of lead routes, of all circuits */
  readonly routes: readonly Route[]
  readonly variants: readonly Variant[]
  /** names of built-in rule sets or paths of files beside the layout */
  readonly rules: readonly string[]
  readonly assumed: readonly Assumption[]
}
