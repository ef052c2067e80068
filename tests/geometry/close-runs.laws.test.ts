import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { defaultReach, fixedRuns, leadLeadRuns, leadRuns } from '../../src/geometry/close-runs.js'
import type { FixedBody, Polyline } from '../../src/geometry/conductors.js'
import { distance, pointAt, polyline } from '../../src/geometry/polyline.js'
import type { CloseRun } from '../../src/geometry/runs.js'
import type { Point } from '../../src/layout/layout.js'
import { barBody, leadOf, noFace, seeded, tubeBody, wandering } from './signs.js'

const grounded = { face: { metal: 'grounded', size: [0.3, 0.3] } } as const
const least = (run: CloseRun): number => Math.min(...run.gap)
const indexOf = (run: CloseRun, side: 'a' | 'b'): number => {
  const ref = run[side]
  return ref.kind === 'face' ? -1 : ref.index
}

interface Minimum {
  readonly s: number
  readonly t: number
  readonly d: number
}

/**
 * The slow obvious way: distances on a grid of places on both paths, every grid place that no neighbour undercuts
 * and that no way rising under 0.2 mm leads down from, each then followed downhill by ever smaller steps.
 */
function gridMinima(a: Polyline, b: Polyline, self: boolean, most: number): Minimum[] {
  const steps = 0.002
  const na = Math.ceil(a.length / steps)
  const nb = Math.ceil(b.length / steps)
  const on = (line: Polyline, n: number) =>
    Array.from({ length: n + 1 }, (_, i) => pointAt(line, (line.length * i) / n))
  const pa = on(a, na)
  const pb = on(b, nb)
  const d = (i: number, j: number): number =>
    i < 0 || j < 0 || i > na || j > nb ? Infinity : distance(pa[i]!, pb[j]!)
  const minima: Minimum[] = []
  for (let i = 0; i <= na; i++) {
    for (let j = 0; j <= nb; j++) {
      const here = d(i, j)
      const near = self && (b.length * j) / nb - (a.length * i) / na <= 3 * here
      if (near || here > most + steps || isUndercut(d, i, j, here) || !standsOut(d, i, j, here)) continue
      const found = downhill(a, b, (a.length * i) / na, (b.length * j) / nb, steps)
      const apart = !self || found.t - found.s > 3 * found.d + 2 * steps
      if (found.d < most && apart) minima.push(found)
    }
  }
  return minima
}

function isUndercut(d: (i: number, j: number) => number, i: number, j: number, here: number): boolean {
  for (let di = -1; di <= 1; di++) {
    for (let dj = -1; dj <= 1; dj++) if (d(i + di, j + dj) < here) return true
  }
  return false
}

/** Whether every way from a grid place to a lower one rises by 0.2 mm or more. */
function standsOut(d: (i: number, j: number) => number, i0: number, j0: number, here: number): boolean {
  const seen = new Set([`${i0} ${j0}`])
  const todo = [[i0, j0] as const]
  for (let next = todo.pop(); next !== undefined; next = todo.pop()) {
    for (const [di, dj] of [
      [1, 0],
      [-1, 0],
      [0, 1],
      [0, -1],
      [1, 1],
      [-1, -1],
      [1, -1],
      [-1, 1],
    ] as const) {
      const [i, j] = [next[0] + di, next[1] + dj]
      if (d(i, j) < here) return false
      if (d(i, j) > here + 2e-4 || seen.has(`${i} ${j}`)) continue
      seen.add(`${i} ${j}`)
      todo.push([i, j])
    }
  }
  return true
}

function downhill(a: Polyline, b: Polyline, s0: number, t0: number, step0: number): Minimum {
  const clamp = (value: number, line: Polyline): number => Math.min(line.length, Math.max(0, value))
  let best = { s: s0, t: t0, d: distance(pointAt(a, s0), pointAt(b, t0)) }
  for (let step = step0; step > 1e-6; ) {
    let better = best
    for (let k = 0; k < 16; k++) {
      const s = clamp(best.s + step * Math.cos((k * Math.PI) / 8), a)
      const t = clamp(best.t + step * Math.sin((k * Math.PI) / 8), b)
      const d = distance(pointAt(a, s), pointAt(b, t))
      if (d < better.d - 1e-12) better = { s, t, d }
    }
    if (better === best) step /= 2
    best = better
  }
  return best
}

