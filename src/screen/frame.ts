/** Where each pane lies on the screen. Cells; every row is accounted for, at any size from 40×10 up. */
import type { State } from './state.js'

export interface Box {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
}

export interface Frame {
  readonly title: Box
  readonly map: Box
  /** the worst list and the loading beside the map; stacked under it on a narrow screen */
  readonly worst: Box
  readonly loading: Box
  readonly legend: Box
  readonly readout: Box
  readonly message: Box
  readonly footer: Box
  /** always exactly two rows */
  readonly banners: Box
}

export const smallest = { columns: 40, rows: 10 }
/** nothing but a message is shown then */
export const tooSmall = ({ columns, rows }: { readonly columns: number; readonly rows: number }): boolean =>
  columns < smallest.columns || rows < smallest.rows
/** below this width the panel goes under the map */
const sideBySide = 70
const bannerRows = 2

/** The room of a long text: everything between the title and the message row. */
export const sheetBox = (columns: number, rows: number): Box => {
  const { title, message } = frame(columns, rows)
  return { x: 0, y: title.height, width: columns, height: message.y - title.height }
}

/** The frame of what is on the screen. */
export const frameOf = ({ columns, rows, present }: Pick<State, 'columns' | 'rows' | 'present'>): Frame =>
  frame(columns, rows, present.sign.wiring.circuits.length)

/** rows of the supply loading for one circuit at its fullest */
const loadingRows = 6

export function frame(columns: number, rows: number, circuits = 1): Frame {
  const box = (x: number, y: number, width: number, height: number): Box => ({
    x,
    y,
    width,
    height: Math.max(0, height),
  })
  const low = rows < 16
  const footerRows = low ? 0 : 1
  const legendRows = low ? 0 : 1
  const readoutRows = rows < 14 ? 2 : rows < 20 ? 3 : rows < 36 ? 5 : 8
  const banners = box(0, rows - bannerRows, columns, bannerRows)
  const footer = box(0, banners.y - footerRows, columns, footerRows)
  const message = box(0, footer.y - 1, columns, 1)
  const readout = box(0, message.y - readoutRows, columns, readoutRows)
  const legend = box(0, readout.y - legendRows, columns, legendRows)
  const title = box(0, 0, columns, 1)
  const body = legend.y - 1
  const fixed = { title, legend, readout, message, footer, banners }

  if (columns < sideBySide) {
    // stacked: three of the worst, one line of loading, the map takes the rest
    const roomy = body >= 13
    const loading = roomy ? 2 : 1
    const worst = roomy ? 4 : Math.max(1, Math.min(2, body - 4))
    const map = body - loading - worst
    return {
      ...fixed,
      map: box(0, 1, columns, map),
      worst: box(0, 1 + map, columns, worst),
      loading: box(0, 1 + map + worst, columns, loading),
    }
  }
  const panel = columns < 100 ? 31 : Math.min(66, Math.floor(columns * 0.38))
  const left = columns - panel
  const wanted = loadingRows * Math.max(1, Math.min(circuits, body > 24 ? 3 : 1))
  const loading = Math.max(1, Math.min(body - 4, wanted))
  return {
    ...fixed,
    map: box(0, 1, left - 1, body),
    worst: box(left, 1, panel, body - loading),
    loading: box(left, 1 + body - loading, panel, loading),
  }
}
