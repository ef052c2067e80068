/** Leads as conductors in space: the routes of the file, completed, or assumed where the file has none. */
import { partOf, sideOf } from '../layout/ends.js'
import type { EndName, Layout, PathPoint, Point, Route, Tube } from '../layout/layout.js'
import { equivalentRadius } from './bodies.js'
import type { LeadBody } from './conductors.js'
import { polyline, raised } from './polyline.js'

const place = ({ x, y, z }: PathPoint, height: number): Point => [x, y, z ?? height]

/**
 * Where an end is: the electrode of a tube (`K.a`), or a terminal of a supply (`S1.1`; without z it lies at the
 * height of the leads). Throws on a name that the layout does not have: parsing has checked all names.
 */
export function endPoint(layout: Layout, end: EndName): Point {
  const [id, which] = [partOf(end), sideOf(end)]
  const tube = layout.tubes.find((t) => t.id === id)
  const drawn = tube === undefined ? terminal(layout, id, which) : tubeEnd(tube, which)
  if (drawn === undefined) throw new Error(`no end ${end} in this layout`)
  return place(drawn, tube?.height ?? layout.lead.height)
}

function tubeEnd(tube: Tube, which: string): PathPoint | undefined {
  if (which === 'a') return tube.path[0]
  return which === 'b' ? tube.path[tube.path.length - 1] : undefined
}

function terminal(layout: Layout, id: string, which: string): PathPoint | undefined {
  const terminals = layout.supplies.find((supply) => supply.id === id)?.terminals
  if (which === '1') return terminals?.[0]
  return which === '2' ? terminals?.[1] : undefined
}

/**
 * The lead between two ends, running from the first to the second. Takes the first route of the library that joins
 * them, named in either order; for an output lead also the one that runs to the supply's other terminal, since a lead
 * that changes terminals stays where it lies. Where none has a path, an assumed one: at each end straight to the
 * lead's height, then straight across.
 */
export function leadBody(layout: Layout, between: readonly [EndName, EndName]): LeadBody {
  const joint = routeJoining(layout, between) ?? routeJoining(layout, otherTerminal(layout, between))
  const route = joint?.route
  const height = route?.height ?? layout.lead.height
  const drawn = joint && drawnFrom(joint.route, joint.from)
  const start = endPoint(layout, between[0])
  const finish = endPoint(layout, between[1])
  // without a drawing, the two places right above or below the ends stand for it
  const middle: Point[] =
    drawn === undefined
      ? [
          [start[0], start[1], height],
          [finish[0], finish[1], height],
        ]
      : raised(drawn, height)
  const outerRadius = (route?.diameter ?? layout.lead.diameter) / 2
  const coreRadius = (route?.conductor ?? layout.lead.conductor) / 2
  const permittivity = route?.permittivity ?? layout.lead.permittivity
  return {
    kind: 'lead',
    name: `${between[0]}–${between[1]}`,
    // polyline merges the ends where the drawing already reaches them
    line: polyline([start, ...middle, finish]),
    coreRadius,
    outerRadius,
    permittivity,
    equivalentRadius: equivalentRadius(coreRadius, outerRadius, permittivity),
    between,
    conduit: route?.conduit ?? 'none',
    ...(route?.bore === undefined ? {} : { boreRadius: route.bore / 2 }),
    assumed: drawn === undefined,
    off: drawn === undefined ? 0 : Math.max(apart(drawn[0], start), apart(drawn[drawn.length - 1], finish)),
  }
}

/** A route between two ends, with the end it is told from here. */
function routeJoining(
  { routes }: Layout,
  [from, to]: readonly [EndName, EndName],
): { readonly route: Route; readonly from: EndName } | undefined {
  const joins = ({ between: [a, b] }: Route) => (a === from && b === to) || (a === to && b === from)
  const route = routes.find(joins)
  return route && { route, from }
}

/** The same two ends with the other terminal of the supply, where one of them is a terminal. */
function otherTerminal(
  { supplies }: Layout,
  [from, to]: readonly [EndName, EndName],
): readonly [EndName, EndName] {
  const swapped = (end: EndName): EndName =>
    supplies.some(({ id }) => id === partOf(end)) ? `${partOf(end)}.${sideOf(end) === '1' ? '2' : '1'}` : end
  return [swapped(from), swapped(to)]
}

/** The drawn path of a route, turned so that it starts at this end. */
function drawnFrom(route: Route, end: EndName): readonly PathPoint[] | undefined {
  if (route.path === undefined || route.path.length === 0) return undefined
  return route.between[0] === end ? route.path : [...route.path].reverse()
}

const apart = (drawn: PathPoint | undefined, [x, y]: Point): number =>
  drawn === undefined ? 0 : Math.hypot(drawn.x - x, drawn.y - y)
