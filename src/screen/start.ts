/** The state that the inspector opens with: the file's wiring on paper, its solution asked for. */
import { type LayoutFile, rulesBeside } from '../files.js'
import type { StartMode } from '../gaps/air.js'
import { inspection, prepare } from '../inspection.js'
import { defaultGlyphs } from '../view/map.js'
import type { Theme } from '../view/theme.js'
import type { State } from './state.js'

export interface StartOptions {
  readonly theme: Theme
  readonly ascii: boolean
  /** cautious unless said */
  readonly air?: StartMode
}

export function initialState(
  file: LayoutFile,
  { theme, ascii, air }: StartOptions,
  columns: number,
  rows: number,
): State {
  const prepared = prepare(file.layout, rulesBeside(file.path, file.layout.rules), air)
  const sign = { layout: file.layout, wiring: file.layout.wiring }
  const found = inspection(prepared, sign.wiring)
  return {
    columns,
    rows,
    ascii,
    opened: { path: file.path, name: file.name, source: file.source, sign },
    present: { sign, said: 'as filed' },
    past: [],
    future: [],
    prepared,
    inspection: found,
    solving: true,
    revision: 0,
    condition: 'lit',
    instant: 0,
    filter: '',
    cursor: { on: 'pair', key: undefined, side: 'a' },
    view: { glyphs: defaultGlyphs(theme.level), names: true, behind: false },
  }
}
