/** Bits of text that several panes share. */
import { sameWiring } from '../../wiring/edits.js'
import type { State } from '../state.js'

export const dots = ({ ascii }: Pick<State, 'ascii'>): string => (ascii ? '..' : '…')

/** Pure-ASCII mode: every sign that is not ASCII has a stand-in. */
const standIns: Record<string, string> = {
  '–': '-',
  µ: 'u',
  '—': '-',
  '→': '>',
  '°': ' deg',
  '·': '|',
  '…': '~',
  '×': 'x',
  '≤': '<=',
  '≥': '>=',
  '±': '+-',
  '│': '|',
  '█': '#',
  '▌': '#',
  '░': '.',
}
export const asciiOnly = (text: string): string =>
  // biome keeps control characters out of patterns: say what is printable instead
  text.replace(/[^\x20-\x7e]/g, (sign) => standIns[sign] ?? '?')

/** The name of the variant whose wiring is on the screen. */
export function activeVariant({ present }: Pick<State, 'present'>): string | undefined {
  const { layout, wiring } = present.sign
  return layout.variants.find((v) => sameWiring(v, wiring))?.name
}
