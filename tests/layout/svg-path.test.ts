/** Lengths of flattened paths against closed forms, and forms of path data that must draw the same. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { flatPath, longestPathData, type PlanePoint } from '../../src/layout/svg-path.js'

const fine = { tolerance: 1e-6, limit: 200_000 }

function drawn(data: string, flattening = fine): readonly (readonly PlanePoint[])[] {
  const flat = flatPath(data, flattening)
  if (!flat.ok) throw new Error(`${data}: ${JSON.stringify(flat.why)}`)
  return flat.subpaths
}

const pointsOf = (data: string, flattening = fine): readonly PlanePoint[] => {
  const [points = [], ...more] = drawn(data, flattening)
  expect(more).toEqual([])
  return points
}

const lengthOf = (points: readonly PlanePoint[]): number =>
  points.slice(1).reduce((sum, [x, y], i) => sum + Math.hypot(x - points[i]![0], y - points[i]![1]), 0)

const whyNot = (data: string, flattening = fine) => {
  const flat = flatPath(data, flattening)
  return flat.ok ? undefined : flat.why
}

describe('lengths agree with closed forms', () => {
  // chords are shorter than their curve by at most the square of the turn between them / 24
  const near = (data: string, length: number) => expect(lengthOf(pointsOf(data)) / length).toBeCloseTo(1, 6)

  it('a circle of two half arcs is 2πr', () =>
    near('M 110 50 A 60 60 0 0 1 -10 50 A 60 60 0 0 1 110 50', 120 * Math.PI))
  it('a quarter arc is πr/2, either way round', () => {
    near('M 0 0 A 40 40 0 0 1 40 40', 20 * Math.PI)
    near('M 0 0 A 40 40 0 0 0 40 40', 20 * Math.PI)
  })
  it('the large arc between the same ends is three quarters', () =>
    near('M 0 0 A 40 40 0 1 0 40 40', 60 * Math.PI))
  it('radii too small to reach become a half circle over the chord', () =>
    near('M 0 0 A 1 1 0 0 1 30 40', 25 * Math.PI))
  it('an ellipse has the perimeter of its elliptic integral, turned or not', () => {
    // 4a E(e) by the trapezium rule, which converges faster than any power for a periodic function
    const [a, b, n] = [50, 20, 2000]
    let perimeter = 0
    for (let k = 0; k < n; k++) {
      const t = (2 * Math.PI * k) / n
      perimeter += Math.hypot(a * Math.sin(t), b * Math.cos(t)) * ((2 * Math.PI) / n)
    }
    near('M 50 0 A 50 20 0 0 1 -50 0 A 50 20 0 0 1 50 0', perimeter)
    const [x, y] = [50 * Math.cos(Math.PI / 6), 50 * Math.sin(Math.PI / 6)]
    near(`M ${x} ${y} A 50 20 30 0 1 ${-x} ${-y} A 50 20 30 0 1 ${x} ${y}`, perimeter)
  })
  it('a parabola y = x² from 0 to 1 is √5/2 + asinh(2)/4, as Q and as C', () => {
    const length = Math.sqrt(5) / 2 + Math.asinh(2) / 4
    near('M 0 0 Q 0.5 0 1 1', length)
    // the same parabola with its degree raised
    near(`M 0 0 C ${1 / 3} 0 ${2 / 3} ${1 / 3} 1 1`, length)
  })
  it('a cubic with x = 3t², y = 2t³ is 2(√8 − 1)', () => near('M 0 0 C 0 0 1 0 3 2', 2 * (Math.sqrt(8) - 1)))
})

describe('every chord stays within the tolerance', () => {
  const tolerances = [0.5, 0.1, 0.05, 0.001]
  it.each(tolerances)('%f on a circle', (tolerance) => {
    const points = pointsOf('M 70 0 A 70 70 0 0 1 -70 0', { tolerance, limit: 1e5 })
    for (const [i, p] of points.slice(1).entries()) {
      const q = points[i]!
      expect(70 - Math.hypot((p[0] + q[0]) / 2, (p[1] + q[1]) / 2)).toBeLessThanOrEqual(
        tolerance * (1 + 1e-9),
      )
      expect(Math.hypot(p[0], p[1])).toBeCloseTo(70, 9)
    }
  })
  it.each(tolerances)('%f on cubic curves', (tolerance) => {
    const coordinate = fc.integer({ min: -500, max: 500 })
    fc.assert(
      fc.property(fc.array(coordinate, { minLength: 8, maxLength: 8 }), (c) => {
        const chords = pointsOf(`M ${c[0]} ${c[1]} C ${c.slice(2).join(' ')}`, { tolerance, limit: 1e5 })
        for (let k = 0; k <= 60; k++) {
          const [t, s] = [k / 60, 1 - k / 60]
          const at = (i: number) =>
            s ** 3 * c[i]! + 3 * s * s * t * c[i + 2]! + 3 * s * t * t * c[i + 4]! + t ** 3 * c[i + 6]!
          expect(distanceTo(chords, [at(0), at(1)])).toBeLessThanOrEqual(tolerance * (1 + 1e-6) + 1e-9)
        }
      }),
      { numRuns: 20, seed: 7 },
    )
  })
})

function distanceTo(points: readonly PlanePoint[], [x, y]: PlanePoint): number {
  const pieces = points.slice(1).map(([bx, by], i) => {
    const [ax, ay] = points[i]!
    const [ux, uy] = [bx - ax, by - ay]
    const t = Math.min(1, Math.max(0, ((x - ax) * ux + (y - ay) * uy) / (ux * ux + uy * uy || 1)))
    return Math.hypot(x - ax - t * ux, y - ay - t * uy)
  })
  return Math.min(...pieces)
}

describe('different words for the same drawing', () => {
  const alike: [string, string][] = [
    ['M 10 20 L 30 40 L 50 20', 'M 10 20 l 20 20 l 20 -20'],
    ['M 10 20 L 30 40 50 20', 'm10,20 20,20,20-20'],
    ['M 10 20 L 60 20 L 60 80', 'M 10 20 H 60 V 80'],
    ['M 10 20 H 60 V 80', 'M 10 20 h 50 v 60'],
    ['M 0 0 C 10 0 20 10 20 20 C 20 30 30 40 40 40', 'M 0 0 C 10 0 20 10 20 20 S 30 40 40 40'],
    ['M 0 0 C 10 0 20 10 20 20 S 30 40 40 40', 'M 0 0 c 10 0 20 10 20 20 s 10 20 20 20'],
    ['M 0 0 Q 20 0 20 20 Q 20 40 40 40', 'M 0 0 Q 20 0 20 20 T 40 40'],
    ['M 0 0 Q 20 0 20 20 T 40 40', 'M 0 0 q 20 0 20 20 t 20 20'],
    ['M 5 5 A 40 30 20 0 1 60 45', 'M 5 5 a 40 30 20 0 1 55 40'],
    ['M 5 5 A 40 30 20 0 1 60 45', 'M 5 5 a 40 30 20 0155 40'],
    ['M 5 5 A 40 30 20 0 1 60 45', 'M 5 5 A -40 -30 20 0 1 60 45'],
    ['M 0 0 L 10 0 L 10 10 L 0 0', 'M 0 0 H 10 V 10 Z'],
    ['M 0 0 L 10 0 L 0 0', 'M 0 0 L 10 0 L 0 0 Z'],
    ['M 5 5 L 9 9', 'M 1 1 M 5 5 L 9 9 M 3 3'],
    ['M 0 0 L 7 0', 'M 0 0 A 0 5 0 0 1 7 0'],
    ['M 0 0 L 7 0', 'M 0 0 A 5 5 0 0 1 0 0 L 7 0'],
    ['M 1000 0 L .5 0', 'M 1e3 0 L 5e-1 0'],
  ]
  it.each(alike)('%s = %s', (one, other) => {
    const [a, b] = [pointsOf(one), pointsOf(other)]
    expect(b.length).toBe(a.length)
    for (const [i, [x, y]] of a.entries()) {
      expect(b[i]![0]).toBeCloseTo(x, 9)
      expect(b[i]![1]).toBeCloseTo(y, 9)
    }
  })
  it('S and T without a curve before them start straight', () => {
    expect(lengthOf(pointsOf('M 0 0 L 1 0 S 5 0 9 0'))).toBeCloseTo(9, 9)
    expect(lengthOf(pointsOf('M 0 0 L 1 0 T 9 0'))).toBeCloseTo(9, 9)
  })
  it('begins and ends exactly where the data says', () => {
    const points = pointsOf('M 220 60 V 200 A 40 40 0 0 0 300 200')
    expect(points[0]).toEqual([220, 60])
    expect(points.at(-1)).toEqual([300, 200])
  })
})

describe('subpaths', () => {
  it('a second moveto, and drawing on behind Z, begin another', () => {
    expect(drawn('M 0 0 L 1 0 M 5 5 L 6 5 m 2 2 l 1 0')).toEqual([
      [
        [0, 0],
        [1, 0],
      ],
      [
        [5, 5],
        [6, 5],
      ],
      [
        [8, 7],
        [9, 7],
      ],
    ])
    expect(drawn('M 0 0 L 4 0 L 4 4 Z l -1 -1')).toEqual([
      [
        [0, 0],
        [4, 0],
        [4, 4],
        [0, 0],
      ],
      [
        [0, 0],
        [-1, -1],
      ],
    ])
  })
  it('a move alone draws nothing', () => expect(drawn('M 3 3')).toEqual([]))
})

describe('what is refused', () => {
  it('tells the character where the data goes wrong', () => {
    expect(whyNot('M 0 0 L 1 1 X')).toMatchObject({ code: 'syntax', at: 12 })
    expect(whyNot('M 0 0 L 1 y')).toMatchObject({ code: 'syntax', at: 10 })
    expect(whyNot('L 0 0 L 1 1')).toMatchObject({ code: 'syntax' })
    expect(whyNot('M 0 0 A 1 1 0 2 0 5 5')).toMatchObject({ code: 'syntax', at: 14 })
    expect(whyNot('  ')).toMatchObject({ code: 'syntax' })
    expect(whyNot('M 0 0 R 1 1 2 2')).toMatchObject({ code: 'syntax' })
  })
  it('numbers without end', () => {
    expect(whyNot('M 0 0 L 1e999 0')).toEqual({ code: 'not-finite' })
    expect(whyNot('M 0 0 l 1e308 0 l 1e308 0')).toEqual({ code: 'not-finite' })
    expect(whyNot('M 0 0 C 1e308 0 -1e308 0 1e308 5')).toEqual({ code: 'not-finite' })
  })
  it('more points than allowed, before they are made', () => {
    expect(whyNot('M 0 0 A 1e9 1e9 0 0 1 1e9 1e9')).toEqual({ code: 'too-many-points', limit: 200_000 })
    expect(whyNot('M 0 0 L 1 0 L 2 0', { tolerance: 1, limit: 2 })).toEqual({
      code: 'too-many-points',
      limit: 2,
    })
    expect(drawn('M 0 0 L 1 0 L 2 0', { tolerance: 1, limit: 3 })).toHaveLength(1)
  })
  it('data that is too long to read', () =>
    expect(whyNot(`M 0 0${' L 1 1'.repeat(longestPathData / 6)}`)).toMatchObject({ code: 'too-long' }))
})

it('any text gives finite points or a reason', () => {
  const piece = fc.constantFrom(...'MmLlHhVvCcSsQqTtAaZzRr ,.-+e0195'.split(''))
  const data = fc.oneof(
    fc.string(),
    fc.array(piece, { maxLength: 60 }).map((p) => `M0 0${p.join('')}`),
  )
  fc.assert(
    fc.property(data, (text) => {
      const flat = flatPath(text, { tolerance: 0.05, limit: 5000 })
      if (flat.ok) expect(flat.subpaths.flat(2).every(Number.isFinite)).toBe(true)
      else expect(flat.why.code).toBeTruthy()
    }),
    { numRuns: 2000, seed: 11 },
  )
})
