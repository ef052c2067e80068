/** Text in columns, for `check`. Widths are those of a terminal. */
import { textWidth } from '../view/text-width.js'
import { wrap } from '../view/wrap.js'

/** of every text that is not for the full screen */
export const pageColumns = 100
/** least width a cell is cut down to */
const narrowest = 6

/**
 * Lines of a table, the first row its head; columns of figures to the right, everything else to the left. Where it
 * would be wider than `width`, the names in the columns `names` lose their middle, the longest first.
 */
export function table(
  rows: readonly (readonly string[])[],
  width: number,
  names: readonly number[] = [0],
): string[] {
  const widths = rows[0]!.map((_, c) => Math.max(...rows.map((r) => textWidth(r[c] ?? ''))))
  const figures = rows[0]!.map(
    (_, c) => c > 0 && rows.slice(1).every((r) => /^[-+>\d.–/ m%]*$|^nameplate$/.test(r[c] ?? '')),
  )
  const wide = () => widths.reduce((sum, w) => sum + w + gap.length, 0)
  while (wide() > width) {
    const widest = names.reduce((best, c) => (widths[c]! > widths[best]! ? c : best), names[0] ?? 0)
    if (widths[widest]! <= narrowest) break
    widths[widest]!--
  }
  return rows.map((row) =>
    row
      .map((cell, c) => {
        const text = withoutMiddle(cell, widths[c]!)
        const room = ' '.repeat(widths[c]! - textWidth(text))
        return gap + (figures[c] ? room + text : text + room)
      })
      .join('')
      .trimEnd(),
  )
}

const gap = '  '

/** A name of at most `width` columns: `window…left.b` keeps what tells it from its neighbours at both ends. */
export function withoutMiddle(text: string, width: number): string {
  if (textWidth(text) <= width) return text
  const glyphs = [...text]
  let [head, tail] = [Math.ceil(glyphs.length / 2), Math.floor(glyphs.length / 2)]
  const cut = () => `${glyphs.slice(0, head).join('')}…${glyphs.slice(glyphs.length - tail).join('')}`
  while (head + tail > 0 && textWidth(cut()) > width) {
    if (head > tail) head--
    else tail--
  }
  return cut()
}

/** A line set in several where it is too long; the later ones stand deeper. */
export function folded(line: string, width: number): string[] {
  if (textWidth(line) <= width) return [line]
  const indent = /^ */.exec(line)?.[0] ?? ''
  const [first = '', ...rest] = wrap(line.slice(indent.length), width - indent.length)
  const deeper = wrap(rest.join(' '), width - indent.length - 2)
  return [`${indent}${first}`, ...deeper.map((l) => `${indent}  ${l}`)]
}
