/**
 * What part of the sign a map shows: world ↔ cell. World in metres, x to the right, y down; cells as columns and
 * rows, (0, 0) the outer corner of the first cell, so that cell c spans c … c + 1.
 */

export interface MapWindow {
  readonly columns: number
  readonly rows: number
  /** the place in the middle of the window, m */
  readonly x: number
  readonly y: number
  /** width of a column, m */
  readonly step: number
  /** height of a row in widths of a column */
  readonly aspect: number
  /** seen from the back: x runs to the left */
  readonly mirrored: boolean
}

/** A rectangle of the world, m. */
export interface Bounds {
  readonly left: number
  readonly top: number
  readonly right: number
  readonly bottom: number
}

export interface Cell {
  readonly column: number
  readonly row: number
}

/** a terminal's cell is about twice as tall as wide */
const cellAspect = 2
/** free cells round the fitted sign; a little more than one, so that an edge does not fall on a side of the next cell */
const margin = 1.01
/** m a column: from a speck of dust to a whole street, so that no zoom runs into rounding */
const finest = 1e-5
const coarsest = 100

const clampStep = (step: number): number => Math.min(coarsest, Math.max(finest, step))

/** The window that shows all of `bounds`, true in shape, as large as fits with a small margin. */
export function fitWindow(bounds: Bounds, columns: number, rows: number, aspect = cellAspect): MapWindow {
  const across = (bounds.right - bounds.left) / Math.max(0.5, columns - 2 * margin)
  const down = (bounds.bottom - bounds.top) / Math.max(0.5, rows - 2 * margin) / aspect
  return {
    columns,
    rows,
    x: (bounds.left + bounds.right) / 2,
    y: (bounds.top + bounds.bottom) / 2,
    step: Math.max(finest, across, down),
    aspect,
    mirrored: false,
  }
}

export const columnAt = (w: MapWindow, x: number): number =>
  (w.mirrored ? w.x - x : x - w.x) / w.step + w.columns / 2
export const rowAt = (w: MapWindow, y: number): number => (y - w.y) / (w.step * w.aspect) + w.rows / 2

/** The cell that holds a place of the world; it may lie outside the window. */
export const cellAt = (w: MapWindow, x: number, y: number): Cell => ({
  column: Math.floor(columnAt(w, x)),
  row: Math.floor(rowAt(w, y)),
})

/** The place in the middle of a cell, m. */
export function placeAt(w: MapWindow, { column, row }: Cell): { readonly x: number; readonly y: number } {
  const across = (column + 0.5 - w.columns / 2) * w.step
  return {
    x: w.mirrored ? w.x - across : w.x + across,
    y: w.y + (row + 0.5 - w.rows / 2) * w.step * w.aspect,
  }
}

export const inside = (w: MapWindow, { column, row }: Cell): boolean =>
  column >= 0 && column < w.columns && row >= 0 && row < w.rows

/** `factor` times as large; the place under the middle of `cell` stays where it is. */
export function zoomed(w: MapWindow, factor: number, cell: Cell): MapWindow {
  const still = placeAt(w, cell)
  const step = clampStep(w.step / factor)
  const share = step / w.step
  return { ...w, step, x: still.x + (w.x - still.x) * share, y: still.y + (w.y - still.y) * share }
}

/** The view moved by cells: positive shows what lies to the right and below on the screen. */
export function panned(w: MapWindow, columns: number, rows: number): MapWindow {
  const across = columns * w.step
  return { ...w, x: w.mirrored ? w.x - across : w.x + across, y: w.y + rows * w.step * w.aspect }
}

/** The same part of the sign from the other side. */
export const turnedOver = (w: MapWindow): MapWindow => ({ ...w, mirrored: !w.mirrored })

/** The same middle and scale in a window of another size. */
export const resized = (w: MapWindow, columns: number, rows: number): MapWindow => ({ ...w, columns, rows })

/** Moves the view only as far as needed for the cell of (x, y) to be `border` cells inside. */
export function revealed(w: MapWindow, x: number, y: number, border = 2): MapWindow {
  const { column, row } = cellAt(w, x, y)
  return panned(w, overshoot(column, w.columns, border), overshoot(row, w.rows, border))
}

function overshoot(at: number, size: number, border: number): number {
  const edge = Math.min(border, Math.floor((size - 1) / 2))
  if (at < edge) return at - edge
  return at > size - 1 - edge ? at - (size - 1 - edge) : 0
}
