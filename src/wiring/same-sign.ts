/** Does a layout that was read hold the sign that was meant? */
import type { Layout } from '../layout/layout.js'
import { cleaned } from '../layout/printable.js'
import type { Sign } from './edit.js'

/** what a layout holds besides its wiring, its assumptions and the rules it is judged by */
const parts = [
  'title',
  'units',
  'altitude',
  'face',
  'tubes',
  'lead',
  'supplies',
  'metal',
  'routes',
  'variants',
] as const

/** Everything but the assumptions and the choice of rules, figures to the digits that are written. */
export const holdsSign = (read: Layout, { layout, wiring }: Sign): boolean =>
  parts.every((part) => alike(read[part], layout[part])) && alike(read.wiring.circuits, wiring.circuits)

/** figures are written with nine digits; 0.1 µm, 0.1 µA */
const close = (a: number, b: number): boolean => a === b || Math.abs(a - b) <= 1e-7 * Math.max(1, Math.abs(a))

/** Plain values, lists, maps and records in any depth; a property that is absent is undefined. */
function alike(a: unknown, b: unknown): boolean {
  if (typeof a === 'number' && typeof b === 'number') return close(a, b)
  if (typeof a === 'string' && typeof b === 'string') return a === b || cleaned(a) === cleaned(b)
  if (a instanceof Map && b instanceof Map) return alike(Object.fromEntries(a), Object.fromEntries(b))
  if (Array.isArray(a) && Array.isArray(b)) return a.length === b.length && a.every((x, i) => alike(x, b[i]))
  if (typeof a !== 'object' || typeof b !== 'object' || a === null || b === null) return a === b
  const [one, other] = [new Map(Object.entries(a)), new Map(Object.entries(b))]
  return [...new Set([...one.keys(), ...other.keys()])].every((key) => alike(one.get(key), other.get(key)))
}
