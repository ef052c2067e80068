/** All panes of a state as they go to the screen, without Ink. */
import { type Box, frame, sheetBox } from '../../src/screen/frame.js'
import type { Line } from '../../src/screen/lines.js'
import { bannerLines, footerLine, legendLine, messageLine } from '../../src/screen/panes/edges.js'
import { loadingLines } from '../../src/screen/panes/loading.js'
import { readoutLines } from '../../src/screen/panes/readout.js'
import { sheetPage } from '../../src/screen/panes/sheets.js'
import { titleLine } from '../../src/screen/panes/title.js'
import { worstLines } from '../../src/screen/panes/worst.js'
import { type State, sheetOf } from '../../src/screen/state.js'

export interface DrawnPane {
  readonly name: string
  readonly box: Box
  readonly lines: readonly Line[]
}

export function drawnPanes(state: State): DrawnPane[] {
  const { columns, rows } = state
  const boxes = frame(columns, rows, state.present.sign.wiring.circuits.length)
  const { worst, loading, readout } = boxes
  const sheet = sheetOf(state.dialog)
  const under: DrawnPane[] = sheet
    ? [{ name: 'sheet', box: sheetBox(columns, rows), lines: sheetPage(state) }]
    : [
        { name: 'worst', box: worst, lines: worstLines(state, worst.width, worst.height) },
        { name: 'loading', box: loading, lines: loadingLines(state, loading.width, loading.height) },
        {
          name: 'legend',
          box: boxes.legend,
          lines: [legendLine(state, columns)].slice(0, boxes.legend.height),
        },
        { name: 'readout', box: readout, lines: readoutLines(state, columns, readout.height) },
      ]
  return [
    { name: 'title', box: boxes.title, lines: [titleLine(state, columns)] },
    ...under,
    { name: 'message', box: boxes.message, lines: [messageLine(state, columns)] },
    { name: 'footer', box: boxes.footer, lines: [footerLine(state, columns)].slice(0, boxes.footer.height) },
    { name: 'banners', box: boxes.banners, lines: bannerLines(state, columns) },
  ]
}

export const textOf = (line: Line): string => line.map(({ text }) => text).join('')
/** the rows of one pane as text, without trailing blanks */
export const paneText = (state: State, name: string): string[] =>
  drawnPanes(state)
    .filter((pane) => pane.name === name)
    .flatMap(({ lines }) => lines.map((line) => textOf(line).trimEnd()))
/** everything that is written on the screen beside the map */
export const allText = (state: State): string =>
  drawnPanes(state)
    .flatMap(({ lines }) => lines.map(textOf))
    .join('\n')
