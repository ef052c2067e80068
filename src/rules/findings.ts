/** The answers about a sign: pairs, circuits, floating metal, cautions. V rms unless said; m, A, W. */

import type { Outcome } from '../gaps/gap-stress.js'
import type { BodyRef } from '../geometry/runs.js'
import type { Point, SupplyType } from '../layout/layout.js'
import type { Complex } from '../math/complex.js'
import type { MeasuredCircuit } from '../network/calibration.js'
import type { FloatingMetal } from '../network/stray.js'
import type { Mark, MissingRules, Quantity } from './rule-set.js'

export type Condition = 'lit' | 'nameplate' | 'broken'
export type Verdict = 'fix' | 'watch' | 'within'
export type PartKind = 'tube' | 'lead' | 'metal' | 'face'

/** A place on a part. */
export interface Spot {
  readonly body: BodyRef
  readonly kind: PartKind
  /** `K`, `S1.1–K.a`, `frame`, `face` */
  readonly part: string
  /** path length from end a (tube) or the first end (lead), m */
  readonly at: number
  readonly point: Point
}

export interface RuleFinding {
  readonly set: string
  readonly clause: string
  /** how sure the figure is */
  readonly mark: Mark
  /** m */
  readonly needs: number
  readonly ok: boolean
  /** the condition it went by */
  readonly condition: Condition
  /** how bad by this rule, where it depends on voltage: difference over the difference this gap may have */
  readonly severity?: number
  readonly advice: string
}

/** rms differences between two spots */
export interface Differences {
  readonly lit?: number
  readonly litLow?: number
  readonly litHigh?: number
  /** peak of the worst instant, of the upper end of the band */
  readonly litPeak?: number
  readonly nameplate: number
  /** the worst over all breaks */
  readonly broken: number
  /** the tubes that make it, open: one, or one of each circuit; none where no break makes a difference */
  readonly openTubes: readonly string[]
}

/** the face counts as metal; the earlier word first */
export type PairPart = Exclude<PartKind, 'face'>
export type PairKind = `${PairPart}-${PairPart}`

export interface PairFinding {
  /** stable while the two spots stay the same stretch: survives edits that do not touch it */
  readonly key: string
  readonly kind: PairKind
  readonly a: Spot
  readonly b: Spot
  readonly gap: number
  readonly difference: Differences
  /** V peak across the air of the gap (glass and coatings taken off), and the one at which a discharge starts */
  readonly air: {
    readonly peak: number
    readonly startsAt: number
    readonly outcome: Outcome
    /** the same with a tube open; it counts for the verdict where a supply has no open-circuit protection */
    readonly open?: { readonly peak: number; readonly outcome: Outcome; readonly counted: boolean }
  }
  readonly rules: readonly RuleFinding[]
  /** what physics and the rules that go by the lit sign were judged on: nameplate where the circuit is not lit */
  readonly judgedOn: Condition
  readonly severity: number
  readonly verdict: Verdict
  /** which criterion decided, as `common-practice: thumb` */
  readonly governs: string
  /** the verdict flips inside the band of the lit difference */
  readonly unsure: boolean
}

export interface EndState {
  readonly voltage: Complex
  readonly current: Complex
}

export interface TubeFinding {
  readonly id: string
  readonly length: number
  /** a and b: absent in an unlit circuit */
  readonly a?: EndState
  readonly b?: EndState
  readonly nameplateA: number
  readonly nameplateB: number
  /** |V_a − V_b| */
  readonly drop?: number
  /** |I_in − I_out| */
  readonly stray?: number
  readonly least?: { readonly current: number; readonly at: number }
  /** this tube's capacitive current to ground and to other parts, A */
  readonly toGround?: number
  readonly toNeighbours?: number
  /** what of the circuit's residual it makes, A: its current to ground in step with that; negative where it balances */
  readonly ofResidual?: number
}

export interface LeadFinding {
  readonly between: readonly [string, string]
  readonly role: 'feed' | 'jumper'
  readonly length: number
  readonly assumed: boolean
  readonly voltage?: number
  readonly nameplate: number
  readonly stray?: number
  readonly toGround?: number
  readonly toNeighbours?: number
  /** as of a tube */
  readonly ofResidual?: number
}

export interface TerminalFinding {
  readonly end: string
  readonly voltage: Complex
  /** out of the terminal */
  readonly current: Complex
}

/** One way to look at how loaded a supply is: a share of a limit, with what it is a share of. */
export interface Loading {
  readonly by: 'voltage' | 'chart' | 'mains' | 'residual' | 'lead'
  readonly value: number
  readonly limit: number
  readonly share: number
  readonly verdict: Verdict
}

