/** Valleys with their least distances made exact: stations are steps apart, a minimum may lie between. Metres. */
import type { Face, Point } from '../layout/layout.js'
import type { Polyline } from './conductors.js'
import { between, closestPlaces, footOnFace } from './distance.js'
import { distance, pieceAt } from './polyline.js'
import type { Places } from './run-samples.js'
import { type Approach, areApart, type Stations, type Track } from './tracks.js'

interface Place {
  readonly s: number
  readonly t: number
  readonly d: number
}

const corner = (points: Float64Array, i: number): Point => [
  points[3 * i]!,
  points[3 * i + 1]!,
  points[3 * i + 2]!,
]

/** Rises less than this are rounding, m. */
const rounding = 1e-9

/** The places of a track on another body, with the exact minima between stations put in. */
export function refinedOnBody(track: Track, along: Stations, other: Polyline, approach: Approach): Places {
  return refined(track, along, (i, k) => {
    const place = downhill(along, k, other, track.t[i]!)
    return areApart(approach, place.s, place.t, place.d) ? place : undefined
  })
}

/**
 * The minimum between stations k and k + 1 that lies downhill from path length t of the other body. On each of its
 * pieces the distance is convex, so going from piece to piece while that goes down never leaves the valley.
 */
function downhill(along: Stations, k: number, other: Polyline, t: number): Place {
  const last = Math.max(0, other.at.length - 2)
  let piece = pieceAt(other, t)
  let best = closestOnPiece(along, k, other, piece)
  // a place at a corner belongs to the piece before it as well
  if (piece > 0 && t - other.at[piece]! < rounding) {
    const before = closestOnPiece(along, k, other, piece - 1)
    if (before.d < best.d) {
      best = before
      piece--
    }
  }
  for (;;) {
    const atStart = piece > 0 && best.t <= other.at[piece]!
    const atEnd = piece < last && best.t >= other.at[piece + 1]!
    if (!atStart && !atEnd) return best
    const neighbour = atStart ? piece - 1 : piece + 1
    const next = closestOnPiece(along, k, other, neighbour)
    if (next.d >= best.d) return best
    best = next
    piece = neighbour
  }
}

function closestOnPiece(along: Stations, k: number, other: Polyline, j: number): Place {
  const end = Math.min(j + 1, other.at.length - 1)
  const {
    u,
    v,
    distance: d,
  } = closestPlaces(
    corner(along.points, k),
    corner(along.points, k + 1),
    corner(other.points, j),
    corner(other.points, end),
  )
  const s = along.at[k]! + u * (along.at[k + 1]! - along.at[k]!)
  const t = v < 1 ? other.at[j]! + v * (other.at[end]! - other.at[j]!) : other.at[end]!
  return { s, t, d }
}

/** Stretches of stations within `limit` of the face. */
export const faceTracks = (along: Stations, face: Face, limit: number): Track[] =>
  tracksNear(along, (point) => toFace(point, face), limit)

/** Stretches of stations within `limit` by this distance. */
export function tracksNear(along: Stations, distanceOf: (point: Point) => number, limit: number): Track[] {
  const tracks: Track[] = []
  let open: Track | undefined
  for (let k = 0; k < along.at.length; k++) {
    const d = distanceOf(corner(along.points, k))
    if (d > limit) open = undefined
    else if (open === undefined) {
      open = { first: k, t: [0], d: [d] }
      tracks.push(open)
    } else {
      open.t.push(0)
      open.d.push(d)
    }
  }
  return tracks
}

const toFace = (point: Point, face: Face): number => distance(point, footOnFace(point, face.size))

/** The places of a track on the face, with the minima between stations put in. */
export function refinedOnFace(track: Track, along: Stations, face: Face): Places {
  return refined(track, along, (_i, k) => {
    const from = corner(along.points, k)
    const to = corner(along.points, k + 1)
    const u = lowest((share) => toFace(between(from, to, share), face))
    const s = along.at[k]! + u * (along.at[k + 1]! - along.at[k]!)
    return { s, t: 0, d: toFace(between(from, to, u), face) }
  })
}

/**
 * The places of a track on something without a length of its own, with the minima between stations put in: `least`
 * gives the share (0 … 1) of the nearest place of the piece between two stations, and its distance.
 */
export const refinedBy = (
  track: Track,
  along: Stations,
  least: (from: Point, to: Point) => { readonly share: number; readonly distance: number },
): Places =>
  refined(track, along, (_i, k) => {
    const { share, distance: d } = least(corner(along.points, k), corner(along.points, k + 1))
    return { s: along.at[k]! + share * (along.at[k + 1]! - along.at[k]!), t: 0, d }
  })

/** Share (0 … 1) where a convex function is least, by thirds. */
function lowest(f: (share: number) => number): number {
  let low = 0
  let high = 1
  for (let i = 0; i < 60; i++) {
    const third = (high - low) / 3
    if (f(low + third) <= f(high - third)) high -= third
    else low += third
  }
  return (low + high) / 2
}

/** Asks `closest(i, k)` for the least distance between stations k and k + 1 wherever place i is a minimum. */
function refined(
  track: Track,
  along: Stations,
  closest: (i: number, k: number) => Place | undefined,
): Places {
  const s: number[] = []
  const t: number[] = []
  const d: number[] = []
  const push = (place: Place): void => {
    if (s.length > 0 && place.s <= s[s.length - 1]! + rounding) return
    s.push(place.s)
    t.push(place.t)
    d.push(place.d)
  }
  for (let i = 0; i < track.d.length; i++) {
    const k = track.first + i
    const here = { s: along.at[k]!, t: track.t[i]!, d: track.d[i]! }
    const least = isMinimum(track.d, i)
    const before = least && k > 0 ? closest(i, k - 1) : undefined
    const after = least && k + 1 < along.at.length ? closest(i, k) : undefined
    if (before !== undefined && before.d < here.d - rounding) push(before)
    push(here)
    if (after !== undefined && after.d < here.d - rounding) push(after)
  }
  return { s, t, d }
}

/** No neighbour is lower, and one at least is higher or missing. */
function isMinimum(d: readonly number[], i: number): boolean {
  const before = d[i - 1] ?? Infinity
  const after = d[i + 1] ?? Infinity
  return (
    d[i]! <= before + rounding &&
    d[i]! <= after + rounding &&
    (d[i]! < before - rounding || d[i]! < after - rounding)
  )
}
