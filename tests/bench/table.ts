/** The printed table: one line a figure, its goal beside it. A figure over its goal is marked and fails nothing. */
import { least, median, quantile, type Timing } from './timing.js'

export interface Goal {
  readonly most: number
  readonly unit: string
}

const nameWidth = 46
const figureWidth = 52

export const heading = (text: string): void => console.log(`\n${text}`)

/** `value` is what the goal is about; `shown` is how it is printed. */
export function row(name: string, shown: string, value?: number, goal?: Goal): void {
  const verdict =
    value === undefined || goal === undefined
      ? ''
      : `goal ≤ ${goal.most} ${goal.unit}`.padEnd(16) + (value <= goal.most ? 'ok' : 'OVER')
  console.log(`  ${name.padEnd(nameWidth)}${shown.padEnd(figureWidth)}${verdict}`.trimEnd())
}

/** A time: median, 90th percentile where there are enough runs, least, and the checksum. */
export function timeRow(name: string, of: Timing, mostMs?: number): void {
  const runs = of.sorted.length
  const tail = runs >= 20 ? `p90 ${ms(quantile(of, 0.9))}` : ''
  const check = of.checksum === 0 ? '' : `Σ ${of.checksum.toPrecision(4)}`
  const shown = `${ms(median(of))}  ${tail.padEnd(13)}min ${ms(least(of))}  ${check}`
  row(name, shown, median(of), mostMs === undefined ? undefined : { most: mostMs, unit: 'ms' })
}

/** Four figures are enough, and as many cells for each. */
export const ms = (time: number): string =>
  `${time >= 100 ? time.toFixed(0) : time >= 1 ? time.toFixed(1) : time.toFixed(3)} ms`.padStart(8)

export const ratio = (share: number): string => (share >= 10 ? share.toFixed(0) : share.toPrecision(3))
