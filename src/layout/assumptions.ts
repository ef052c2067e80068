/** Collects what was taken because the file did not say it, in plain words. */
import type { Assumption } from './layout.js'

export interface Ledger {
  /** notes that `text` was taken for this part */
  assume(about: string, text: string): void
  /** one assumption for each text, with all the parts it is about, in the order they came */
  assumptions(): Assumption[]
}

const mostNamed = 8

/** `everything` is what to say instead when a text is about every tube. */
export function ledger(tubeIds: readonly string[]): Ledger {
  const parts = new Map<string, string[]>()
  const named = (about: readonly string[]): string => {
    if (about.length > 1 && about.length === tubeIds.length && about.every((id, i) => id === tubeIds[i]))
      return 'all tubes'
    return about.length > mostNamed
      ? `${about.slice(0, mostNamed).join(', ')} and ${about.length - mostNamed} more`
      : about.join(', ')
  }
  return {
    assume(about, text) {
      const known = parts.get(text)
      if (known) known.push(about)
      else parts.set(text, [about])
    },
    assumptions: () => [...parts].map(([text, about]) => ({ about: named(about), text })),
  }
}
