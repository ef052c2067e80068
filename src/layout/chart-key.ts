/** Keys of a maker's tube-length chart: a fill and the outer diameter in mm, as `neon-12` or `argon-mercury-12.7`. */
import type { ChartEntry } from './layout.js'
import { fills } from './schema.js'

/** The kind of glass that a key stands for, diameter in m; undefined where it is no such key. */
export function chartKind(key: string): Pick<ChartEntry, 'fill' | 'diameter'> | undefined {
  const fill = fills.find((one) => key.startsWith(`${one}-`))
  const diameter = fill === undefined ? '' : key.slice(fill.length + 1)
  if (fill === undefined || !/^\d+(\.\d+)?$/.test(diameter)) return undefined
  return { fill, diameter: Number(diameter) / 1000 }
}
