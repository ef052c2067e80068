/** Text measured and cut in terminal cells: a wide character takes two, a combining mark none. */
import stringWidth from 'string-width'

/** Width of plain text (no escape codes), in cells. */
export const textWidth = (text: string): number =>
  /^[\x20-\x7e]*$/.test(text) ? text.length : stringWidth(text)

const graphemes = new Intl.Segmenter()

/** The text, or as much of its start as leaves room for `mark` within `width` cells. */
export function cut(text: string, width: number, mark = '…'): string {
  if (textWidth(text) <= width) return text
  const room = width - textWidth(mark)
  if (room < 0) return ''
  let start = ''
  let used = 0
  for (const { segment } of graphemes.segment(text)) {
    used += textWidth(segment)
    if (used > room) break
    start += segment
  }
  return start + mark
}

export const padEnd = (text: string, width: number): string =>
  text + ' '.repeat(Math.max(0, width - textWidth(text)))