/** Whether some sample is as near as this minimum to 0.1 mm, and in the same place to 6 mm. */
const isListed = (runs: readonly CloseRun[], { s, t, d }: Minimum, radii: number): boolean =>
  runs.some((run) =>
    [...run.gap].some(
      (gap, i) =>
        gap <= Math.max(0, d - radii) + 1e-4 &&
        Math.abs(run.atA[i]! - s) < 0.006 &&
        Math.abs(run.atB[i]! - t) < 0.006,
    ),
  )

describe('against distances on a grid', () => {
  it('no local minimum of two wandering tubes is missed', () => {
    const random = seeded(11)
    let seen = 0
    for (let round = 0; round < 25; round++) {
      const bodies = [tubeBody('K', wandering(random, 4)), tubeBody('I', wandering(random, 5))]
      const runs = fixedRuns(bodies, noFace).filter((run) => indexOf(run, 'a') !== indexOf(run, 'b'))
      for (const minimum of gridMinima(bodies[0]!.line, bodies[1]!.line, false, defaultReach + 0.012)) {
        seen++
        expect(isListed(runs, minimum, 0.012), JSON.stringify({ round, minimum })).toBe(true)
      }
    }
    expect(seen).toBeGreaterThan(100)
  })

  it('no local minimum of a wandering tube with itself is missed', () => {
    const random = seeded(12)
    let seen = 0
    for (let round = 0; round < 15; round++) {
      const body = tubeBody('K', wandering(random, 6))
      const runs = fixedRuns([body], noFace)
      for (const minimum of gridMinima(body.line, body.line, true, defaultReach + 0.012)) {
        seen++
        expect(isListed(runs, minimum, 0.012), JSON.stringify({ round, minimum })).toBe(true)
      }
    }
    expect(seen).toBeGreaterThan(30)
  })

  it('every sample lies on both paths, at the gap it says, within reach', () => {
    const random = seeded(13)
    for (let round = 0; round < 20; round++) {
      const bodies = [
        tubeBody('K', wandering(random, 6)),
        tubeBody('I', wandering(random, 6), 0.015),
        barBody('r', wandering(random, 2)),
      ]
      for (const run of fixedRuns(bodies, noFace)) {
        const a = bodies[indexOf(run, 'a')]!
        const b = bodies[indexOf(run, 'b')]!
        for (const [i, gap] of run.gap.entries()) {
          const p = pointAt(a.line, run.atA[i]!)
          const q = pointAt(b.line, run.atB[i]!)
          expect(
            distance(p, [run.pointA[3 * i]!, run.pointA[3 * i + 1]!, run.pointA[3 * i + 2]!]),
          ).toBeLessThan(1e-12)
          expect(
            distance(q, [run.pointB[3 * i]!, run.pointB[3 * i + 1]!, run.pointB[3 * i + 2]!]),
          ).toBeLessThan(1e-12)
          expect(Math.abs(Math.max(0, distance(p, q) - a.outerRadius - b.outerRadius) - gap)).toBeLessThan(
            1e-12,
          )
          expect(gap).toBeLessThanOrEqual(defaultReach + 1e-12)
        }
      }
    }
  })

  it('the kept samples hold the worst difference over gap to 1.5 %', () => {
    // difference as of two columns of 600 V/m, entered from opposite ends
    const random = seeded(14)
    let seen = 0
    for (let round = 0; round < 20; round++) {
      const wave = (y: number): Point[] =>
        Array.from({ length: 9 }, (_, i) => [0.05 * i, y + 0.012 * random(), 0.04])
      const a = tubeBody('K', wave(0))
      const b = tubeBody('I', wave(0.03))
      const runs = fixedRuns([a, b], noFace).filter((run) => indexOf(run, 'a') !== indexOf(run, 'b'))
      const ratio = (s: number, t: number, gap: number): number =>
        Math.abs(600 * (s + t) - 300) / (gap + 1e-3)
      const kept = Math.max(
        ...runs.flatMap((run) => [...run.gap].map((gap, i) => ratio(run.atA[i]!, run.atB[i]!, gap))),
      )
      let worst = 0
      for (let s = 0; s <= a.line.length; s += 5e-4) {
        const near = nearest(pointAt(a.line, s), b.line)
        worst = Math.max(worst, ratio(s, near.t, Math.max(0, near.d - 0.012)))
      }
      seen++
      expect(kept, `round ${round}`).toBeGreaterThan(worst * 0.985)
      for (const run of runs) expect(run.gap.length).toBeLessThanOrEqual(12)
    }
    expect(seen).toBe(20)
  })
})

