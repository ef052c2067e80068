/** What lies under the cursor. */
import type { MapRaster } from './map-raster.js'
import type { Cell } from './map-window.js'

/** A place on a body near a cell. */
export interface Near {
  readonly body: number
  /** path length, m */
  readonly at: number
  readonly cell: Cell
  /** from the middle of the asked cell to the middle of this one, in widths of a column */
  readonly distance: number
}

/**
 * The conductors within `radius` (widths of a column) of a cell, the nearest first; at equal distance the one nearer
 * to the viewer. A body that passes several times is listed once for each strand.
 */
export function nearestAt(raster: MapRaster, cell: Cell, radius: number): Near[] {
  const { window } = raster
  const found = passesAround(raster, cell, radius).sort((p, q) => p.distance - q.distance)
  // passes nearer along the path than the way through the circle and some bends are one strand
  const strand = 3 * (radius + window.aspect) * window.step
  const kept: Near[] = []
  for (const near of found) {
    const same = kept.some(({ body, at }) => body === near.body && Math.abs(at - near.at) < strand)
    if (!same) kept.push(near)
  }
  return kept
}

function passesAround({ window, first, body, at }: MapRaster, { column, row }: Cell, radius: number): Near[] {
  const found: Near[] = []
  const { columns, rows, aspect } = window
  const down = Math.floor(radius / aspect)
  for (let r = Math.max(0, row - down); r <= Math.min(rows - 1, row + down); r++)
    for (let c = Math.max(0, column - radius); c <= Math.min(columns - 1, column + radius); c++) {
      const distance = Math.hypot(c - column, (r - row) * aspect)
      if (distance > radius) continue
      const cell = r * columns + c
      for (let pass = first[cell]!; pass < first[cell + 1]!; pass++)
        found.push({ body: body[pass]!, at: at[pass]!, cell: { column: c, row: r }, distance })
    }
  return found
}
