/** The paths of a file, checked and made straight pieces in metres. */
import type { KeyPath } from './document.js'
import type { PathPoint } from './layout.js'
import type { Facts } from './problems.js'
import { highest } from './ranges.js'
import { entriesOf, keyedOf, metresPerUnit, type Reading } from './reading.js'
import { flatPath, type PathRefusal } from './svg-path.js'

/** largest distance of a curve from its chords, m */
const flatness = 5e-5
const mostPoints = 200_000
/** farthest coordinates that are no slip of the pen, m */
const farthest = 1000
/** longest single piece of glass, m */
const longestTube = 50

/** The paths by where they stand in the file (`tubes.0.path`). */
export type Paths = ReadonlyMap<string, readonly PathPoint[]>

const pathKey = (path: KeyPath): string => path.join('.')

/** All paths of the file; undefined when they have too many points together. Faulty paths are reported and absent. */
export function flatPaths(reading: Reading): Paths | undefined {
  const paths = new Map<string, readonly PathPoint[]>()
  let room = mostPoints
  for (const { value, path, glass } of drawn(reading)) {
    const points = flattened(reading, value, path, room)
    if (points === 'too-many') return undefined
    if (!points) continue
    room -= points.length
    if (fits(reading, points, path, glass)) paths.set(pathKey(path), points)
  }
  return paths
}

interface Drawn {
  readonly value: unknown
  readonly path: KeyPath
  readonly glass: boolean
}

function drawn({ value }: Reading): Drawn[] {
  const under = (list: unknown, path: KeyPath, keys: readonly string[], glass: boolean): Drawn[] =>
    keyedOf(list, path).flatMap(({ entry, path: at }) =>
      keys.flatMap((key) =>
        Object.hasOwn(entry, key) ? [{ value: entry[key], path: [...at, key], glass }] : [],
      ),
    )
  return [
    ...under(value.tubes, ['tubes'], ['path'], true),
    ...keyedOf(value.circuits, ['circuits']).flatMap(({ entry, path }) =>
      under(entry.leads, [...path, 'leads'], ['path'], false),
    ),
    ...under(value.metal, ['metal'], ['path', 'wall'], false),
  ]
}

function flattened(
  reading: Reading,
  value: unknown,
  path: KeyPath,
  room: number,
): readonly PathPoint[] | 'too-many' | undefined {
  const { places, report } = reading
  const tooMany = (): 'too-many' => {
    report(places.value(path), { code: 'too-many-points', limit: mostPoints })
    return 'too-many'
  }
  if (typeof value === 'string') {
    const unit = metresPerUnit(reading.value.units)
    const flat = flatPath(value, { tolerance: flatness / unit, limit: room })
    if (!flat.ok) {
      if (flat.why.code === 'too-many-points') return tooMany()
      const at = flat.why.code === 'syntax' ? flat.why.at : undefined
      report(at === undefined ? places.value(path) : places.within(path, at), refusalFacts(flat.why))
      return undefined
    }
    const [points = [], ...more] = flat.subpaths
    if (more.length === 0) return points.map(([x, y]) => ({ x: x * unit, y: y * unit }))
    report(places.value(path), { code: 'several-subpaths', count: more.length + 1 })
    return undefined
  }
  if (Array.isArray(value) && value.length > room) return tooMany()
  return listedPoints(reading, value)
}

function refusalFacts(why: PathRefusal): Facts {
  switch (why.code) {
    case 'syntax':
      return { code: 'path-data', detail: why.detail }
    case 'too-long':
      return { code: 'path-data-too-long', limit: why.limit }
    case 'too-many-points':
      return { code: 'too-many-points', limit: mostPoints }
    case 'not-finite':
      return { code: 'path-data-not-finite' }
  }
}

/** The points of a list; undefined when one of them is none (its form is reported by shape.ts). */
function listedPoints({ value: file }: Reading, value: unknown): PathPoint[] | undefined {
  if (!Array.isArray(value)) return undefined
  const unit = metresPerUnit(file.units)
  const points = value.map((entry: unknown) => pointOf(entry, unit))
  const sound = points.filter((point) => point !== undefined)
  return sound.length === points.length ? sound : undefined
}

/** [x, y] or [x, y, z] in metres. */
export function pointOf(entry: unknown, unit: number): PathPoint | undefined {
  if (!Array.isArray(entry) || entry.length < 2 || entry.length > 3) return undefined
  const [x, y, z]: unknown[] = entry
  if (!finite(x) || !finite(y)) return undefined
  if (z === undefined) return { x: x * unit, y: y * unit }
  return finite(z) ? { x: x * unit, y: y * unit, z: z * unit } : undefined
}

const finite = (value: unknown): value is number => typeof value === 'number' && Number.isFinite(value)

/** Are there two points apart, near enough to be meant? */
function fits(reading: Reading, points: readonly PathPoint[], path: KeyPath, glass: boolean): boolean {
  const { places, report, value } = reading
  const [unit, unitName] = [metresPerUnit(value.units), value.units === 'in' ? 'in' : 'mm']
  if (points.length < 2) {
    report(places.value(path), { code: 'short-path', points: points.length })
    return false
  }
  const far = points.findIndex((point) => farCoordinate(point) !== undefined)
  const coordinate = far < 0 ? undefined : farCoordinate(points[far])
  if (coordinate) {
    const [what, metres, limit] = coordinate
    const range = { low: -limit / unit, high: limit / unit, unit: unitName }
    const at = places.value([...path, far])
    report(at, { code: 'out-of-range', what, value: metres / unit, ...range })
    return false
  }
  const length = points.reduce((sum, p, i) => sum + (i === 0 ? 0 : apart(p, points[i - 1] ?? p)), 0)
  if (length <= 1e-9) {
    report(places.value(path), { code: 'no-length' })
    return false
  }
  if (!glass || length <= longestTube) return true
  const facts = { length: length / unit, limit: longestTube / unit, unit: unitName }
  report(places.value(path), { code: 'tube-too-long', ...facts })
  return false
}

/** Distance of two points, m; heights count where both are given. */
export const apart = (p: PathPoint, q: PathPoint): number =>
  Math.hypot(p.x - q.x, p.y - q.y, p.z === undefined || q.z === undefined ? 0 : p.z - q.z)

/** A coordinate that is out of all bounds: its name, its value and the bound, m. */
function farCoordinate(point: PathPoint | undefined): [string, number, number] | undefined {
  if (!point) return undefined
  if (Math.abs(point.x) > farthest) return ['x', point.x, farthest]
  if (Math.abs(point.y) > farthest) return ['y', point.y, farthest]
  if (point.z !== undefined && Math.abs(point.z) > highest) return ['z', point.z, highest]
  return undefined
}

/** Reports single points that are out of all bounds (terminals). */
export function checkPoints(reading: Reading, value: unknown, path: KeyPath): PathPoint[] {
  const unit = metresPerUnit(reading.value.units)
  const unitName = reading.value.units === 'in' ? 'in' : 'mm'
  return entriesOf(value, path).flatMap(({ entry, path: at }) => {
    const point = pointOf(entry, unit)
    const far = farCoordinate(point)
    if (far) {
      const range = { low: -far[2] / unit, high: far[2] / unit, unit: unitName }
      const facts: Facts = { code: 'out-of-range', what: far[0], value: far[1] / unit, ...range }
      reading.report(reading.places.value(at), facts)
    }
    return point ? [point] : []
  })
}
