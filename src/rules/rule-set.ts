/** Spacing and loading limits as data: what a rule file says, in SI units. Plain values, the same for shipped and shop files. */
import type { Conduit, Fill, Grounding, SupplyType } from '../layout/layout.js'

/**
 * How sure a figure is: R read in the text, S second-hand, S2 two independent codings agree, M from memory,
 * practice: common practice without a published source, own: a shop's own.
 */
export const marks = ['R', 'S', 'S2', 'M', 'practice', 'own'] as const
export type Mark = (typeof marks)[number]

/** Words for the parts of a pair, each a bit: a place of the sign has all the bits that fit it. */
export const partBits = {
  /** any place of a tube; glass is away from its ends, electrode the ends, bare those without a boot */
  tube: 1,
  glass: 2,
  electrode: 4,
  /** a live part without insulation: an electrode without boot, the end of the lead on it */
  bare: 8,
  lead: 16,
  /** a lead to a terminal of the supply, and one between tubes */
  feed: 32,
  jumper: 64,
  /** bars and the face */
  metal: 128,
  grounded: 256,
  floating: 512,
  face: 1024,
  any: 2048,
} as const
export type PartWord = keyof typeof partBits

/** Above the one (not included), up to the other (included). */
export interface Range {
  readonly above: number
  readonly upTo: number
}

/** When a rule applies: everything that is given must hold. V, Hz, m. */
export interface Conditions {
  readonly supply?: SupplyType
  readonly grounding?: readonly Grounding[]
  readonly frequency?: Range
  /** no-load voltage of the supply between its terminals, and of a terminal to ground, V rms */
  readonly noLoad?: Range
  readonly terminal?: Range
  readonly conduit?: readonly Conduit[]
  readonly fill?: readonly Fill[]
  /** the layout says that the supply has it, or does not */
  readonly openCircuitProtection?: boolean
  /** of a pair: its circuits are one, or two */
  readonly circuits?: 'same' | 'different'
  /** of a pair: the voltage that the rule goes by */
  readonly voltage?: Range
  /** of a pair with metal: the greatest length of that metal, m */
  readonly metal?: Range
}

/** The voltage that a rule goes by. */
export interface VoltageBasis {
  readonly condition: 'lit' | 'nameplate' | 'broken'
  readonly value: 'rms' | 'peak'
  /** the difference at the place, the higher potential to ground there, or the supply's no-load voltage */
  readonly of: 'difference' | 'to-ground' | 'no-load'
  /** the voltage is multiplied with this first */
  readonly times: number
}

/** Rows of rising voltage (V) and distances (m) that do not fall. */
export interface DistanceTable {
  readonly voltages: readonly number[]
  readonly distances: readonly number[]
  /** linear between the rows, or each row from its voltage (not included) to the next (included) */
  readonly interpolation: 'linear' | 'step'
  /** above the last row: its distance holds, or the slope of the last two rows goes on */
  readonly beyond: 'last' | 'slope'
}

interface RuleCommon {
  readonly clause: string
  readonly mark: Mark
  /** where it is not that of the set */
  readonly source?: string
  /** printed with the verdict; empty where there is none */
  readonly advice: string
  readonly when: Conditions
}

/** A distance between two parts. */
export interface PairRule extends RuleCommon {
  readonly kind: 'pair'
  /** part bits of the one side and of the other */
  readonly sides: readonly [number, number]
  readonly by: VoltageBasis
  /** m, or a table by voltage */
  readonly distance: number | DistanceTable
  /** altitude (m) and what the distance is multiplied with, linear between */
  readonly altitude: readonly (readonly [number, number])[]
  /** the distance counts from the conduit's inside, not from the lead */
  readonly fromConduit: boolean
}

/** Quantities of a circuit, with what a figure of the file is multiplied with to be SI. */
export const quantities = {
  'no-load-kv': 1000,
  'terminal-kv': 1000,
  'needed-kv': 1000,
  'short-circuit-ma': 0.001,
  'terminal-ma': 0.001,
  'residual-ma': 0.001,
  'rated-va': 1,
  'mains-va': 1,
  load: 1,
  'chart-share': 1,
  'tube-m': 1,
  'lead-m': 1,
  'output-lead-m': 1,
  'all-leads-m': 1,
} as const
export type Quantity = keyof typeof quantities

/** A limit on a quantity of a circuit. */
export interface CircuitRule extends RuleCommon {
  readonly kind: 'circuit'
  readonly quantity: Quantity
  /** SI, or by the terminal's no-load voltage to ground: each row from its voltage (not included) on */
  readonly atMost: number | { readonly voltages: readonly number[]; readonly limits: readonly number[] }
  readonly verdict: 'fix' | 'watch'
}

/** Something that the supply must have; a layout that does not say so is watched. */
export interface RequiredRule extends RuleCommon {
  readonly kind: 'required'
  readonly requires: 'ground-fault-protection' | 'open-circuit-protection'
}

/** What a layout cannot show: listed with the set for the eye, not judged. */
export interface Remark extends RuleCommon {
  readonly kind: 'remark'
}

export type Rule = PairRule | CircuitRule | RequiredRule | Remark

export interface RuleSet {
  readonly id: string
  readonly title: string
  readonly edition: string
  readonly source: string
  readonly mark: Mark
  /** what must be said with the set as a whole; empty where there is none */
  readonly note: string
  readonly rules: readonly Rule[]
}

/** A set that was asked for and cannot be used, and why, in words with the places of its faults. */
export interface MissingRules {
  readonly name: string
  readonly complaint: string
}