/** What a rule set says of a circuit; `parts` are the leads that are over a limit of length. */
export type CircuitRuleFinding = {
  readonly set: string
  readonly clause: string
  readonly mark: Mark
  readonly advice: string
  readonly verdict: Verdict
  readonly parts: readonly string[]
} & (
  | {
      readonly kind: 'limit'
      readonly quantity: Quantity
      /** SI */
      readonly value: number
      readonly limit: number
      /** the limit holds for leads in metal conduit only */
      readonly inMetalConduit: boolean
    }
  | { readonly kind: 'required'; readonly requires: 'ground-fault-protection' | 'open-circuit-protection' }
)

export interface CircuitFinding {
  readonly supply: string
  /** the lit solution has been sought; false while only the nameplate condition is known */
  readonly solved: boolean
  readonly lit: boolean
  readonly dark: readonly string[]
  /** when not lit */
  readonly why?: 'needs-more-than-no-load' | 'no-stable-point' | 'not-enough-current'
  readonly neededVoltage?: number
  readonly noLoadVoltage: number
  readonly load?: number
  readonly power?: number
  readonly stray?: number
  readonly residual?: number
  /** on the running circuit, beside what the law without that knowledge has */
  readonly measured?: MeasuredCircuit
  readonly tubeLength: number
  readonly electrodePairs: number
  readonly terminals: readonly TerminalFinding[]
  readonly loadings: readonly Loading[]
  /** what the chosen rule sets say of the circuit as a whole */
  readonly rules: readonly CircuitRuleFinding[]
  /** in string order */
  readonly tubes: readonly TubeFinding[]
  /** the least current of the string, A, and where on its tube, m; absent where it is not lit */
  readonly dimmest?: { readonly tube: string; readonly current: number; readonly at: number }
  readonly leads: readonly LeadFinding[]
  readonly verdict: Verdict
}

export type FloatingFinding = FloatingMetal

export type CautionLevel = 'danger' | 'fix' | 'watch' | 'note'

/** What must be said about a sign beyond its figures, as facts; view/caution-text.ts says it in English. */
export type Caution = { readonly level: CautionLevel } & CautionFacts

/** `code` is what it is about, stable for tests and for those who filter. */
export type CautionFacts =
  | {
      readonly code: 'dark'
      readonly supply: string
      readonly why: NonNullable<CircuitFinding['why']>
      readonly neededVoltage?: number
      readonly noLoadVoltage: number
      /** the first to go dark first */
      readonly dark: readonly string[]
    }
  /** glass that takes more by this share of the law, the upper end of its band, is not lit */
  | { readonly code: 'may-go-dark'; readonly supply: string; readonly band: number }
  /** the worst pair, and how many more are to fix and to watch */
  | { readonly code: 'pairs'; readonly pair: PairFinding; readonly fix: number; readonly watch: number }
  /** with a tube open a discharge can start: at the worst of `places`; its supplies have open-circuit protection */
  | { readonly code: 'open-tube'; readonly pair: PairFinding; readonly places: number }
  | ({ readonly code: 'floating-metal' } & FloatingFinding)
  | { readonly code: 'loading'; readonly supply: string; readonly loading: Loading }
  | { readonly code: 'rule'; readonly supply: string; readonly finding: CircuitRuleFinding }
  | {
      readonly code: 'conduit'
      readonly supply: string
      readonly leads: readonly string[]
      readonly governs: string
    }
  | { readonly code: 'rules-missing'; readonly missing: readonly MissingRules[] }
  | { readonly code: 'glass-meets'; readonly tubes: readonly (readonly [string, string])[] }
  /** drawn so far into others that capacitances there are rough */
  | { readonly code: 'strained'; readonly parts: readonly string[] }
  | {
      readonly code: 'route-misfit'
      readonly leads: readonly { readonly name: string; readonly off: number }[]
    }
  | { readonly code: 'route-assumed'; readonly leads: readonly string[] }
  | { readonly code: 'off-metal'; readonly leads: readonly string[] }
  | { readonly code: 'lower-voltage'; readonly supply: string }
  /** the current at the dimmest place of the string, A, of what the supply gives */
  | {
      readonly code: 'stray'
      readonly supply: string
      readonly tube: string
      readonly least: number
      readonly given: number
      readonly tubeLength: number
      readonly onMetal: boolean
    }
  | {
      readonly code: 'frequency'
      readonly supply: string
      readonly type: SupplyType
      readonly frequency: number
    }
