/** What is wrong with a layout file: facts with a place. problem-text.ts says them in English. */
import { shortened } from './printable.js'
import type { formWords } from './problem-text.js'

/** A place in the text; line and column from 1, the column in UTF-16 units as editors count. */
export interface Place {
  readonly offset: number
  readonly line: number
  readonly column: number
}

/** What a value should have been; formWords says it in English. */
export type Form = keyof typeof formWords

/** A value that was found where another was expected. */
export interface Found {
  readonly kind: 'number' | 'not-finite' | 'text' | 'yes-no' | 'nothing' | 'list' | 'mapping' | 'other'
  /** the value as written, shortened; empty for lists and mappings */
  readonly text: string
}

export type PartWord = 'tube' | 'supply' | 'metal'

export type Facts =
  | { readonly code: 'file-too-big'; readonly bytes: number; readonly limit: number }
  | { readonly code: 'unreadable-character'; readonly character: number }
  | { readonly code: 'too-deep'; readonly limit: number }
  | { readonly code: 'yaml'; readonly rule: string; readonly detail: string }
  | { readonly code: 'several-documents' }
  | { readonly code: 'yaml-version'; readonly version: string }
  | { readonly code: 'empty-file' }
  | { readonly code: 'duplicate-key'; readonly key: string; readonly firstLine: number }
  | { readonly code: 'unknown-alias'; readonly name: string }
  | { readonly code: 'alias-in-itself'; readonly name: string }
  | { readonly code: 'too-many-aliases'; readonly limit: number }
  | { readonly code: 'format-version'; readonly found: Found }
  | {
      readonly code: 'missing-key'
      readonly key: string
      readonly of: string
      readonly form: Form
      /** the words it may be, where there is a choice */
      readonly choices: readonly string[]
    }
  | {
      readonly code: 'unknown-key'
      readonly key: string
      readonly nearest?: string
      readonly known: readonly string[]
    }
  | { readonly code: 'wrong-form'; readonly what: string; readonly form: Form; readonly found: Found }
  | {
      readonly code: 'not-a-choice'
      readonly what: string
      readonly found: Found
      readonly choices: readonly string[]
      /** a number would do as well */
      readonly orNumber: boolean
      readonly nearest?: string
    }
  | { readonly code: 'empty-list'; readonly what: string }
  | { readonly code: 'too-many-tubes'; readonly count: number; readonly limit: number }
  | { readonly code: 'too-many-points'; readonly limit: number }
  | {
      readonly code: 'out-of-range'
      readonly what: string
      readonly value: number
      readonly low: number
      readonly high: number
      readonly unit: string
    }
  | {
      /** one measure has to stay under another one: wall under the radius, wire under its insulation */
      readonly code: 'not-below'
      readonly what: string
      readonly value: number
      readonly limitName: string
      readonly limit: number
      readonly unit: string
    }
  | { readonly code: 'short-path'; readonly points: number }
  | { readonly code: 'no-length' }
  | { readonly code: 'tube-too-long'; readonly length: number; readonly limit: number; readonly unit: string }
  | { readonly code: 'path-data'; readonly detail: string }
  | { readonly code: 'path-data-too-long'; readonly limit: number }
  | { readonly code: 'path-data-not-finite' }
  | { readonly code: 'several-subpaths'; readonly count: number }
  | { readonly code: 'metal-kind'; readonly given: readonly string[] }
  | { readonly code: 'no-area' }
  | { readonly code: 'same-place' }
  | { readonly code: 'bad-id'; readonly id: string; readonly why: IdFault }
  | { readonly code: 'bad-name'; readonly what: string; readonly why: 'empty' | 'too-long' | 'characters' }
  | { readonly code: 'duplicate-id'; readonly id: string; readonly firstLine: number }
  | { readonly code: 'duplicate-name'; readonly name: string; readonly firstLine: number }
  | {
      readonly code: 'unknown-id'
      readonly id: string
      readonly wanted: PartWord
      /** the id exists, as another kind of part */
      readonly is?: PartWord
      readonly nearest?: string
      readonly known: readonly string[]
    }
  | { readonly code: 'bad-end'; readonly end: string; readonly part?: PartWord; readonly nearest?: string }
  | {
      readonly code: 'tube-used-twice'
      readonly tube: string
      readonly firstLine: number
      readonly wiring: string
    }
  | { readonly code: 'tube-unused'; readonly tube: string; readonly wiring: string }
  | {
      readonly code: 'supply-used-twice'
      readonly supply: string
      readonly firstLine: number
      readonly wiring: string
    }
  | { readonly code: 'never-joined'; readonly ends: readonly [string, string] }
  | { readonly code: 'duplicate-route'; readonly ends: readonly [string, string]; readonly firstLine: number }
  | { readonly code: 'not-in-circuit'; readonly end: string; readonly supply: string }
  | { readonly code: 'no-joint'; readonly end: string }
  | { readonly code: 'no-midpoint'; readonly supply: string }
  | { readonly code: 'bad-chart-key'; readonly key: string }
  | { readonly code: 'internal'; readonly detail: string }

export type IdFault = 'empty' | 'too-long' | 'characters' | 'minus' | 'dash' | 'reserved' | 'spaces'

/** Facts about a fault of the file, with its place. */
export type Problem = Facts & { readonly place: Place }

/** The value in the facts of a problem. */
export function foundIn(value: unknown): Found {
  if (value === null || value === undefined) return { kind: 'nothing', text: '' }
  if (typeof value === 'number')
    return { kind: Number.isFinite(value) ? 'number' : 'not-finite', text: String(value) }
  if (typeof value === 'string') return { kind: 'text', text: shortened(value, 40) }
  if (typeof value === 'boolean') return { kind: 'yes-no', text: String(value) }
  if (Array.isArray(value)) return { kind: 'list', text: '' }
  return { kind: typeof value === 'object' ? 'mapping' : 'other', text: '' }
}
