/** Rows of the screen as spans of text with a meaning each; colours come last. */
import { cut, padEnd, textWidth } from '../view/text-width.js'
import { type Meaning, marks, sgr, type Theme } from '../view/theme.js'

export interface Span {
  readonly text: string
  readonly as: Meaning
  /** attributes on top, as in theme.ts */
  readonly marks?: number
}
export type Line = readonly Span[]

export const span = (text: string, as: Meaning = 'text', extra = 0): Span =>
  extra === 0 ? { text, as } : { text, as, marks: extra }
export const line = (text: string, as: Meaning = 'text'): Line => [span(text, as)]
export const inverse = marks.inverse

export const lineWidth = (spans: Line): number => spans.reduce((sum, { text }) => sum + textWidth(text), 0)

/** Cut to `width` cells with a mark where something is missing, filled with blanks in the look of `fill`. */
export function fitted(spans: Line, width: number, mark: string, fill?: Span): Line {
  const kept: Span[] = []
  let left = width
  for (const one of spans) {
    const w = textWidth(one.text)
    if (w <= left) {
      kept.push(one)
      left -= w
      continue
    }
    kept.push({ ...one, text: padEnd(cut(one.text, left, mark), left) })
    left = 0
    break
  }
  return left > 0 ? [...kept, { ...(fill ?? span('')), text: ' '.repeat(left) }] : kept
}

/** The line as text with escape codes; neighbours of one look share them. */
export function lineText(spans: Line, theme: Theme): string {
  let text = ''
  let current = ''
  for (const { text: part, as, marks: extra } of spans) {
    if (part === '') continue
    const codes = sgr(theme, as, extra ?? 0)
    if (codes !== current) {
      text += current === '' ? `\x1b[${codes}m` : codes === '' ? '\x1b[0m' : `\x1b[0;${codes}m`
      current = codes
    }
    text += part
  }
  return current === '' ? text : `${text}\x1b[0m`
}

/** Left and right part on one row; the left one gives way. */
export function spread(left: Line, right: Line, width: number, mark: string): Line {
  const room = Math.max(0, width - lineWidth(right))
  return [...fitted(left, room, mark), ...fitted(right, Math.min(width, lineWidth(right)), mark)]
}
