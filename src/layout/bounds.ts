/** Are the measures of a file possible? Each against its range, and those that depend on each other. */
import { glassOf, wireOf } from './defaults.js'
import type { KeyPath } from './document.js'
import { apart, checkPoints, pointOf } from './paths.js'
import {
  inside,
  leadRanges,
  length,
  metalRanges,
  type Range,
  type Ranges,
  supplyRanges,
  tubeRanges,
} from './ranges.js'
import {
  entriesOf,
  isKeyed,
  type Keyed,
  keyedAt,
  keyedOf,
  metresPerUnit,
  type Reading,
  wirings,
} from './reading.js'

const face: Range = [0.01, 1000, length]
const chart: Range = [0.01, 1000, 'm']
const current: Range = [0.01, 2000, 'mA']

export function checkBounds(reading: Reading): void {
  const { value } = reading
  const defaults = keyedAt(value.defaults)
  within(reading, value, [], { altitude_m: [-500, 9000, 'm'] })
  for (const { entry, path } of entriesOf(keyedAt(value.face).size, ['face', 'size']))
    inRange(reading, path[2] === 0 ? 'face width' : 'face height', entry, path, face)
  within(reading, defaults.tube, ['defaults', 'tube'], tubeRanges)
  within(reading, defaults.lead, ['defaults', 'lead'], leadRanges)
  checkWall(reading, {}, ['defaults', 'tube'])
  checkWire(reading, {}, ['defaults', 'lead'])

  for (const { entry, path } of keyedOf(value.tubes, ['tubes'])) {
    within(reading, entry, path, tubeRanges)
    if (Object.hasOwn(entry, 'diameter') || Object.hasOwn(entry, 'wall')) checkWall(reading, entry, path)
  }
  for (const { entry, path } of keyedOf(value.supplies, ['supplies'])) checkSupply(reading, entry, path)
  for (const { entry, path } of wirings(value)) {
    const measured = keyedAt(entry.measured)
    within(reading, measured, [...path, 'measured'], { primary_w: [0.1, 20_000, 'W'] })
    each(reading, measured.ma, [...path, 'measured', 'ma'], current)
    for (const { entry: route, path: at } of keyedOf(entry.leads, [...path, 'leads'])) {
      within(reading, route, at, leadRanges)
      if (['conductor', 'diameter', 'bore'].some((key) => Object.hasOwn(route, key)))
        checkWire(reading, route, at)
    }
  }
  for (const { entry, path } of keyedOf(value.metal, ['metal'])) checkMetal(reading, entry, path)
}

function within(reading: Reading, values: unknown, path: KeyPath, ranges: Ranges): void {
  if (!isKeyed(values)) return
  for (const [key, range] of Object.entries(ranges)) inRange(reading, key, values[key], [...path, key], range)
}

function each(reading: Reading, values: unknown, path: KeyPath, range: Range): void {
  for (const [key, value] of Object.entries(keyedAt(values)))
    inRange(reading, key, value, [...path, key], range)
}

function inRange(reading: Reading, what: string, value: unknown, path: KeyPath, range: Range): void {
  if (typeof value !== 'number' || !Number.isFinite(value)) return
  const [scale, unit] = scaleOf(reading, range[2])
  if (inside(value, range, scale)) return
  const [low, high] = [range[0] / scale, range[1] / scale]
  reading.report(reading.places.value(path), { code: 'out-of-range', what, value, low, high, unit })
}

/** The size of the unit in which such a value stands in the file, and its name. */
function scaleOf({ value }: Reading, unit: string): [number, string] {
  if (unit !== length) return [1, unit]
  return [metresPerUnit(value.units), value.units === 'in' ? 'in' : 'mm']
}

/** Reports a measure (m) that is not under its limit, at the first of these keys that the file has. */
function below(
  reading: Reading,
  [what, metres]: readonly [string, number],
  [limitName, limit]: readonly [string, number],
  places: readonly KeyPath[],
): void {
  if (metres < limit) return
  const [scale, unit] = scaleOf(reading, length)
  const offset = reading.places.value(places[0] ?? [])
  const facts = { what, value: metres / scale, limitName, limit: limit / scale, unit }
  reading.report(offset, { code: 'not-below', ...facts })
}

const present = (entry: Keyed, path: KeyPath, keys: readonly string[]): KeyPath[] => [
  ...keys.filter((key) => Object.hasOwn(entry, key)).map((key) => [...path, key]),
  path,
]

function checkWall(reading: Reading, tube: Keyed, path: KeyPath): void {
  const { value } = reading
  const { diameter, wall } = glassOf(value, tube, metresPerUnit(value.units))
  const stated = path[0] === 'defaults' ? keyedAt(keyedAt(value.defaults).tube) : tube
  below(
    reading,
    ['wall', wall],
    ['radius of the glass', diameter / 2],
    present(stated, path, ['wall', 'diameter']),
  )
}

function checkWire(reading: Reading, route: Keyed, path: KeyPath): void {
  const { value } = reading
  const unit = metresPerUnit(value.units)
  const { conductor, diameter } = wireOf(value, route, unit)
  const stated = path[0] === 'defaults' ? keyedAt(keyedAt(value.defaults).lead) : route
  const keys = present(stated, path, ['conductor', 'diameter'])
  below(reading, ['conductor', conductor], ['diameter of the lead', diameter], keys)
  const bore = route.bore
  if (typeof bore === 'number' && Number.isFinite(bore))
    below(reading, ['the lead', diameter], ['bore of its conduit', bore * unit], [[...path, 'bore']])
}

function checkSupply(reading: Reading, supply: Keyed, path: KeyPath): void {
  const { places, report } = reading
  within(reading, supply, path, supplyRanges)
  each(reading, supply.chart_m, [...path, 'chart_m'], chart)
  const [rms, peak] = [supply.no_load_kv, supply.no_load_peak_kv]
  if (typeof rms === 'number' && typeof peak === 'number' && peak < rms) {
    const facts = { what: 'no_load_kv', value: rms, limitName: 'peak', limit: peak, unit: 'kV' }
    report(places.value([...path, 'no_load_peak_kv']), { code: 'not-below', ...facts })
  }
  const at = [...path, 'terminals']
  const [one, two] = checkPoints(reading, supply.terminals, at)
  if (one && two && apart(one, two) < 1e-6) report(places.value(at), { code: 'same-place' })
}

function checkMetal(reading: Reading, metal: Keyed, path: KeyPath): void {
  const unit = metresPerUnit(reading.value.units)
  within(reading, metal, path, metalRanges)
  const { from = 0, to } = metal
  if (typeof from === 'number' && typeof to === 'number' && Object.hasOwn(metal, 'wall'))
    below(
      reading,
      ['from', from * unit],
      ['upper edge (to)', to * unit],
      present(metal, path, ['from', 'to']),
    )
  if (!Array.isArray(metal.plate) || metal.plate.length !== 2) return
  const [one, two] = metal.plate.map((corner: unknown) => pointOf(corner, unit))
  checkPoints(reading, metal.plate, [...path, 'plate'])
  const flat = one && two && (Math.abs(one.x - two.x) < 1e-6 || Math.abs(one.y - two.y) < 1e-6)
  if (flat) reading.report(reading.places.value([...path, 'plate']), { code: 'no-area' })
}
