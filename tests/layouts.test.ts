import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import type { Layout, PathPoint, Point, Tube } from '../src/layout/layout.js'
import { parseLayout } from '../src/layout/parse.js'

const folder = new URL('../layouts/', import.meta.url)
const names = readdirSync(folder).filter((name) => name.endsWith('.yaml'))
const textOf = (name: string) => readFileSync(new URL(name, folder), 'utf8')
const good = names.filter((name) => name !== 'bad-file.yaml')

function layoutOf(name: string): Layout {
  const { layout, problems } = parseLayout(textOf(name), name)
  expect(problems).toEqual([])
  if (!layout) throw new Error(`${name} has no layout`)
  return layout
}

const apart = (p: Point, q: Point) => Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2])
const placed = (height: number, { x, y, z }: PathPoint): Point => [x, y, z ?? height]
const axis = (tube: Tube): Point[] => tube.path.map((p) => placed(tube.height, p))

function lengthOf(points: readonly Point[]): number {
  return points.slice(1).reduce((sum, p, i) => sum + apart(p, points[i] ?? p), 0)
}

/** Places every `step` or less along a path, each with its path length from the start. */
function stations(points: readonly Point[], step: number): { at: number; point: Point }[] {
  let at = 0
  return points.slice(1).flatMap((q, i) => {
    const p = points[i] ?? q
    const n = Math.max(1, Math.ceil(apart(p, q) / step))
    const piece = Array.from({ length: n }, (_, k) => {
      const t = (k + 0.5) / n
      const point: Point = [p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1]), p[2] + t * (q[2] - p[2])]
      return { at: at + t * apart(p, q), point }
    })
    at += apart(p, q)
    return piece
  })
}

const endPlaces = (layout: Layout): Map<string, PathPoint> =>
  new Map(
    [
      ...layout.tubes.flatMap(({ id, path }): [string, PathPoint | undefined][] => [
        [`${id}.a`, path[0]],
        [`${id}.b`, path.at(-1)],
      ]),
      ...layout.supplies.flatMap(({ id, terminals }): [string, PathPoint][] => [
        [`${id}.1`, terminals[0]],
        [`${id}.2`, terminals[1]],
      ]),
    ].flatMap(([end, place]): [string, PathPoint][] => (place ? [[end, place]] : [])),
  )

/**
 * Volts of a column and its electrodes at the supply's current: the gradient of physics.md section 3 (400 V/m near
 * 30 mm and 1000 V/m near 8 mm: German Wikipedia, "Leuchtröhre", 2006 [R]; exponent of the current and electrode
 * drop from memory [M]; ±30 %).
 */
function volts(tube: Tube, current: number): number {
  const gas = { neon: 1, 'argon-mercury': 0.83, 'neon-mercury': 0.9 }[tube.fill]
  const gradient = gas * 1000 * (0.008 / tube.diameter) ** 0.69 * (current / 0.025) ** -0.25
  return gradient * lengthOf(axis(tube)) + (tube.fill === 'neon' ? 200 : 220)
}

test('there are at least seven signs and one file of mistakes', () => {
  expect(good.length).toBeGreaterThanOrEqual(7)
  expect(names).toContain('bad-file.yaml')
})

test.each(names)('%s is short, says what it teaches, and names no path', (name) => {
  const text = textOf(name)
  expect(text.trimEnd().split('\n').length).toBeLessThanOrEqual(150)
  const top = text.slice(0, text.indexOf('\nlayout: 1'))
  expect(top.split('\n').every((line) => line.startsWith('#'))).toBe(true)
  expect(top).toContain('What it teaches: ')
})

