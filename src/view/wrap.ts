/** Words set in lines of at most `width` cells of a terminal; a longer word is cut. */
import { cut, textWidth } from './text-width.js'

export function wrap(text: string, width: number): string[] {
  const lines: string[] = []
  let line = ''
  for (const word of text.split(' ')) {
    const joined = line === '' ? word : `${line} ${word}`
    if (textWidth(joined) <= width) {
      line = joined
      continue
    }
    if (line !== '') lines.push(line)
    line = word
    while (textWidth(line) > width) {
      // a character wider than the room stands alone all the same
      const part = cut(line, width, '') || ([...line][0] ?? '')
      if (part === line) break
      lines.push(part)
      line = line.slice(part.length)
    }
  }
  return [...lines, line]
}
