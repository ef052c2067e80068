/** What the checks of a layout file share: the values, their places, and where to put problems. */
import type { KeyPath, Places } from './document.js'
import type { Facts } from './problems.js'

export interface Reading {
  readonly value: Keyed
  readonly places: Places
  readonly report: (offset: number, facts: Facts) => void
}

export type Keyed = Readonly<Record<string, unknown>>

export const isKeyed = (value: unknown): value is Keyed =>
  typeof value === 'object' && value !== null && !Array.isArray(value)

/** The entries of a list, each with its path; nothing where there is no list. */
export function entriesOf(value: unknown, path: KeyPath): { entry: unknown; path: KeyPath }[] {
  return Array.isArray(value) ? value.map((entry: unknown, i) => ({ entry, path: [...path, i] })) : []
}

/** The entries that are mappings. */
export function keyedOf(value: unknown, path: KeyPath): { entry: Keyed; path: KeyPath }[] {
  return entriesOf(value, path).flatMap(({ entry, path: at }) =>
    isKeyed(entry) ? [{ entry, path: at }] : [],
  )
}

export const keyedAt = (value: unknown): Keyed => (isKeyed(value) ? value : {})

/** An id, string entry, end or name as text: whole numbers count as their digits. */
export function nameText(value: unknown): string | undefined {
  if (typeof value === 'string') return value
  if (typeof value !== 'number' || !Number.isFinite(value)) return undefined
  return Object.is(value, -0) ? '-0' : String(value)
}

/** Metres in a length of the file. */
export const metresPerUnit = (units: unknown): number => (units === 'in' ? 0.0254 : 0.001)

/** Every circuit of the file's wiring and of the variants. */
export const wirings = (value: Keyed): { entry: Keyed; path: KeyPath }[] => [
  ...keyedOf(value.circuits, ['circuits']),
  ...keyedOf(value.variants, ['variants']).flatMap(({ entry, path }) =>
    keyedOf(entry.circuits, [...path, 'circuits']),
  ),
]
