/** `check --why` and `check --symptom`: an explanation as text, at most 100 columns. */
import type { Layout } from '../layout/layout.js'
import { standingWarning } from '../view/caution-text.js'
import { type Explanation, explanationRows } from '../view/explanation.js'
import { wrap } from '../view/wrap.js'
import { pageColumns as columns, folded } from './table.js'

export function explainedText(file: string, layout: Layout, explanation: Explanation): string {
  const lines = [
    `${layout.title || 'Untitled sign'} (${file})`,
    ...wrap(standingWarning(), columns),
    '',
    ...explanationRows(explanation, columns).map(({ text }) => text),
  ]
  return `${lines.flatMap((line) => folded(line.trimEnd(), columns)).join('\n')}\n`
}
