/** What to send so that a terminal showing one screen of cells shows another. */
import type { Cells } from './cells.js'
import type { StyleTable } from './styles.js'

/**
 * The escape codes and text that turn `shown` into `wanted` (same size); the whole screen where `shown` is
 * undefined. Neighbouring changes form one run, the pen starts and ends in the default style.
 */
export function cellChanges(shown: Cells | undefined, wanted: Cells, styles: StyleTable): string {
  const { width, height } = wanted
  let text = shown ? '' : '\x1b[m\x1b[2J'
  let pen = 0
  for (let y = 0; y < height; y++) {
    // where the cursor stands in this row, -1 while that is not known
    let cursor = -1
    for (let x = 0; x < width; x++) {
      const at = y * width + x
      if (wanted.glyphs[at] === '' || !changed(shown, wanted, at)) continue
      if (cursor !== x) text += cursor < 0 ? `\x1b[${y + 1};${x + 1}H` : skip(wanted, y, cursor, x, pen)
      text += styles.change(pen, wanted.styles[at]!) + wanted.glyphs[at]
      pen = wanted.styles[at]!
      cursor = nextCursor(wanted, x, at)
    }
  }
  return text + styles.change(pen, 0)
}

function changed(shown: Cells | undefined, wanted: Cells, at: number): boolean {
  if (!shown) return wanted.glyphs[at] !== ' ' || wanted.styles[at] !== 0
  return shown.glyphs[at] !== wanted.glyphs[at] || shown.styles[at] !== wanted.styles[at]
}

// after the last column terminals differ, after a wide or combined character they may count otherwise than we do
function nextCursor(wanted: Cells, x: number, at: number): number {
  const sure = x + 1 < wanted.width && wanted.glyphs[at + 1] !== '' && wanted.glyphs[at]!.length === 1
  return sure ? x + 1 : -1
}

/** From one column to another further right: unchanged text is repeated where that is shorter than a move. */
function skip(cells: Cells, y: number, from: number, to: number, pen: number): string {
  const start = y * cells.width + from
  const end = y * cells.width + to
  const between = cells.glyphs.slice(start, end).join('')
  const samePen = cells.styles.subarray(start, end).every((style) => style === pen)
  if (to - from <= 3 && samePen && /^[ -~]+$/.test(between) && between.length === to - from) return between
  return to - from === 1 ? '\x1b[C' : `\x1b[${to - from}C`
}
