/** The answers about a sign: pairs, circuits, floating metal, cautions. V rms unless said; m, A, W. */
import type { BodyRef } from '../geometry/runs.js'
import type { Point } from '../layout/layout.js'
import type { Complex } from '../math/complex.js'

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
  /** m */
  readonly needs: number
  readonly ok: boolean
  /** how bad by this rule, where it depends on voltage: difference over the difference this gap may have */
  readonly severity?: number
  readonly advice: string
}

/** rms differences between two spots; `broken` comes with its condition */
export interface Differences {
  readonly lit?: number
  readonly litLow?: number
  readonly litHigh?: number
  /** peak of the worst instant, of the upper end of the band */
  readonly litPeak?: number
  readonly nameplate: number
}

export interface PairFinding {
  /** stable while the two spots stay the same stretch: survives edits that do not touch it */
  readonly key: string
  readonly kind: string
  readonly a: Spot
  readonly b: Spot
  readonly gap: number
  readonly difference: Differences
  /** V peak across the air of the gap (glass and coatings taken off), and the one at which a discharge starts */
  readonly air: { readonly peak: number; readonly startsAt: number; readonly outcome: string }
  readonly rules: readonly RuleFinding[]
  /** the condition the common-practice verdict was made on: nameplate where the circuit is not lit */
  readonly judgedOn: 'lit' | 'nameplate'
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
  readonly tubeLength: number
  readonly electrodePairs: number
  readonly terminals: readonly TerminalFinding[]
  readonly loadings: readonly Loading[]
  /** in string order */
  readonly tubes: readonly TubeFinding[]
  readonly leads: readonly LeadFinding[]
  readonly verdict: Verdict
}

export interface FloatingFinding {
  readonly id: string
  readonly voltage: number
  /** current through a person touching it, A */
  readonly touch: number
}

/** A caution, the most pressing first. */
export interface Caution {
  readonly level: 'danger' | 'fix' | 'watch' | 'note'
  /** what it is about, stable for tests and for those who filter */
  readonly code: string
  readonly text: string
}
