/** The screen between two updates: what the terminal shows, and the grids that lie over every frame. */
import { cellChanges } from './cell-changes.js'
import { blankCells, type Cells, drawFrame, type Grid, layOver } from './cells.js'
import { styleTable } from './styles.js'

export interface CellScreen {
  /** what to send so that the terminal shows this frame and the grids; '' when nothing changed */
  update(frame: string, width: number, height: number): string
  /** lays a grid over the frames, in the order in which ids first came; undefined takes it away */
  setOverlay(id: string, grid: Grid | undefined): void
  /** the next update is the whole screen */
  forget(): void
}

export function cellScreen(): CellScreen {
  const styles = styleTable()
  const overlays = new Map<string, Grid>()
  let shown: Cells | undefined
  // the cells of the update before the last, drawn into again
  let spare: Cells | undefined

  return {
    update(frame, width, height) {
      const wanted = cleared(spare, width, height)
      drawFrame(wanted, frame, styles)
      for (const grid of overlays.values()) layOver(wanted, grid, styles)
      const known = shown?.width === width && shown.height === height ? shown : undefined
      spare = shown
      shown = wanted
      return cellChanges(known, wanted, styles)
    },
    setOverlay(id, grid) {
      if (grid) overlays.set(id, grid)
      else overlays.delete(id)
    },
    forget() {
      shown = undefined
    },
  }
}

/** The cells, wiped, or new ones where the size is another. */
function cleared(cells: Cells | undefined, width: number, height: number): Cells {
  if (cells?.width !== width || cells.height !== height) return blankCells(width, height)
  cells.glyphs.fill(' ')
  cells.styles.fill(0)
  return cells
}
