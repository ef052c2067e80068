/** Bodies for the field tests, and node matrices summed up to one row a conductor. Metres, F. */
import type { NodeCapacitance } from '../../src/field/field.js'
import { type FieldOptions, prepareField, usualField } from '../../src/field/fixed-field.js'
import { leadField } from '../../src/field/lead-field.js'
import { nodeCapacitance } from '../../src/field/node-capacitance.js'
import type { BarBody, FixedBody, LeadBody, TubeBody } from '../../src/geometry/conductors.js'
import { type FixedNodes, fixedNodes } from '../../src/geometry/nodes.js'
import { polyline } from '../../src/geometry/polyline.js'
import type { Face, Point } from '../../src/layout/layout.js'

export interface Section {
  readonly core: number
  readonly outer: number
  readonly permittivity: number
}
export const glass12: Section = { core: 0.005, outer: 0.006, permittivity: 6.65 }
export const glass15: Section = { core: 0.0065, outer: 0.0075, permittivity: 6.5 }
export const wire7: Section = { core: 0.0006, outer: 0.0035, permittivity: 3 }
export const bare = (radius: number): Section => ({ core: radius, outer: radius, permittivity: 1 })

const common = (name: string, path: readonly Point[], { core, outer, permittivity }: Section) => ({
  name,
  line: polyline(path),
  coreRadius: core,
  outerRadius: outer,
  permittivity,
  equivalentRadius: outer * (core / outer) ** (1 / permittivity),
})

export const tube = (name: string, path: readonly Point[], section = glass12): TubeBody => ({
  kind: 'tube',
  ...common(name, path, section),
  fill: 'neon',
  boots: false,
})
export const bar = (name: string, path: readonly Point[], radius: number): BarBody => ({
  kind: 'bar',
  ...common(name, path, bare(radius)),
  grounded: true,
})
export const lead = (
  between: readonly [string, string],
  path: readonly Point[],
  section = wire7,
  more: Partial<LeadBody> = {},
): LeadBody => ({
  kind: 'lead',
  ...common(between.join('–'), path, section),
  between,
  conduit: 'none',
  off: 0,
  assumed: false,
  ...more,
})

/** One row and column for each tube, bar, floating face and lead: every conductor at one potential. */
export function conductors({ count, matrix }: NodeCapacitance, nodes: FixedNodes): number[][] {
  const owner: number[] = []
  nodes.tubes.forEach((column, t) => {
    for (let k = 0; k < column.at.length; k++) owner.push(t)
  })
  for (let next = nodes.tubes.length; owner.length < count; next++) owner.push(next)
  const size = owner[count - 1]! + 1
  const sums = Array.from({ length: size }, () => new Array<number>(size).fill(0))
  for (let i = 0; i < count; i++) {
    for (let j = 0; j < count; j++) sums[owner[i]!]![owner[j]!]! += matrix[i * count + j]!
  }
  return sums
}

/** Conductor matrix of these bodies and leads. */
export function solved(
  bodies: readonly FixedBody[],
  leads: readonly LeadBody[],
  metal: Face['metal'],
  options: FieldOptions = usualField,
  spacing = 0.05,
): number[][] {
  const nodes = fixedNodes(bodies, metal === 'floating', spacing)
  const face: Face = metal === 'none' ? { metal } : { metal, size: [1, 0.5] }
  const fixed = prepareField(bodies, nodes, face, options)
  return conductors(
    nodeCapacitance(
      fixed,
      leads.map((body) => leadField(fixed, body)),
    ),
    nodes,
  )
}

/** A small sign: three bent tubes, a frame bar and three leads, nothing touching. */
export function smallSign(): { tubes: TubeBody[]; frame: BarBody; leads: LeadBody[] } {
  const hook = (x: number): Point[] => [
    [x, 0.05, 0.04],
    [x, 0.25, 0.04],
    [x + 0.03, 0.26, 0.04],
    [x + 0.04, 0.06, 0.04],
  ]
  return {
    tubes: [0.05, 0.13, 0.22].map((x, k) => tube(`T${k}`, hook(x))),
    frame: bar(
      'frame',
      [
        [0, 0.32, 0.03],
        [0.3, 0.32, 0.03],
      ],
      0.008,
    ),
    leads: [
      lead(
        ['S.1', 'X.a'],
        [
          [-0.05, 0.1, 0.02],
          [0, 0.02, 0.02],
          [0.1, 0.02, 0.02],
        ],
      ),
      lead(
        ['S.2', 'X.b'],
        [
          [-0.05, 0.29, 0.02],
          [0.25, 0.29, 0.02],
        ],
      ),
      lead(
        ['X.c', 'X.d'],
        [
          [0.1, 0.15, 0.08],
          [0.25, 0.18, 0.08],
        ],
      ),
    ],
  }
}

/** Inverse by Gauss–Jordan elimination with row exchange: the slow obvious way. */
export function inverse(a: readonly (readonly number[])[]): number[][] {
  const n = a.length
  const m = a.map((row, i) => [...row, ...Array.from({ length: n }, (_, j) => (i === j ? 1 : 0))])
  for (let c = 0; c < n; c++) {
    let best = c
    for (let r = c; r < n; r++) if (Math.abs(m[r]![c]!) > Math.abs(m[best]![c]!)) best = r
    const pivot = m[best]!
    m[best] = m[c]!
    m[c] = pivot.map((x) => x / pivot[c]!)
    for (let r = 0; r < n; r++) {
      const share = m[r]![c]!
      if (r !== c && share !== 0) m[r] = m[r]!.map((x, k) => x - share * m[c]![k]!)
    }
  }
  return m.map((row) => row.slice(n))
}
