/** What the inspector holds between two keys. Plain read-only values; the reducer makes the next one. */

import type { BodyRef } from '../geometry/runs.js'
import type { Inspection, Prepared, Solved } from '../inspection.js'
import type { Condition, PairFinding } from '../rules/findings.js'
import type { LeadSaving } from '../rules/lead-savings.js'
import type { MapWindow } from '../view/map-window.js'
import type { Symptom } from '../view/symptoms.js'
import type { Sign } from '../wiring/edit.js'
import { sameWiring } from '../wiring/edits.js'

/** The file as it was read. */
export interface Opened {
  readonly path: string
  readonly name: string
  readonly source: string
  readonly sign: Sign
}

/** A place on a body: what the cursor or a mark is on. */
export interface Foot {
  readonly body: BodyRef
  readonly at: number
}

/** On a pair of the list (one of its two places), or free on the map. */
export type Cursor =
  | { readonly on: 'pair'; readonly key: string | undefined; readonly side: 'a' | 'b' }
  | { readonly on: 'map'; readonly x: number; readonly y: number; readonly pick: number }

/** What an edit replaces, kept until the new solution is there so that before and after can be told. */
export interface Pending {
  readonly said: string
  readonly before: Inspection
}

export interface Step {
  readonly sign: Sign
  /** what led to this sign */
  readonly said: string
}

export type PromptKind =
  | { readonly for: 'filter' }
  | { readonly for: 'tube-height'; readonly tube: string }
  | { readonly for: 'variant-name' }
  | { readonly for: 'supply-figure'; readonly supply: string; readonly figure: SupplyFigure }

export type SupplyFigure = 'no_load_kv' | 'short_circuit_ma' | 'frequency_hz'

export type PickKind =
  | { readonly for: 'variant' }
  | { readonly for: 'link'; readonly circuit: number }
  | { readonly for: 'supply' }
  | { readonly for: 'supply-figure'; readonly supply: string }
  | { readonly for: 'supply-type'; readonly supply: string }
  | { readonly for: 'grounding'; readonly supply: string }
  | { readonly for: 'fill'; readonly tube: string }
  | { readonly for: 'symptom' }
  | { readonly for: 'circuit'; readonly tube: string }

export interface Choice {
  readonly label: string
  readonly value: string
}

export type Dialog =
  | { readonly kind: 'prompt'; readonly prompt: PromptKind; readonly title: string; readonly text: string }
  | {
      readonly kind: 'pick'
      readonly pick: PickKind
      readonly title: string
      readonly choices: readonly Choice[]
    }
  | { readonly kind: 'help'; readonly scroll: number }
  | { readonly kind: 'cautions'; readonly scroll: number }
  | { readonly kind: 'why'; readonly scroll: number }
  | { readonly kind: 'symptom'; readonly symptom: Symptom; readonly scroll: number }
  | { readonly kind: 'quit' }
  /** `thenQuit`: the save was asked for on the way out */
  | { readonly kind: 'overwrite'; readonly thenQuit: boolean }

/** A long text that takes the place of the panes and can be scrolled. */
export type SheetDialog = Extract<Dialog, { readonly scroll: number }>
export const sheetOf = (dialog: Dialog | undefined): SheetDialog | undefined =>
  dialog && 'scroll' in dialog ? dialog : undefined

export interface Message {
  readonly text: string
  readonly level: 'good' | 'plain' | 'bad'
}

export interface MapView {
  /** absent: the whole sign, fitted */
  readonly window?: MapWindow
  readonly glyphs: 'stroke' | 'level'
  readonly names: boolean
  readonly behind: boolean
}

export interface State {
  readonly columns: number
  readonly rows: number
  readonly ascii: boolean
  readonly opened: Opened
  readonly present: Step
  readonly past: readonly Step[]
  readonly future: readonly Step[]
  readonly prepared: Prepared
  /** of the present sign; while `solving`, lit figures are those of the wiring before */
  readonly inspection: Inspection
  readonly solved?: Solved
  readonly solving: boolean
  /** what laying the output leads otherwise gives back, and for which revision */
  readonly savings?: { readonly revision: number; readonly list: readonly LeadSaving[] }
  /** counts signs shown; an answer for an older one is dropped */
  readonly revision: number
  readonly condition: Condition
  /** the tube that is open on the map in condition broken; absent: the first of the first string */
  readonly open?: string
  /** of twelve steps of 30 degrees */
  readonly instant: number
  readonly filter: string
  readonly cursor: Cursor
  readonly mark?: Foot
  readonly view: MapView
  readonly dialog?: Dialog
  readonly message?: Message
  readonly pending?: Pending
}

/** What the reducer asks the world to do. */
export type Effect =
  | { readonly do: 'solve' }
  /** solve again, with what laying the output leads otherwise would give back */
  | { readonly do: 'lay-leads' }
  /** `thenQuit`: where it is saved, the program ends */
  | { readonly do: 'save'; readonly force: boolean; readonly thenQuit: boolean }
  | { readonly do: 'quit' }
  | { readonly do: 'suspend' }

export interface Next {
  readonly state: State
  readonly effects: readonly Effect[]
}

export const stay = (state: State): Next => ({ state, effects: [] })
export const say = (state: State, text: string, level: Message['level'] = 'plain'): Next =>
  stay({ ...state, message: { text, level } })

/** the sign on screen says something else than the file */
export const unsaved = ({ present, opened }: Pick<State, 'present' | 'opened'>): boolean =>
  present.sign.layout !== opened.sign.layout || !sameWiring(present.sign.wiring, opened.sign.wiring)

/** savings of the sign on screen, where they are known */
export const freshSavings = ({ savings, revision }: State): readonly LeadSaving[] | undefined =>
  savings?.revision === revision ? savings.list : undefined

/** The pairs that pass the filter, worst first. */
export function listedPairs({
  inspection,
  filter,
}: Pick<State, 'inspection' | 'filter'>): readonly PairFinding[] {
  if (filter === '') return inspection.pairs
  const wanted = filter.toLowerCase()
  return inspection.pairs.filter((p) => {
    const names = p.a.part === p.b.part ? `${p.a.part} itself` : `${p.a.part} ${p.b.part}`
    return `${names} ${p.kind} ${p.verdict} ${p.governs}`.toLowerCase().includes(wanted)
  })
}

/** The pair the cursor is on: by its key, else the worst. */
export function selectedPair(state: State): { pair: PairFinding; index: number } | undefined {
  const pairs = listedPairs(state)
  const { cursor } = state
  const found = cursor.on === 'pair' ? pairs.findIndex((p) => p.key === cursor.key) : -1
  const index = Math.max(0, found)
  const pair = pairs[index]
  return pair && { pair, index }
}
