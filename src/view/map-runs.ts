/** A map as text: plain rows, and rows of equal-looking runs ready for the terminal. */
import type { MapGrid } from './map.js'
import { type Meaning, marks, meanings, styled, type Theme } from './theme.js'

/** Neighbouring cells that look alike. */
export interface MapRun {
  readonly text: string
  readonly meaning: Meaning
  /** bits as in theme.ts */
  readonly marks: number
}

/** The characters alone, one string a row. */
export const gridText = ({ columns, rows, glyphs }: MapGrid): string[] =>
  Array.from({ length: rows }, (_, row) => glyphs.slice(row * columns, (row + 1) * columns).join(''))

/** attributes that show on an empty cell */
const visibleOnBlank = marks.underline | marks.inverse

/** The runs of one row; an empty cell joins any neighbour on which it would look the same. */
export function gridRuns(grid: MapGrid, row: number): MapRun[] {
  const runs: { text: string; look: number }[] = []
  for (let cell = row * grid.columns; cell < (row + 1) * grid.columns; cell++) {
    const glyph = grid.glyphs[cell]!
    const look = grid.meanings[cell]! + 256 * grid.marks[cell]!
    const last = runs[runs.length - 1]
    const empty = glyph === ' ' && (grid.marks[cell]! & visibleOnBlank) === 0
    const joins =
      last !== undefined && (last.look === look || (empty && !((last.look >> 8) & visibleOnBlank)))
    if (joins) last.text += glyph
    else runs.push({ text: glyph, look })
  }
  return runs.map(({ text, look }) => ({ text, meaning: meanings[look & 255]!, marks: look >> 8 }))
}

/** The rows with their colours for a terminal. */
export const styledRows = (grid: MapGrid, theme: Theme): string[] =>
  Array.from({ length: grid.rows }, (_, row) =>
    gridRuns(grid, row)
      .map(({ text, meaning, marks: extra }) => styled(theme, meaning, text, extra))
      .join(''),
  )
