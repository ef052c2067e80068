/** The screen as cells: a frame of text drawn into them, and grids laid over the frame. */
import stringWidth from 'string-width'
import type { StyleTable } from './styles.js'

/** Row-major, one entry a cell. A wide character sits in its left cell; the cell to its right holds ''. */
export interface Cells {
  readonly width: number
  readonly height: number
  readonly glyphs: string[]
  /** numbers of a style table */
  readonly styles: Uint32Array
}

export interface Rectangle {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
}

/** A grid over the frame: `glyphs` and `styles` (SGR parameters, '' for none) are row-major, one entry a cell. */
export interface Grid extends Rectangle {
  readonly glyphs: readonly string[]
  readonly styles: readonly string[]
  /** screen rectangles left to the frame, for a panel in front of the grid */
  readonly holes?: readonly Rectangle[]
}

export const blankCells = (width: number, height: number): Cells => ({
  width,
  height,
  glyphs: new Array<string>(width * height).fill(' '),
  styles: new Uint32Array(width * height),
})

// a control sequence ([1] parameters, [2] final byte), a string for the terminal, or a lone escape
const escapeCode = /\x1b(?:\[([0-?]*)[ -/]*([@-~])|[\]PX^_][^\x07\x1b]*(?:\x07|\x1b\\)?|[ -~])?/y
const graphemes = new Intl.Segmenter()

/**
 * Draws a frame into blank cells. Of escape codes only SGR counts, all others and control characters are
 * dropped: nothing that stands in a layout file reaches the terminal as a command. What lies outside is cut.
 */
export function drawFrame(cells: Cells, frame: string, styles: StyleTable): void {
  let x = 0
  let y = 0
  let style = 0
  for (let i = 0; i < frame.length && y < cells.height; ) {
    const code = frame.charCodeAt(i)
    if (code === 0x0a) {
      y++
      x = 0
      i++
    } else if (code === 0x1b) {
      escapeCode.lastIndex = i
      const match = escapeCode.exec(frame)
      if (match?.[2] === 'm') style = styles.after(style, match[1]!)
      i = escapeCode.lastIndex
    } else if (isControl(code)) i++
    else if (isNarrow(code) && !mayCombine(frame.charCodeAt(i + 1))) {
      // the usual case first: one code unit, one cell
      put(cells, x++, y, frame[i]!, 1, style)
      i++
    } else {
      const end = endOfText(frame, i)
      for (const { segment } of graphemes.segment(frame.slice(i, end))) {
        const width = stringWidth(segment)
        if (width > 0) put(cells, x, y, segment, width, style)
        x += width
      }
      i = end
    }
  }
}

const isControl = (code: number): boolean => code < 0x20 || (code >= 0x7f && code < 0xa0)
// Latin and Greek letters without combining marks, arrows, mathematics, box drawing, geometric shapes
const isNarrow = (code: number): boolean => code < 0x300 || (code >= 0x2190 && code < 0x2300) || isBox(code)
const isBox = (code: number): boolean => code >= 0x2500 && code < 0x25fd

// what follows may belong to the character before it
const mayCombine = (code: number): boolean => code >= 0x300 && !isNarrow(code)

/** End of the stretch from i that has to be split into graphemes. */
function endOfText(frame: string, i: number): number {
  let end = i + 1
  while (end < frame.length && !isControl(frame.charCodeAt(end)) && !isNarrow(frame.charCodeAt(end))) end++
  return end
}

function put(cells: Cells, x: number, y: number, glyph: string, width: number, style: number): void {
  if (x + width > cells.width) return
  const at = y * cells.width + x
  for (let right = 1; right < width; right++) {
    cells.glyphs[at + right] = ''
    cells.styles[at + right] = style
  }
  cells.glyphs[at] = glyph
  cells.styles[at] = style
}

/** Lays a grid over the cells; what sticks out is cut, and so is the other half of a wide character it covers. */
export function layOver(cells: Cells, grid: Grid, styles: StyleTable): void {
  const { width, glyphs } = cells
  const left = Math.max(0, grid.x)
  const right = Math.min(width, grid.x + grid.width)
  const bottom = Math.min(cells.height, grid.y + grid.height)
  for (let y = Math.max(0, grid.y); y < bottom; y++) {
    for (let x = left; x < right; x++) {
      const from = (y - grid.y) * grid.width + x - grid.x
      if (grid.holes?.some((hole) => contains(hole, x, y))) continue
      const at = y * width + x
      // a wide character that is cut in two leaves a blank
      if (glyphs[at] === '' && x > 0 && grid.glyphs[from] !== '') glyphs[at - 1] = ' '
      if (x + 1 < width && glyphs[at + 1] === '') glyphs[at + 1] = ' '
      glyphs[at] = grid.glyphs[from] ?? ' '
      cells.styles[at] = styles.after(0, grid.styles[from] ?? '0')
    }
  }
}

const contains = (box: Rectangle, x: number, y: number): boolean =>
  x >= box.x && x < box.x + box.width && y >= box.y && y < box.y + box.height