describe.each(good)('%s', (name) => {
  test('opens, and every wiring uses every tube once', () => {
    const layout = layoutOf(name)
    const tubes = layout.tubes.map(({ id }) => id).sort()
    for (const { circuits } of [layout.wiring, ...layout.variants])
      expect(circuits.flatMap(({ string }) => string.map(({ tube }) => tube)).sort()).toEqual(tubes)
  })

  test('every route begins and ends at the ends it joins', () => {
    const layout = layoutOf(name)
    const places = endPlaces(layout)
    for (const { between, path } of layout.routes) {
      if (!path) continue
      const off = [path[0], path.at(-1)].map((p, i) => {
        const end = places.get(between[i === 0 ? 0 : 1])
        return p && end ? Math.hypot(p.x - end.x, p.y - end.y) : Number.POSITIVE_INFINITY
      })
      // drawn to 1 mm
      expect(Math.max(...off), between.join(' – ')).toBeLessThanOrEqual(0.001)
    }
  })

  test('no glass bends back on itself in a point', () => {
    for (const tube of layoutOf(name).tubes) {
      const points = axis(tube)
      points.slice(2).forEach((r, i) => {
        const [p, q] = [points[i] ?? r, points[i + 1] ?? r]
        const dot = [0, 1, 2].reduce(
          (s, k) => s + ((q[k] ?? 0) - (p[k] ?? 0)) * ((r[k] ?? 0) - (q[k] ?? 0)),
          0,
        )
        // 91°: a right angle to the back is a bend, a fold is a slip of the pen
        expect(dot, `${tube.id} at point ${i + 2}`).toBeGreaterThanOrEqual(-0.02 * apart(p, q) * apart(q, r))
      })
    }
  })

  test('no two strokes of glass share the same room', () => {
    const { tubes } = layoutOf(name)
    const step = 0.006
    const drawn = tubes.flatMap((tube) =>
      stations(axis(tube), step).map(({ at, point }) => ({ tube, at, point })),
    )
    const touching = drawn.flatMap((p, i) =>
      drawn.slice(i + 1).flatMap((q) => {
        const limit = (p.tube.diameter + q.tube.diameter) / 2
        const away = apart(p.point, q.point)
        // glass of one tube is near itself along its path; a bend of half a turn is π/2 times longer than across
        const neighbours = p.tube === q.tube && Math.abs(p.at - q.at) < 2.2 * limit
        return neighbours || away >= limit
          ? []
          : [`${p.tube.id} ${p.at.toFixed(3)} / ${q.tube.id} ${q.at.toFixed(3)}`]
      }),
    )
    expect(touching).toEqual([])
  })

  test('each supply has the voltage for its glass and is not far too large', () => {
    const layout = layoutOf(name)
    for (const { supply, string } of layout.wiring.circuits) {
      const feeding = layout.supplies.find(({ id }) => id === supply)
      if (!feeding) throw new Error(`no supply ${supply}`)
      const needed = string
        .flatMap(({ tube }) => layout.tubes.filter(({ id }) => id === tube))
        .reduce((sum, tube) => sum + volts(tube, feeding.shortCircuitCurrent), 0)
      // above 0.9 the 30 % band of the gradient has no chance; under 0.35 nobody would buy so much supply
      expect(needed / feeding.noLoadVoltage).toBeLessThan(0.9)
      expect(needed / feeding.noLoadVoltage).toBeGreaterThan(0.35)
    }
  })
})

describe('bad-file.yaml', () => {
  const name = 'bad-file.yaml'
  const text = textOf(name)
  const { layout, problems } = parseLayout(text, name)

  test('does not open, and every line marked "wrong" is reported, and no other', () => {
    const marked = text.split('\n').flatMap((line, i) => (line.includes('# wrong: ') ? [i + 1] : []))
    expect(layout).toBeUndefined()
    expect(marked.length).toBeGreaterThanOrEqual(25)
    expect([...new Set(problems.map(({ place }) => place.line))]).toEqual(marked)
  })

  test('each kind of mistake is told apart', () => {
    const at = (code: string) =>
      problems.flatMap((p) =>
        p.code === code ? [text.split('\n')[p.place.line - 1]?.trim().split(/[:,]/)[0]] : [],
      )
    expect(at('not-a-choice')).toEqual(['units', 'fill', '- {between'])
    expect(at('unknown-key')).toEqual(['face', 'rule'])
    expect(at('out-of-range')).toEqual(['tube', 'no_load_kv'])
    expect(at('missing-key')).toEqual(['- id', '- {id'])
    expect(at('unknown-id')).toEqual(['- supply', 'string'])
    expect(at('tube-used-twice')).toEqual(['string'])
    expect(at('tube-unused')).toEqual(['- {id', 'circuits'])
    expect(at('short-path').length).toBe(1)
    expect(at('path-data').length).toBe(1)
    expect(at('duplicate-id').length).toBe(1)
    expect(at('bad-end').length).toBe(1)
    expect(at('bad-chart-key').length).toBe(1)
    expect(at('metal-kind').length).toBe(1)
    expect(at('wrong-form').length).toBe(4)
  })

  test('near misses come with the word that was meant', () => {
    const meant = problems.flatMap((p) => ('nearest' in p && p.nearest !== undefined ? [p.nearest] : []))
    expect(meant).toEqual(expect.arrayContaining(['metal', 'neon', 'rules']))
  })
})
