/** Tubes and bars of a layout as conductors in space: what the wiring does not move. */
import type { Bar, Layout, Tube } from '../layout/layout.js'
import type { BarBody, FixedBody, TubeBody } from './conductors.js'
import { polyline, raised } from './polyline.js'

/** Radius of the bare cylinder with the same outside field as a core in a coat: b (a/b)^(1/εr) (physics, coating). */
export const equivalentRadius = (core: number, outer: number, permittivity: number): number =>
  outer * (core / outer) ** (1 / permittivity)

function tubeBody(tube: Tube): TubeBody {
  const outerRadius = tube.diameter / 2
  const coreRadius = outerRadius - tube.wall
  return {
    kind: 'tube',
    name: tube.id,
    line: polyline(raised(tube.path, tube.height)),
    coreRadius,
    outerRadius,
    permittivity: tube.permittivity,
    equivalentRadius: equivalentRadius(coreRadius, outerRadius, tube.permittivity),
    fill: tube.fill,
    boots: tube.boots,
  }
}

function barBody(bar: Bar): BarBody {
  const radius = bar.diameter / 2
  return {
    kind: 'bar',
    name: bar.id,
    line: polyline(raised(bar.path, bar.height)),
    coreRadius: radius,
    outerRadius: radius,
    permittivity: 1,
    equivalentRadius: radius,
    grounded: bar.grounded,
  }
}

/** Tubes in layout order, then bars. Plates and walls are sheets (sheets.ts). */
export function fixedBodies(layout: Layout): readonly FixedBody[] {
  const bars = layout.metal.filter((metal) => metal.kind === 'bar')
  return [...layout.tubes.map(tubeBody), ...bars.map(barBody)]
}
