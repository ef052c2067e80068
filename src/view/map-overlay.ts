/** What is laid over a map: the cursor, the two places of a pair with the line between them, a second probe. */
import { polyline } from '../geometry/polyline.js'
import type { MapGrid } from './map.js'
import { pairLineGlyph, probeGlyph } from './map-glyphs.js'
import { cellChains, withDiagonals } from './map-trace.js'
import { type Cell, cellAt, inside, type MapWindow } from './map-window.js'
import { type Meaning, marks, meaningIndex } from './theme.js'

/** A place on the drawing, m. */
export interface Place {
  readonly x: number
  readonly y: number
}

export interface Overlays {
  readonly cursor?: Cell
  readonly pair?: readonly [Place, Place]
  readonly probe?: Place
}

interface Sheet {
  readonly window: MapWindow
  readonly grid: MapGrid
  readonly glyphs: string[]
  readonly meanings: Uint8Array
  readonly marks: Uint8Array
}

/**
 * The grid with overlays. Conductors are never hidden by a line, only by a probe; the places of a pair and the cursor
 * are shown inverse, with the character that is there. The cursor lies on top.
 */
export function withOverlays(grid: MapGrid, window: MapWindow, { cursor, pair, probe }: Overlays): MapGrid {
  const glyphs = [...grid.glyphs]
  const sheet = { window, grid, glyphs, meanings: grid.meanings.slice(), marks: grid.marks.slice() }
  if (pair !== undefined) drawPair(sheet, pair)
  if (probe !== undefined) draw(sheet, cellAt(window, probe.x, probe.y), 'probe', 0, probeGlyph)
  if (cursor !== undefined) draw(sheet, cursor, undefined, marks.inverse)
  return { ...grid, glyphs, meanings: sheet.meanings, marks: sheet.marks }
}

/** Every second free cell of the straight line, then the places at its ends. */
function drawPair(sheet: Sheet, [a, b]: readonly [Place, Place]): void {
  const { window, grid } = sheet
  const line = polyline([
    [a.x, a.y, 0],
    [b.x, b.y, 0],
  ])
  for (const chain of cellChains(line, window))
    withDiagonals(chain).forEach((cell, k) => {
      const free = inside(window, cell) && grid.owner[cell.row * window.columns + cell.column] === -1
      if (free && k % 2 === 1) draw(sheet, cell, 'pair', 0, pairLineGlyph)
    })
  for (const { x, y } of [a, b]) draw(sheet, cellAt(window, x, y), 'pair', marks.inverse)
}

function draw(sheet: Sheet, at: Cell, meaning: Meaning | undefined, extra: number, glyph?: string): void {
  if (!inside(sheet.window, at)) return
  const cell = at.row * sheet.window.columns + at.column
  if (glyph !== undefined) sheet.glyphs[cell] = glyph
  if (meaning !== undefined) sheet.meanings[cell] = meaningIndex(meaning)
  sheet.marks[cell]! |= extra
}
