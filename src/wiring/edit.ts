/** What an edit works on and what it answers. */
import type { EndName, Layout, Wiring } from '../layout/layout.js'

/** The edited thing: a layout with the wiring on screen (layout.wiring is the one of the file). */
export interface Sign {
  readonly layout: Layout
  readonly wiring: Wiring
}

export type Refusal =
  | { readonly code: 'no-such-part'; readonly part: string }
  | { readonly code: 'nothing-to-change'; readonly what: string }
  | { readonly code: 'same-tube'; readonly tube: string }
  | { readonly code: 'both-terminals'; readonly supply: string }
  | { readonly code: 'other-circuit'; readonly ends: readonly [EndName, EndName] }
  | { readonly code: 'out-of-range'; readonly what: string; readonly allowed: string }
  | { readonly code: 'only-tube'; readonly supply: string }
  /** taken away, the tube would leave its circuit empty */
  | { readonly code: 'empty-circuit'; readonly supply: string; readonly tube: string }
  /** not a joint between two tubes of one circuit */
  | { readonly code: 'no-joint'; readonly end: EndName }
  | { readonly code: 'no-midpoint'; readonly supply: string }
  /** a joint goes back to the midpoint of this supply in a variant */
  | {
      readonly code: 'midpoint-used'
      readonly supply: string
      readonly end: EndName
      readonly variant: string
    }

export type Edit<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly why: Refusal }

export const done = <T>(value: T): Edit<T> => ({ ok: true, value })
export const refused = <T>(why: Refusal): Edit<T> => ({ ok: false, why })
