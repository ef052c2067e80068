/** Text from a file made harmless: nothing of it may act on a terminal or turn the reading direction. */
import stringWidth from 'string-width'

// control, format (except the joiners that scripts need), private, unassigned, lone surrogates, line separators
const acting = /(?![\u200c\u200d])[\p{C}\p{Zl}\p{Zp}]/gu
const longestExcerpt = 100

const escaped = (character: string): string => {
  const code = character.codePointAt(0) ?? 0
  if (code === 9) return ' '
  return code < 256 ? `\\x${code.toString(16).padStart(2, '0')}` : `\\u{${code.toString(16)}}`
}

/** Every character that could act on a terminal written as a visible escape; a tab as one space. */
export const printable = (text: string): string => text.replace(acting, escaped)

/** The text with such characters taken out, for titles and names. */
export const cleaned = (text: string): string => text.replace(acting, ' ').replace(/\s+/gu, ' ').trim()

export const hasActing = (text: string): boolean => text.search(acting) >= 0

/** At most `length` characters, cut with an ellipsis. */
export const shortened = (text: string, length: number): string =>
  text.length <= length ? text : `${whole(text.slice(0, length - 1))}…`

/** A slice without halves of a character at its ends. */
const whole = (slice: string): string => slice.replace(/^[\udc00-\udfff]|[\ud800-\udbff]$/g, '')

/** The source line that holds `offset`, and a second line with a caret under that place. */
export function excerpt(source: string, offset: number): string {
  const at = Math.min(Math.max(0, offset), source.length)
  const start = source.lastIndexOf('\n', at - 1) + 1
  const newline = source.indexOf('\n', at)
  const end = newline < 0 ? source.length : newline

  // keep the caret in sight on a long line
  const from = end - start <= longestExcerpt ? start : Math.max(start, at - longestExcerpt / 2)
  const to = Math.min(end, from + longestExcerpt)
  const before = source.slice(from, at).replace(/^\ufeff/, '')
  const after = source.slice(at, to).replace(/\r$/, '')
  const head = `${from > start ? '…' : ''}${printable(from > start ? whole(before) : before)}`
  const tail = `${printable(to < end ? whole(after) : after)}${to < end ? '…' : ''}`
  return `${head}${tail}\n${' '.repeat(stringWidth(head))}^`
}
