/** The same sign with one lead laid otherwise, to see what that would change. Never saved. m. */
import type { Layout, PathPoint, Point, Route } from '../layout/layout.js'
import type { LeadBody } from './conductors.js'

/** The lead cut to the straight way between its two ends. */
export function laidStraight(layout: Layout, lead: LeadBody): Layout {
  const corners = cornersOf(lead)
  return relaid(layout, lead, [corners[0]!, corners.at(-1)!])
}

/** Every corner of the lead at another height, by so much; its ends stay where they are. */
export const lifted = (layout: Layout, lead: LeadBody, by: number): Layout =>
  relaid(
    layout,
    lead,
    cornersOf(lead).map(({ x, y, z }) => ({ x, y, z: z + by })),
  )

export function straightLength(lead: LeadBody): number {
  const corners = cornersOf(lead)
  const [one, two] = [corners[0]!, corners.at(-1)!]
  return Math.hypot(one.x - two.x, one.y - two.y, one.z - two.z)
}

/**
 * How far a place on a lead has to be lifted (m, away from the metal) so that `clear` of air lies between it and the
 * nearest place of some metal: 0 where it does already.
 */
export function liftFor(lead: Point, metal: Point, gap: number, clear: number): number {
  if (gap >= clear) return 0
  const aside = Math.hypot(lead[0] - metal[0], lead[1] - metal[1])
  const above = Math.abs(lead[2] - metal[2])
  const surfaces = Math.hypot(aside, above) - gap
  const wanted = Math.sqrt(Math.max(0, (clear + surfaces) ** 2 - aside ** 2))
  return Math.sign(lead[2] - metal[2] || 1) * Math.max(0, wanted - above)
}

function cornersOf({ line: { points } }: LeadBody): Required<PathPoint>[] {
  return Array.from({ length: points.length / 3 }, (_, i) => ({
    x: points[3 * i]!,
    y: points[3 * i + 1]!,
    z: points[3 * i + 2]!,
  }))
}

/** A route in front of all others of the file. */
function relaid(layout: Layout, lead: LeadBody, path: readonly PathPoint[]): Layout {
  const route: Route = {
    between: lead.between,
    path,
    conduit: lead.conduit,
    ...(lead.boreRadius !== undefined && { bore: 2 * lead.boreRadius }),
    conductor: 2 * lead.coreRadius,
    diameter: 2 * lead.outerRadius,
    permittivity: lead.permittivity,
  }
  return { ...layout, routes: [route, ...layout.routes] }
}
