/** Edits of what a layout says of its parts: figures of supplies, places, heights, fillings. Pure functions, as in edits.ts. */
import type { Fill, Layout, PathPoint, Supply } from '../layout/layout.js'
import { inside, type Range, supplyKeys, supplyRanges, tubeRanges } from '../layout/ranges.js'
import { metresPerUnit } from '../layout/reading.js'
import { done, type Edit, type Refusal, refused } from './edit.js'

const figureKeys = [
  'noLoadVoltage',
  'shortCircuitCurrent',
  'frequency',
  'ratedPower',
  'groundFaultTrip',
  'maxLead',
] as const

/** The figures of a supply that can be typed in. SI. */
export type SupplyFigures = Partial<Pick<Supply, (typeof figureKeys)[number] | 'grounding' | 'type'>>

/**
 * Changes nameplate figures of a supply. A peak that the maker states goes with another no-load voltage: it was stated
 * beside the old one. A supply that a variant leads back to the midpoint of keeps its midpoint.
 */
export function withSupply(layout: Layout, id: string, figures: SupplyFigures): Edit<Layout> {
  const supply = layout.supplies.find((s) => s.id === id)
  if (!supply) return refused({ code: 'no-such-part', part: id })
  for (const figure of figureKeys) {
    const value = figures[figure]
    const [key, inFile] = supplyKeys[figure]
    const range = supplyRanges[key]
    if (value !== undefined && !(Number.isFinite(value) && inside(value * inFile, range)))
      return outOfRange(figure, range)
  }
  const used = midpointUse(layout, id)
  if (used && figures.grounding !== undefined && figures.grounding !== 'midpoint') return refused(used)
  const { noLoadPeak: _, ...withoutPeak } = supply
  // a figure that was shown and not touched comes back rounded
  const { noLoadVoltage: volts = supply.noLoadVoltage } = figures
  const sameVoltage = Math.abs(volts / supply.noLoadVoltage - 1) < 1e-8
  const next: Supply = { ...(sameVoltage ? supply : withoutPeak), ...figures }
  return done({ ...layout, supplies: layout.supplies.map((s) => (s === supply ? next : s)) })
}

const outOfRange = <T>(what: string, [low, high, unit]: Range): Edit<T> =>
  refused({ code: 'out-of-range', what, allowed: `${low} to ${high} ${unit}` })

/** The first variant in which a joint goes back to the midpoint of this supply. */
function midpointUse({ variants }: Layout, supply: string): Refusal | undefined {
  for (const { name, circuits } of variants)
    for (const { supply: own, midpointReturn: end } of circuits)
      if (own === supply && end !== undefined) return { code: 'midpoint-used', supply, end, variant: name }
  return undefined
}

/** Puts the supply at another place; its two terminals keep their distance and height. */
export function withSupplyAt(layout: Layout, id: string, x: number, y: number): Edit<Layout> {
  const supply = layout.supplies.find((s) => s.id === id)
  if (!supply) return refused({ code: 'no-such-part', part: id })
  const [one, two] = supply.terminals
  const [cx, cy] = [(one.x + two.x) / 2, (one.y + two.y) / 2]
  const moved = (p: PathPoint): PathPoint => ({ ...p, x: p.x - cx + x, y: p.y - cy + y })
  const terminals: [PathPoint, PathPoint] = [moved(one), moved(two)]
  return done({ ...layout, supplies: layout.supplies.map((s) => (s.id === id ? { ...s, terminals } : s)) })
}

/** Lifts (or lowers) the centre-line of a tube to this height, m; places drawn with their own z stay. */
export function withTubeHeight(layout: Layout, id: string, height: number): Edit<Layout> {
  if (!layout.tubes.some((t) => t.id === id)) return refused({ code: 'no-such-part', part: id })
  const [low, high] = tubeRanges.height
  const inUnit = (metres: number) => Number((metres / metresPerUnit(layout.units)).toPrecision(4))
  if (!(Number.isFinite(height) && inside(height, tubeRanges.height)))
    return outOfRange('height', [inUnit(low), inUnit(high), layout.units])
  return done({ ...layout, tubes: layout.tubes.map((t) => (t.id === id ? { ...t, height } : t)) })
}

/** Refills a tube: another gas, another gradient. */
export function withTubeFill(layout: Layout, id: string, fill: Fill): Edit<Layout> {
  const tube = layout.tubes.find((t) => t.id === id)
  if (!tube) return refused({ code: 'no-such-part', part: id })
  if (tube.fill === fill)
    return refused({ code: 'nothing-to-change', what: `${id} is filled with ${fill} already` })
  return done({ ...layout, tubes: layout.tubes.map((t) => (t.id === id ? { ...t, fill } : t)) })
}
