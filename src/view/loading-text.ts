/** How loaded a supply is, in words: for the loading pane, in `check`, in cautions and in symptom sheets. */
import type { Units } from '../layout/layout.js'
import type { Loading } from '../rules/findings.js'
import { kv, kvFigure, length, lengthFigure, ma, maFigure, metres, percent, watts } from './words.js'

interface LoadingWords {
  /** at most five letters, in front of a bar */
  readonly bar: string
  /** `5.1/8.0`, behind a bar */
  readonly barFigures: (value: number, limit: number, units: Units) => string
  /** `needs`, in a list of shares */
  readonly brief: string
  /** `needs 5.1 kV:  64 % of the no-load 8.0 kV`; `share` comes with its "of" */
  readonly row: (share: string, value: number, limit: number, units: Units) => string
  /** what the supply does, after its name */
  readonly clause: (share: string, value: number, limit: number, units: Units) => string
}

const words: Record<Loading['by'], LoadingWords> = {
  voltage: {
    bar: 'kVrms',
    barFigures: (value, limit) => `${kvFigure(value)}/${kvFigure(limit)}`,
    brief: 'needs',
    row: (share, value, limit) => `needs ${kv(value)}: ${share} the no-load ${kv(limit)}`,
    clause: (share, value, limit) =>
      `runs at ${share} its no-load voltage (${kv(value)} of ${kv(limit)} rms)`,
  },
  chart: {
    bar: 'chart',
    barFigures: (value, limit) => `${value.toFixed(1)}/${limit.toFixed(1)}m`,
    brief: 'footage',
    row: (share, value, limit) =>
      `footage ${metres(value)} with electrode pairs: ${share} the chart's ${metres(limit)}`,
    clause: (share, value, limit) =>
      `carries ${share} the maker's chart (${metres(value)} of ${metres(limit)} with electrode pairs)`,
  },
  mains: {
    bar: 'mains',
    barFigures: (value, limit) => `${value.toFixed(0)}/${limit.toFixed(0)}VA`,
    brief: 'mains input',
    row: (share, value, limit) => `mains input about ${watts(value)}: ${share} the rated ${watts(limit)}`,
    clause: (share, value, limit) =>
      `draws ${share} its rated input (about ${watts(value)} of ${watts(limit)})`,
  },
  residual: {
    bar: 'trip',
    barFigures: (value, limit) => `${maFigure(value)}/${maFigure(limit)}mA`,
    brief: 'residual',
    row: (share, value, limit) => `residual ${ma(value)}: ${share} the trip value ${ma(limit)}`,
    clause: (share, value, limit) =>
      `returns ${ma(value)} through ground: ${share} the ${ma(limit)} that trips it`,
  },
  lead: {
    bar: 'lead',
    barFigures: (value, limit, units) =>
      `${lengthFigure(value, units)}/${lengthFigure(limit, units)}${units}`,
    brief: 'lead',
    row: (share, value, limit, units) =>
      `longest output lead ${length(value, units)}: ${share} the allowed ${length(limit, units)}`,
    clause: (_, value, limit, units) =>
      `has an output lead of ${length(value, units)}; its leads allow ${length(limit, units)}`,
  },
}

export const loadingBar = (by: Loading['by']): string => words[by].bar
export const loadingFigures = ({ by, value, limit }: Loading, units: Units): string =>
  words[by].barFigures(value, limit, units)
export const loadingBriefly = ({ by, share }: Loading): string =>
  `${words[by].brief} ${percent(share)} of its limit`
/** shares stand under each other in a list */
export const loadingRow = ({ by, value, limit, share }: Loading, units: Units): string =>
  words[by].row(`${percent(share).padStart(5)} of`, value, limit, units)
export const loadingClause = ({ by, value, limit, share }: Loading, units: Units): string =>
  words[by].clause(`${percent(share)} of`, value, limit, units)
