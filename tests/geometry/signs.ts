/** Small layouts and bodies for the geometry tests. All numbers in metres, invented. */

import type { BarBody, LeadBody, TubeBody } from '../../src/geometry/conductors.js'
import { polyline } from '../../src/geometry/polyline.js'
import type { Face, Layout, PathPoint, Point, Tube } from '../../src/layout/layout.js'

export const noFace: { readonly face: Face } = { face: { metal: 'none' } }

export function tubeBody(name: string, corners: readonly Point[], diameter = 0.012): TubeBody {
  const outerRadius = diameter / 2
  return {
    kind: 'tube',
    name,
    line: polyline(corners),
    coreRadius: outerRadius - 0.001,
    outerRadius,
    permittivity: 7.1,
    equivalentRadius: outerRadius * 0.97,
    fill: 'neon',
    boots: false,
  }
}

export function barBody(name: string, corners: readonly Point[], diameter = 0.02): BarBody {
  const radius = diameter / 2
  return {
    kind: 'bar',
    name,
    line: polyline(corners),
    coreRadius: radius,
    outerRadius: radius,
    permittivity: 1,
    equivalentRadius: radius,
    grounded: true,
  }
}

export function leadOf(
  between: readonly [string, string],
  corners: readonly Point[],
  conduit: LeadBody['conduit'] = 'none',
): LeadBody {
  return {
    kind: 'lead',
    name: `${between[0]}–${between[1]}`,
    line: polyline(corners),
    coreRadius: 0.0006,
    outerRadius: 0.0035,
    permittivity: 3,
    equivalentRadius: 0.0019,
    between,
    conduit,
    off: 0,
    assumed: false,
  }
}

export function tube(id: string, path: readonly PathPoint[], height = 0.04): Tube {
  return {
    id,
    path,
    height,
    diameter: 0.012,
    wall: 0.001,
    permittivity: 7.1,
    fill: 'neon',
    boots: false,
  }
}

export function layoutOf(parts: Partial<Layout>): Layout {
  return {
    title: 'test',
    units: 'mm',
    altitude: 0,
    face: { metal: 'none' },
    tubes: [],
    lead: { conductor: 0.0012, diameter: 0.007, permittivity: 3, height: 0.02 },
    supplies: [],
    metal: [],
    wiring: { circuits: [] },
    routes: [],
    variants: [],
    rules: [],
    assumed: [],
    ...parts,
  }
}

/** Repeatable numbers from 0 to 1 (linear congruential, constants of Numerical Recipes, from memory). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 32
  }
}

/** A path that wanders through a box of 0.3 × 0.3 × 0.06 m in straight pieces. */
export function wandering(random: () => number, pieces: number): Point[] {
  return Array.from(
    { length: pieces + 1 },
    () => [0.3 * random(), 0.3 * random(), 0.02 + 0.06 * random()] as const,
  )
}