function nearest(p: Point, line: Polyline): { t: number; d: number } {
  let best = { t: 0, d: Infinity }
  for (let t = 0; t <= line.length; t += 5e-4) {
    const d = distance(p, pointAt(line, t))
    if (d < best.d) best = { t, d }
  }
  return best
}

const names = ['K', 'I', 'O', 'S']
const wanderers = (seed: number): FixedBody[] => {
  const random = seeded(seed)
  return [...names.map((name) => tubeBody(name, wandering(random, 4))), barBody('rail', wandering(random, 2))]
}

/** Runs as text that does not depend on the order of bodies: names, gaps and places in micrometres. */
function told(bodies: readonly FixedBody[], runs: readonly CloseRun[]): string[] {
  const name = (run: CloseRun, side: 'a' | 'b'): string =>
    run[side].kind === 'face' ? 'face' : bodies[indexOf(run, side)]!.name
  const side = (run: CloseRun, which: 'a' | 'b'): string =>
    `${name(run, which)} ${[...(which === 'a' ? run.atA : run.atB)].map((s) => (s * 1e6).toFixed(0)).join(' ')}`
  return runs
    .map(
      (run) =>
        `${[side(run, 'a'), side(run, 'b')].sort().join(' | ')} : ${[...run.gap].map((g) => (g * 1e6).toFixed(0)).join(' ')}`,
    )
    .sort()
}

describe('laws', () => {
  it('the order of bodies is irrelevant', () => {
    for (const seed of [1, 2, 3, 4]) {
      const bodies = wanderers(seed)
      const turned = [bodies[2]!, bodies[0]!, bodies[3]!, bodies[1]!, bodies[4]!]
      const there = told(bodies, fixedRuns(bodies, grounded))
      expect(there.length).toBeGreaterThan(20)
      expect(told(turned, fixedRuns(turned, grounded))).toEqual(there)
    }
  })

  it('of two tubes the earlier is a', () => {
    for (const run of fixedRuns(wanderers(5), noFace))
      expect(indexOf(run, 'a')).toBeLessThanOrEqual(indexOf(run, 'b'))
  })

  const moved = (bodies: readonly FixedBody[], move: (p: Point) => Point): FixedBody[] =>
    bodies.map((body) => {
      const { points, at } = body.line
      const corners = Array.from(
        at,
        (_, i): Point => move([points[3 * i]!, points[3 * i + 1]!, points[3 * i + 2]!]),
      )
      return { ...body, line: polyline(corners) }
    })

  it('turning the sign about z, or moving it, changes nothing', () => {
    for (const seed of [6, 7, 8]) {
      const bodies = wanderers(seed)
      const infinite = { face: { metal: 'floating' } } as const
      const [c, s] = [Math.cos(0.7), Math.sin(0.7)]
      const turned = moved(bodies, ([x, y, z]) => [c * x - s * y + 0.4, s * x + c * y - 0.2, z])
      const shape = (runs: readonly CloseRun[]) =>
        runs
          .map((run) => [indexOf(run, 'a'), indexOf(run, 'b'), (least(run) * 1e9).toFixed(0)].join(' '))
          .sort()
      expect(shape(fixedRuns(turned, infinite))).toEqual(shape(fixedRuns(bodies, infinite)))
    }
  })

  it('the least gap of every pair scales with the sign', () => {
    for (const scale of [0.5, 3]) {
      const bodies = wanderers(9)
      const scaled = moved(bodies, ([x, y, z]) => [scale * x, scale * y, scale * z]).map((body) => ({
        ...body,
        outerRadius: body.outerRadius * scale,
      }))
      const leastOf = (runs: readonly CloseRun[]): Map<string, number> => {
        const map = new Map<string, number>()
        for (const run of runs) {
          const key = `${indexOf(run, 'a')} ${indexOf(run, 'b')}`
          if (indexOf(run, 'a') !== indexOf(run, 'b'))
            map.set(key, Math.min(map.get(key) ?? Infinity, least(run)))
        }
        return map
      }
      const small = leastOf(fixedRuns(bodies, grounded))
      const large = leastOf(
        fixedRuns(
          scaled,
          { face: { metal: 'grounded', size: [0.3 * scale, 0.3 * scale] } },
          defaultReach * scale,
        ),
      )
      expect(small.size).toBeGreaterThan(10)
      expect([...large.keys()].sort()).toEqual([...small.keys()].sort())
      for (const [key, gap] of small) expect(large.get(key)! / scale).toBeCloseTo(gap, 9)
    }
  })

  it('a tube drawn the other way round passes others at the same least gaps', () => {
    const bodies = wanderers(10)
    const reversed = bodies.map((body, i) => {
      const { points, at } = body.line
      const corners = Array.from(
        at,
        (_, k): Point => [points[3 * k]!, points[3 * k + 1]!, points[3 * k + 2]!],
      )
      return i === 1 ? { ...body, line: polyline(corners.reverse()) } : body
    })
    const shape = (runs: readonly CloseRun[]) =>
      runs
        .filter((run) => indexOf(run, 'a') !== indexOf(run, 'b'))
        .map((run) => [indexOf(run, 'a'), indexOf(run, 'b'), (least(run) * 1e7).toFixed(0)].join(' '))
        .sort()
    expect(shape(fixedRuns(reversed, noFace))).toEqual(shape(fixedRuns(bodies, noFace)))
  })
})

