/** A longer text of titled parts, derivations and symptoms: the same on the screen and from `check`. */
import { wrap } from './wrap.js'

export interface ExplanationPart {
  readonly title: string
  /** one to three sentences each, not wrapped */
  readonly lines: readonly string[]
}

export interface Explanation {
  readonly head: string
  readonly parts: readonly ExplanationPart[]
}

export interface ExplanationRow {
  readonly text: string
  readonly title: boolean
}

/** Rows of at most `columns` characters; `plain` is what each line goes through first. */
export function explanationRows(
  { head, parts }: Explanation,
  columns: number,
  plain: (text: string) => string = (text) => text,
): ExplanationRow[] {
  const title = (text: string): ExplanationRow[] =>
    wrap(plain(text), columns).map((part) => ({ text: part, title: true }))
  const bullet = (text: string): ExplanationRow[] =>
    wrap(plain(text), columns - 4).map((part, i) => ({
      text: `${i === 0 ? '  - ' : '    '}${part}`,
      title: false,
    }))
  const blank = { text: '', title: false }
  return [
    ...title(head),
    ...parts.flatMap((part) => [blank, ...title(part.title), ...part.lines.flatMap(bullet)]),
  ]
}
