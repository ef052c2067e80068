/** The work of a key on the screen's side, without Ink: reducer, map, lines of all panes. 120 × 40. */
import type { Frame } from '../../src/screen/frame.js'
import { frame } from '../../src/screen/frame.js'
import { lineText } from '../../src/screen/lines.js'
import { type MapPane, mapPane } from '../../src/screen/map-pane.js'
import { bannerLines, footerLine, legendLine, messageLine } from '../../src/screen/panes/edges.js'
import { loadingLines } from '../../src/screen/panes/loading.js'
import { readoutLines } from '../../src/screen/panes/readout.js'
import { titleLine } from '../../src/screen/panes/title.js'
import { worstLines } from '../../src/screen/panes/worst.js'
import { reduce } from '../../src/screen/reduce.js'
import { initialState } from '../../src/screen/start.js'
import type { State } from '../../src/screen/state.js'
import type { Theme } from '../../src/view/theme.js'
import { type BenchSign, bench } from './sign.js'
import { timeRow } from './table.js'
import { type Timing, timed } from './timing.js'

const columns = 120
const rows = 40
const theme: Theme = { level: 8, ground: 'dark' }
const keyGoalMs = 10

/** to and fro over the map, ends where it began */
export const cursorWalk = ['right', 'down', 'right', 'down', 'left', 'up', 'left', 'up'] as const

export function screenRows(sign: BenchSign): void {
  const opened = openedState(sign)
  const step = (names: readonly string[]): Timing => {
    const map = mapPane(theme)
    let state = opened
    return timed(40, 200, (run) => {
      state = reduce(state, { type: 'key', key: names[run % names.length]! }).state
      return drawn(state, map)
    })
  }
  timeRow('cursor step: reducer, map, panes', step(cursorWalk), keyGoalMs)
  timeRow('Tab step: the same', step(['tab']), keyGoalMs)
  timeRow('instant step: the same', step(['i']))
}

function openedState({ path, source, layout }: BenchSign): State {
  const first = initialState({ path, name: path, source, layout }, { theme, ascii: false }, columns, rows)
  const solved = bench(layout).solve(layout.wiring)
  return reduce(first, { type: 'solved', revision: 0, solved }).state
}

/** Draws the map and every pane; answers with the number of characters. */
function drawn(state: State, map: MapPane): number {
  const boxes: Frame = frame(columns, rows, state.present.sign.wiring.circuits.length)
  const { styles } = map.grid(state, boxes.map)
  const lines = [
    titleLine(state, columns),
    ...worstLines(state, boxes.worst.width, boxes.worst.height),
    ...loadingLines(state, boxes.loading.width, boxes.loading.height),
    legendLine(state, columns),
    ...readoutLines(state, columns, boxes.readout.height),
    messageLine(state, columns),
    footerLine(state, columns),
    ...bannerLines(state, columns),
  ]
  return lines.reduce((sum, line) => sum + lineText(line, theme).length, styles.length)
}
