/** Long straight runs against two-dimensional values. The difference of two lengths has no end effects in it. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { usualField } from '../../src/field/fixed-field.js'
import type { LeadBody, TubeBody } from '../../src/geometry/conductors.js'
import type { Point } from '../../src/layout/layout.js'
import { bare, inverse, lead, type Section, solved, tube } from './sign.js'

const reference = z.object({
  cases: z.array(
    z.object({
      name: z.string(),
      conductors: z.array(
        z.object({
          kind: z.enum(['tube', 'lead']),
          x_mm: z.number(),
          height_mm: z.number(),
          bore_radius_mm: z.number(),
          outer_radius_mm: z.number(),
          permittivity: z.number(),
        }),
      ),
      capacitance_pf_per_m: z.array(z.array(z.number())),
    }),
  ),
})
const file = readFileSync(new URL('./cross-sections.json', import.meta.url), 'utf8')
const { cases } = reference.parse(JSON.parse(file))

type Case = (typeof cases)[number]

/** Conductor matrix of a cross-section of this length, F, in the order of its conductors. */
function matrixOf({ conductors }: Case, length: number): number[][] {
  const tubes: TubeBody[] = []
  const leads: LeadBody[] = []
  const places = conductors.map((c) => {
    const section: Section = {
      core: c.bore_radius_mm / 1e3,
      outer: c.outer_radius_mm / 1e3,
      permittivity: c.permittivity,
    }
    const path: Point[] = [0, length].map((x): Point => [x, c.x_mm / 1e3, c.height_mm / 1e3])
    if (c.kind === 'tube') return { lead: false, at: tubes.push(tube(`T${tubes.length}`, path, section)) - 1 }
    return { lead: true, at: leads.push(lead(['S.1', 'S.2'], path, section)) - 1 }
  })
  const all = solved(tubes, leads, 'grounded')
  const index = places.map((p) => (p.lead ? tubes.length + p.at : p.at))
  return index.map((i) => index.map((j) => all[i]![j]!))
}

describe('cross-sections over a grounded face, second-order finite elements (see the json for how)', () => {
  it.each(cases.map((c) => [c.name, c] as const))('%s', (name, c) => {
    const long = matrixOf(c, 1.4)
    const short = matrixOf(c, 0.7)
    c.capacitance_pf_per_m.forEach((row, i) => {
      const largest = Math.max(...row.map(Math.abs))
      row.forEach((value, j) => {
        const perMetre = ((long[i]![j]! - short[i]![j]!) / 0.7) * 1e12
        // a lead lying on metal: the bare cylinder that stands for wire and insulation is itself 6 % low there
        expect(Math.abs(perMetre - value) / largest).toBeLessThan(name === 'leadtouch' ? 0.08 : 0.01)
      })
    })
  })
})

it('a bare cylinder over a plane: 2πε0/acosh(h/a) = 20.3848 pF/m at a = 6.5 mm, h = 50 mm (exact)', () => {
  const of = (length: number): number =>
    solved(
      [
        tube(
          'T',
          [
            [0, 0, 0.05],
            [length, 0, 0.05],
          ],
          bare(0.0065),
        ),
      ],
      [],
      'grounded',
    )[0]![0]!
  // half a per cent: segments and the reach of the first harmonic
  expect(Math.abs(((of(1.6) - of(0.8)) / 0.8) * 1e12 - 20.3848) / 20.3848).toBeLessThan(0.005)
})

it.each([
  [100, 13.19036],
  [200, 11.31128],
  [1000, 8.4942],
])('an open tube of 1 m in free space, L/a = %i: %f pF [C]', (slenderness, pf) => {
  const body = tube(
    'T',
    [
      [0, 0, 0],
      [1, 0, 0],
    ],
    bare(1 / slenderness),
  )
  const segment = slenderness > 500 ? 10 : usualField.tubeSegment
  const c = solved([body], [], 'none', { ...usualField, tubeSegment: segment })[0]![0]! * 1e12
  // ends dominate
  expect(Math.abs(c / pf - 1)).toBeLessThan(0.01)
})

it('line 601 of the 13-node feeder (W. H. Kersting, Radial distribution test feeders, 2001 [R]; places from memory, reproduced [C✓])', () => {
  const foot = 0.3048
  const phase = (0.927 / 2) * 0.0254
  const wires = [
    [2.5, 28, phase],
    [0, 28, phase],
    [7, 28, phase],
    [4, 24, (0.563 / 2) * 0.0254],
  ] as const
  const options = { ...usualField, tubeSegment: 150 }
  const of = (length: number): number[][] => {
    const tubes = wires.map(([x, y, r], k) =>
      tube(
        `W${k}`,
        [
          [0, x * foot, y * foot],
          [length, x * foot, y * foot],
        ],
        bare(r),
      ),
    )
    return solved(tubes, [], 'grounded', options, 10)
  }
  const long = of(240)
  const short = of(120)
  const expected = [
    [6.2998, -1.9958, -1.2595],
    [-1.9958, 5.9597, -0.7417],
    [-1.2595, -0.7417, 5.6386],
  ]
  expected.forEach((row, i) => {
    row.forEach((value, j) => {
      // µS per mile at 60 Hz; the neutral is grounded, so its row and column just fall away
      const b = 2 * Math.PI * 60 * ((long[i]![j]! - short[i]![j]!) / 120) * 1609.344 * 1e6
      expect(Math.abs(b - value) / row[i]!).toBeLessThan(0.001)
    })
  })
})

describe('a ribbon of three wires, C. R. Paul, Analysis of Multiconductor Transmission Lines, 1994 [C✓]', () => {
  const mil = 2.54e-5
  /** capacitances per metre against one outer wire, pF/m: potentials of a neutral set do not depend on infinity */
  const ribbon = (section: Section): number[][] => {
    const charged = (length: number): number[][] => {
      const wires = [0, 1, 2].map((k) =>
        tube(
          `W${k}`,
          [
            [0, 50 * mil * k, 0],
            [length, 50 * mil * k, 0],
          ],
          section,
        ),
      )
      const p = inverse(solved(wires, [], 'none', { ...usualField, tubeSegment: 8 }))
      return inverse([1, 2].map((i) => [1, 2].map((j) => p[i]![j]! - p[i]![0]! - p[0]![j]! + p[0]![0]!)))
    }
    const long = charged(0.3)
    const short = charged(0.15)
    return long.map((row, i) => row.map((x, j) => ((x - short[i]![j]!) / 0.15) * 1e12))
  }
  it.each([
    ['bare', bare(7.5 * mil), [22.494, -11.247, 16.581]],
    ['coated', { core: 7.5 * mil, outer: 17.5 * mil, permittivity: 3.5 }, [37.432, -18.716, 24.982]],
  ] as const)('%s', (kind, section, [c11, c12, c22]) => {
    const c = ribbon(section)
    // one bare cylinder in the place of wire and coat costs about one per cent
    const tolerance = kind === 'bare' ? 0.003 : 0.015
    expect(Math.abs(c[0]![0]! - c11) / c11).toBeLessThan(tolerance)
    expect(Math.abs(c[0]![1]! - c12) / c11).toBeLessThan(tolerance)
    expect(Math.abs(c[1]![1]! - c22) / c11).toBeLessThan(tolerance)
  })
})
