/** What lies at a place of the drawing: for the cursor. Metres. */
import type { Body, FixedBody, LeadBody } from '../geometry/conductors.js'
import { pointAt } from '../geometry/polyline.js'
import type { BodyRef } from '../geometry/runs.js'
import { drawnChains } from './map-trace.js'
import type { Cell, MapWindow } from './map-window.js'

export interface Near {
  readonly body: BodyRef
  readonly at: number
  /** distance in the drawing from the place to the body's centre-line */
  readonly distance: number
  readonly z: number
}

/** Bodies whose centre-line passes within `reach` of (x, y) in the drawing: nearest first, then what is in front. */
export function bodiesNear(
  bodies: readonly FixedBody[],
  leads: readonly LeadBody[],
  x: number,
  y: number,
  reach: number,
): Near[] {
  const found: Near[] = []
  const look = (body: Body, ref: BodyRef) => {
    const at = nearestAlong(body, x, y)
    const [px, py, z] = pointAt(body.line, at)
    const distance = Math.hypot(px - x, py - y)
    if (distance <= reach) found.push({ body: ref, at, distance, z })
  }
  bodies.forEach((body, index) => {
    look(body, { kind: 'fixed', index })
  })
  leads.forEach((lead, index) => {
    look(lead, { kind: 'lead', index })
  })
  // within half the reach two bodies count as equally near: the one in front comes first
  const ring = (n: Near) => Math.floor((2 * n.distance) / reach)
  return found.sort((a, b) => ring(a) - ring(b) || b.z - a.z || a.distance - b.distance)
}

/** Whether the map draws the body in a cell of its window. */
export const passesCell = (body: Body | undefined, window: MapWindow, { column, row }: Cell): boolean =>
  body !== undefined &&
  drawnChains(body, window).some((chain) =>
    chain.some((visit) => visit.column === column && visit.row === row),
  )

/** Path length of the place on the body nearest to (x, y) in the drawing. */
function nearestAlong({ line: { points, at } }: Body, x: number, y: number): number {
  let best = Infinity
  let found = 0
  for (let i = 0; i + 1 < at.length; i++) {
    const p = 3 * i
    const dx = points[p + 3]! - points[p]!
    const dy = points[p + 4]! - points[p + 1]!
    const square = dx * dx + dy * dy
    const along = square > 0 ? ((x - points[p]!) * dx + (y - points[p + 1]!) * dy) / square : 0
    const t = Math.min(1, Math.max(0, along))
    const d = Math.hypot(points[p]! + t * dx - x, points[p + 1]! + t * dy - y)
    if (d < best) {
      best = d
      found = at[i]! + t * (at[i + 1]! - at[i]!)
    }
  }
  return found
}