describe('odd geometry', () => {
  // places on a coarse grid: many repeated points, overlaps, exact crossings and paths without length
  const coarse = fc
    .tuple(fc.integer({ min: 0, max: 3 }), fc.integer({ min: 0, max: 3 }), fc.integer({ min: -1, max: 1 }))
    .map(([x, y, z]): Point => [0.03 * x, 0.03 * y, 0.02 * z])
  const path = fc.array(coarse, { minLength: 1, maxLength: 6 })

  const isSound = (run: CloseRun): boolean => {
    const n = run.gap.length
    const numbers = [...run.atA, ...run.atB, ...run.gap, ...run.pointA, ...run.pointB]
    const ascends = (at: Float64Array): boolean => at.every((s, i) => i === 0 || s > at[i - 1]!)
    return (
      n > 0 &&
      n <= 12 &&
      run.atA.length === n &&
      run.atB.length === n &&
      run.pointA.length === 3 * n &&
      run.pointB.length === 3 * n &&
      numbers.every(Number.isFinite) &&
      run.gap.every((gap) => gap >= 0) &&
      (ascends(run.atA) || ascends(run.atB))
    )
  }

  it('gives finite runs of one to twelve samples, and the nearest place of two bodies among them', () => {
    fc.assert(
      fc.property(path, path, (one, two) => {
        const bodies = [tubeBody('K', one), tubeBody('I', two)]
        const runs = fixedRuns(bodies, grounded)
        expect(runs.every(isSound)).toBe(true)
        const between = runs.filter((run) => indexOf(run, 'a') === 0 && indexOf(run, 'b') === 1)
        const nearestCorner = Math.min(...one.flatMap((p) => two.map((q) => distance(p, q))))
        const found = Math.min(Infinity, ...between.map(least))
        if (nearestCorner - 0.012 < defaultReach)
          expect(found).toBeLessThanOrEqual(Math.max(0, nearestCorner - 0.012) + 1e-12)
      }),
      { numRuns: 300, seed: 1 },
    )
  })

  it('of leads gives finite runs too', () => {
    fc.assert(
      fc.property(path, path, (one, two) => {
        const lead = leadOf(['S1.1', 'K.a'], one)
        const other = leadOf(['K.a', 'K.b'], two)
        const runs = [...leadRuns(lead, [tubeBody('K', two)], grounded), ...leadLeadRuns(lead, other)]
        expect(runs.every(isSound)).toBe(true)
      }),
      { numRuns: 200, seed: 2 },
    )
  })

  it('no bodies make no runs', () => {
    expect(fixedRuns([], grounded)).toEqual([])
    expect(
      leadRuns(
        leadOf(
          ['S1.1', 'K.a'],
          [
            [0, 0, 0.2],
            [0.1, 0, 0.2],
          ],
        ),
        [],
        grounded,
      ),
    ).toEqual([])
  })
})
