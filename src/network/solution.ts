/**
 * What a solution of the network holds. Phasors are rms, e^{+jωt}; potentials against ground; V, A, W.
 * Node order as in geometry/nodes.ts.
 */
import type { Complex } from '../math/complex.js'

/** Potentials of all nodes that one supply causes. Supplies are incoherent with each other: one field each. */
export interface PotentialField {
  readonly supply: string
  /** Hz; 0 for conditions that are a snapshot (nameplate) */
  readonly frequency: number
  readonly re: Float64Array
  readonly im: Float64Array
}

/** Current along one tube, positive from end a to end b, of its own supply. */
export interface ColumnCurrents {
  /** in the stretch between node k and k + 1 of the column */
  readonly re: Float64Array
  readonly im: Float64Array
  /** through the electrodes: into end a from its lead, and out of end b into its lead */
  readonly atA: Complex
  readonly atB: Complex
}

export interface CircuitSolution {
  readonly supply: string
  /** tubes of this circuit in string order (index among the layout's tubes) with their currents */
  readonly columns: ReadonlyMap<number, ColumnCurrents>
  /** potential of terminals 1 and 2, and the current out of each */
  readonly terminalVoltage: readonly [Complex, Complex]
  readonly terminalCurrent: readonly [Complex, Complex]
  /** V the supply must hold between its terminals (electronic), or its running voltage (core-and-coil) */
  readonly neededVoltage: number
  /** W into columns and electrodes */
  readonly power: number
  /** A, phasor sum of both terminal currents: what returns through ground */
  readonly residual: Complex
  readonly iterations: number
}

export type CircuitOutcome =
  | ({ readonly lit: true } & CircuitSolution)
  | {
      readonly lit: false
      readonly supply: string
      /** indices of tubes that go dark, the first to go first */
      readonly dark: readonly number[]
      /** the voltage at short-circuit current if that solves although it is above no-load */
      readonly neededVoltage?: number
      readonly why: 'needs-more-than-no-load' | 'no-stable-point' | 'not-enough-current'
    }

/** One lit state of the whole sign. */
export interface LitState {
  /** the common factor on gradient and electrode drop of every tube that this was solved with */
  readonly factor: number
  /** in the order of the wiring's circuits */
  readonly circuits: readonly CircuitOutcome[]
  /** one for each lit circuit, in the same order */
  readonly fields: readonly PotentialField[]
}
