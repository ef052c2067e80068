import { describe, expect, it } from 'vitest'
import { closestApproach } from '../../src/geometry/closest-approach.js'
import { polyline } from '../../src/geometry/polyline.js'
import {
  type CutRules,
  crossingWindows,
  cutPlaces,
  pathBetween,
  segmentsAt,
} from '../../src/geometry/segments.js'
import type { Point } from '../../src/layout/layout.js'

const rules: CutRules = { usual: 3.5, least: 1.1, plane: false }
const radius = 0.006
const body = (path: readonly Point[]) => ({
  line: polyline(path),
  equivalentRadius: radius,
  outerRadius: radius,
})
const cut = (path: readonly Point[], more: Partial<CutRules> = {}) => {
  const all = { ...rules, ...more }
  return cutPlaces(polyline(path), radius, all.usual * radius, all)
}
const bow: Point[] = Array.from({ length: 41 }, (_, k) => [
  0.02 * Math.cos((k * Math.PI) / 40),
  0.02 * Math.sin((k * Math.PI) / 40),
  0,
])

describe('cutting a path', () => {
  it('shares a straight path out evenly, near the usual length', () => {
    const places = cut([
      [0, 0, 0],
      [0.21, 0, 0],
    ])
    expect(places).toHaveLength(11)
    places.forEach((s, k) => {
      expect(s).toBeCloseTo(0.021 * k, 9)
    })
  })
  it('cuts at sharp corners', () => {
    expect(
      cut([
        [0, 0, 0],
        [0.1, 0, 0],
        [0.1, 0.05, 0],
      ]),
    ).toContain(0.1)
  })
  it('cuts bends finer, and no piece is shorter than the least', () => {
    const places = cut(bow)
    expect(places.length).toBeGreaterThan(Math.ceil((0.02 * Math.PI) / (3.5 * radius)) + 1)
    for (let k = 1; k < places.length; k++)
      expect(places[k]! - places[k - 1]!).toBeGreaterThanOrEqual(1.1 * radius - 1e-12)
  })
  it('keeps a path shorter than one radius whole', () => {
    expect(
      cut([
        [0, 0, 0],
        [0.002, 0, 0],
      ]),
    ).toEqual([0, 0.002])
  })
  it('cuts where the path goes through a metal face, and holds both parts clear of it', () => {
    const plane = { ...rules, plane: true }
    const path: Point[] = [
      [0, 0, 0.05],
      [0, 0, -0.05],
    ]
    const places = cut(path, plane)
    expect(places.some((s) => Math.abs(s - 0.05) < 1e-12)).toBe(true)
    const s = segmentsAt([body(path)], [places], plane)
    expect(new Set(s.side)).toEqual(new Set([1, -1]))
    for (let i = 0; i < s.count; i++) {
      for (const end of [0, 1]) {
        const z = s.lines[7 * i + 2]! + end * s.lines[7 * i + 6]! * s.lines[7 * i + 5]!
        expect(s.side[i]! * z).toBeGreaterThan(radius - 1e-12)
      }
    }
  })
})

describe('segments', () => {
  it('carry frames at right angles', () => {
    const s = segmentsAt(
      [
        body(bow),
        body([
          [0, 0, 0],
          [0, 0, 1],
        ]),
      ],
      [cut(bow), [0, 0.5, 1]],
      rules,
    )
    const dot = (a: Float64Array, i: number, b: Float64Array, j: number) =>
      a[i]! * b[j]! + a[i + 1]! * b[j + 1]! + a[i + 2]! * b[j + 2]!
    for (let i = 0; i < s.count; i++) {
      expect(dot(s.frames, 6 * i, s.frames, 6 * i)).toBeCloseTo(1, 12)
      expect(dot(s.frames, 6 * i + 3, s.frames, 6 * i + 3)).toBeCloseTo(1, 12)
      expect(dot(s.frames, 6 * i, s.frames, 6 * i + 3)).toBeCloseTo(0, 12)
      expect(dot(s.frames, 6 * i, s.lines, 7 * i + 3)).toBeCloseTo(0, 12)
    }
  })
  it('count the shorter way round a closed path', () => {
    const ring: Point[] = [
      [0, 0, 0],
      [1, 0, 0],
      [1, 1, 0],
      [0, 1, 0],
      [0, 0, 0],
    ]
    const s = segmentsAt([body(ring)], [[0, 1, 2, 3, 4]], rules)
    expect(pathBetween(s, 0, 3)).toBeCloseTo(1, 12)
  })
  it('are refined where two bodies cross steeply and closely, not where they run side by side', () => {
    const windows = (second: readonly Point[]) => {
      const bodies = [
        body([
          [-0.1, 0, 0],
          [0.1, 0, 0],
        ]),
        body(second),
      ]
      const s = segmentsAt(
        bodies,
        bodies.map((b) => cutPlaces(b.line, radius, 0.021, rules)),
        rules,
      )
      return crossingWindows(s, s, 2, rules)
    }
    expect(
      windows([
        [0, -0.1, 0.014],
        [0, 0.1, 0.014],
      ]).every((w) => w.length > 0),
    ).toBe(true)
    expect(
      windows([
        [-0.1, 0, 0.014],
        [0.1, 0, 0.014],
      ]).every((w) => w.length === 0),
    ).toBe(true)
    expect(
      windows([
        [0, -0.1, 0.05],
        [0, 0.1, 0.05],
      ]).every((w) => w.length === 0),
    ).toBe(true)
  })
})

describe('nearest places of two segments', () => {
  const line = (p: Point, u: Point, length: number) => Float64Array.of(...p, ...u, length)
  const between = (a: Float64Array, b: Float64Array) => closestApproach(a, 0, b, 0, new Float64Array(6))
  it.each([
    ['crossing', line([-1, 0, 0], [1, 0, 0], 2), line([0, -1, 0.3], [0, 1, 0], 2), 0.3],
    ['end to side', line([0, 0, 0], [1, 0, 0], 2), line([1, 0.5, 0], [0, 1, 0], 1), 0.5],
    ['end to end', line([0, 0, 0], [1, 0, 0], 1), line([4, 4, 0], [0, 1, 0], 1), 5],
    ['side by side', line([0, 0, 0], [1, 0, 0], 1), line([0.9, 0, 0.2], [-1, 0, 0], 1), 0.2],
    ['on one line', line([0, 0, 0], [1, 0, 0], 1), line([1.25, 0, 0], [1, 0, 0], 1), 0.25],
  ])('%s', (_, a, b, distance) => {
    expect(between(a, b)).toBeCloseTo(distance, 12)
    expect(between(b, a)).toBeCloseTo(distance, 12)
  })
})
