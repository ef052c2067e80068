/** Long texts shown over the map: the help from the key table, and all cautions and assumptions. */
import { lawBand } from '../../network/lit.js'
import { cautionText, generalCautions } from '../../view/caution-text.js'
import { type Explanation, explanationRows } from '../../view/explanation.js'
import { endGlyphs } from '../../view/map-glyphs.js'
import { symptomSheet } from '../../view/symptoms.js'
import type { Meaning } from '../../view/theme.js'
import { why } from '../../view/why.js'
import { percent } from '../../view/words.js'
import { wrap } from '../../view/wrap.js'
import { findingInView } from '../aim.js'
import { sheetBox } from '../frame.js'
import { groupTitles, keyTable, keyText } from '../keys.js'
import { fitted, type Line, line, span } from '../lines.js'
import { freshSavings, type State, sheetOf } from '../state.js'
import { asciiOnly, dots } from './words.js'

const marksHelp: readonly string[] = [
  'Colour and glyph of the glass say its potential at the instant: = ~ - negative, o about 0, + * # positive.',
  `${endGlyphs.a} and ${endGlyphs.b} are the electrodes at ends a and b, 1 and 2 the terminals. Underlined: several conductors share the cell; the one furthest from 0 V is drawn, under the cursor the one that is read out.`,
  `Verdicts: ! fix, ~ watch, blank within the rule sets judged by; ? means the verdict flips inside the band of the gradient law: +-${percent(lawBand(undefined))}, narrower where the circuit was measured.`,
  'Condition broken: kV brk is the worst with one tube of a circuit open; the map shows one break at a time, the open tube half and half where both sides are live.',
  'x limit: the difference there over the difference this gap may have. n: not lit, judged on nameplate.',
]

/** What of the open sheet is in view, with a last row that says how much follows. */
export function sheetPage(state: State): Line[] {
  const { width, height } = sheetBox(state.columns, state.rows)
  const all = sheetLines(state, width)
  const from = Math.min(sheetOf(state.dialog)?.scroll ?? 0, lastScroll(state))
  const shown = all.slice(from, from + height - 1)
  const more = all.length - from - shown.length
  return more > 0 ? [...shown, line(`  ${more} more lines: Down, PgDn`, 'dim')] : shown
}

/** the scroll that brings the last line into view */
export function lastScroll(state: State): number {
  const { width, height } = sheetBox(state.columns, state.rows)
  return Math.max(0, sheetLines(state, width).length - height + 1)
}

function sheetLines(state: State, width: number): Line[] {
  const { dialog, inspection } = state
  const sign = { layout: state.present.sign.layout, inspection }
  switch (dialog?.kind) {
    case 'help':
      return helpLines(state, width)
    case 'why': {
      const pair = findingInView(state)
      return pair ? explanationLines(state, why(sign, pair), width) : []
    }
    case 'symptom':
      return explanationLines(state, symptomSheet(sign, dialog.symptom, freshSavings(state)), width)
    default:
      return cautionSheet(state, width)
  }
}

function explanationLines(state: State, explanation: Explanation, width: number): Line[] {
  const plain = (text: string) => (state.ascii ? asciiOnly(text) : text)
  return explanationRows(explanation, width - 1, plain).map(({ text, title }) =>
    fitted(line(text, title ? 'title' : 'text'), width, dots(state)),
  )
}

function helpLines(state: State, width: number): Line[] {
  const groups = Object.entries(groupTitles).flatMap(([group, title]) => [
    line(title, 'title'),
    ...keyTable
      .filter((entry) => entry.group === group)
      .map(
        (entry): Line => [span(`  ${entry.keys.map(keyText).join(' ').padEnd(14)}`, 'key'), span(entry.does)],
      ),
    line(''),
  ])
  const always: Line[] = [
    [span('  Esc           ', 'key'), span('take back mark, free cursor, filter; leave a dialog')],
    [span('  Ctrl-C        ', 'key'), span('leave at once')],
    [span('  Ctrl-Z        ', 'key'), span('suspend (fg comes back)')],
    line(''),
    line('Reading the screen', 'title'),
  ]
  return [...groups, ...always, ...paragraphs(marksHelp, width, 'text')].map((l) =>
    fitted(l, width, dots(state)),
  )
}

function cautionSheet(state: State, width: number): Line[] {
  const cautions = state.inspection.cautions
  const { assumed, units } = state.present.sign.layout
  const text = (s: string) => (state.ascii ? asciiOnly(s) : s)
  const lines: Line[] = [
    line('Cautions about this sign, the most pressing first', 'title'),
    ...(cautions.length === 0 ? [line('  none beyond the general ones')] : []),
    ...cautions.flatMap((c) =>
      paragraphs([text(`${c.level}: ${cautionText(c, units)}`)], width, `banner-${c.level}`),
    ),
    line(''),
    line('Always', 'title'),
    ...paragraphs(generalCautions.map(text), width, 'text'),
    line(''),
    line('Assumed, because the layout does not say', 'title'),
    ...(assumed.length === 0 ? [line('  nothing')] : []),
    ...paragraphs(
      assumed.map((a) => text(`${a.about}: ${a.text}`)),
      width,
      'text',
    ),
  ]
  return lines.map((l) => fitted(l, width, dots(state)))
}

const paragraphs = (texts: readonly string[], width: number, as: Meaning): Line[] =>
  texts.flatMap((text) =>
    wrap(text, width - 4).map((part, i) => line(`${i === 0 ? '  - ' : '    '}${part}`, as)),
  )
