/** Where tubes and leads pass plates and upright walls within reach. Metres. */
import type { Point } from '../layout/layout.js'
import { defaultReach, runsOf, slack, spacing } from './close-runs.js'
import type { Body, FixedBody, LeadBody, SheetBody } from './conductors.js'
import { pointAt } from './polyline.js'
import { footOnRectangle, pieceToRectangle, rectangleStride } from './rectangles.js'
import { refinedBy, tracksNear } from './refined.js'
import type { BodyRef, CloseRun } from './runs.js'
import { type Stations, stations } from './tracks.js'

/** sections that narrow a place between two stations (5 mm) down to rounding */
const steps = 40

/** Runs of all tubes with all sheets; a is the tube. Bars make no pairs with sheets. */
export const fixedSheetRuns = (
  bodies: readonly FixedBody[],
  sheets: readonly SheetBody[],
  reach = defaultReach,
): CloseRun[] =>
  bodies.flatMap((body, index) =>
    body.kind === 'tube' ? sheetRuns(body, { kind: 'fixed', index }, sheets, reach) : [],
  )

/** Runs of one lead with all sheets; a is the lead (see withLeadIndex). A lead in metal conduit makes none. */
export const leadSheetRuns = (
  lead: LeadBody,
  sheets: readonly SheetBody[],
  reach = defaultReach,
): CloseRun[] => (lead.conduit === 'metal' ? [] : sheetRuns(lead, { kind: 'lead', index: -1 }, sheets, reach))

/**
 * A sheet is one conductor at one potential, so its nearest place decides: one valley of the distance to the whole
 * sheet, as for the face, however many walls of a can stand round the glass.
 */
function sheetRuns(body: Body, ref: BodyRef, sheets: readonly SheetBody[], reach: number): CloseRun[] {
  if (sheets.length === 0) return []
  const along = stations(body.line, spacing)
  const limit = reach + slack + body.outerRadius
  return sheets.flatMap((sheet, index) => {
    const near = rectanglesNear(sheet, along, limit)
    if (near.length === 0) return []
    const foot = (p: Point): Foot => nearestOn(sheet.rectangles, near, p)
    return tracksNear(along, (p) => foot(p).distance, limit).flatMap((track) => {
      const places = refinedBy(track, along, (from, to) => leastOf(sheet.rectangles, near, from, to))
      return runsOf(
        places,
        body.outerRadius,
        reach,
        ref,
        { kind: 'sheet', index },
        body.line,
        (_t, s) => foot(pointAt(body.line, s)).place,
      )
    })
  })
}

const out = new Float64Array(5)

/** Rectangles of a sheet whose surroundings the body's box reaches. */
function rectanglesNear({ rectangles }: SheetBody, { points }: Stations, limit: number): number[] {
  const low = [Infinity, Infinity, Infinity]
  const high = [-Infinity, -Infinity, -Infinity]
  for (let i = 0; i < points.length; i++) {
    low[i % 3] = Math.min(low[i % 3]!, points[i]!)
    high[i % 3] = Math.max(high[i % 3]!, points[i]!)
  }
  const count = rectangles.length / rectangleStride
  return Array.from({ length: count }, (_, k) => k).filter((k) => {
    const r = rectangles.subarray(k * rectangleStride)
    return [0, 1, 2].every((c) => {
      const half = Math.abs(r[3 + c]!) * r[9]! + Math.abs(r[6 + c]!) * r[10]!
      return r[c]! - half <= high[c]! + limit && r[c]! + half >= low[c]! - limit
    })
  })
}

interface Foot {
  readonly distance: number
  readonly place: Point
}

/** The nearest place on some rectangles. */
function nearestOn(rectangles: Float64Array, near: readonly number[], [x, y, z]: Point): Foot {
  let best: Foot = { distance: Infinity, place: [0, 0, 0] }
  for (const k of near) {
    const distance = footOnRectangle(rectangles, k, x, y, z, out)
    if (distance < best.distance) best = { distance, place: [out[2]!, out[3]!, out[4]!] }
  }
  return best
}

/** Where a straight piece comes nearest to some rectangles. */
function leastOf(rectangles: Float64Array, near: readonly number[], from: Point, to: Point) {
  let best = { share: 0, distance: Infinity }
  for (const k of near) {
    const distance = pieceToRectangle(rectangles, k, from, to, steps, out)
    if (distance < best.distance) best = { share: out[1]!, distance }
  }
  return best
}
