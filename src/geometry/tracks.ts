/**
 * Valleys of the distance between one body and others: for every station along the body, each place of the others
 * that is nearest among its neighbours, joined from station to station. Metres.
 */
import type { Polyline } from './conductors.js'
import { type PieceIndex, piecesIn } from './piece-index.js'

/** Places along a path at equal steps within each piece, with every corner among them. */
export interface Stations {
  readonly at: Float64Array
  /** x, y, z of each station */
  readonly points: Float64Array
}

/** One valley: at station `first + i` the other body is nearest at path length t[i], with axis distance d[i]. */
export interface Track {
  readonly first: number
  readonly t: number[]
  readonly d: number[]
}

/** How a body may be approached. */
export interface Approach {
  /** greatest axis distance that counts */
  readonly limit: number
  /** the other body is this body: only places further on, each pair of places once */
  readonly self: boolean
  /** path lengths, along this body and along the other, where the two are joined */
  readonly joints: readonly (readonly [number, number])[]
}

/** path distance over axis distance up to which two places are merely continuous */
const continuous = 3
/** places nearer along the path are one place to rounding, m */
const samePlace = 1e-6
/** ridges lower than this between two valleys are ripple of flattened curves */
const ripple = 0.0002
/** path length of the body that shares one search of the index */
const chunkLength = 0.06

export function stations(line: Polyline, spacing: number): Stations {
  const at: number[] = []
  const points: number[] = []
  const push = (s: number, i: number, u: number): void => {
    at.push(s)
    const j = Math.min(i + 1, line.at.length - 1)
    for (let c = 0; c < 3; c++) {
      const from = line.points[3 * i + c]!
      points.push(from + u * (line.points[3 * j + c]! - from))
    }
  }
  for (let i = 0; i + 1 < line.at.length; i++) {
    const length = line.at[i + 1]! - line.at[i]!
    const steps = Math.max(1, Math.ceil(length / spacing - 1e-9))
    for (let k = 0; k < steps; k++) push(line.at[i]! + (length * k) / steps, i, k / steps)
  }
  const last = line.at.length - 1
  if (last >= 0) push(line.at[last]!, last, 0)
  return { at: Float64Array.from(at), points: Float64Array.from(points) }
}

/** Whether two places are more than continuous along the glass, or through a joint. */
export function areApart(approach: Approach, s: number, t: number, d: number): boolean {
  if (approach.self) return t - s > continuous * d + samePlace
  for (const [onThis, onOther] of approach.joints) {
    if (Math.abs(s - onThis) + Math.abs(t - onOther) <= continuous * d + samePlace) return false
  }
  return true
}

/** The valleys found at one station of one other body, along its path; reused from station to station. */
interface Valleys {
  count: number
  readonly t: Float64Array
  readonly d: Float64Array
  /** height of the ridge towards the valley before */
  readonly ridge: Float64Array
}

/**
 * All tracks along a body, by other body. `approachTo` says how each body of the index may be approached, or that it
 * is not wanted. Corners are stations, so between two stations the body is straight.
 */
export function tracksAlong(
  line: Polyline,
  along: Stations,
  index: PieceIndex,
  widestLimit: number,
  approachTo: (body: number) => Approach | undefined,
): Map<number, Track[]> {
  const tracks = new Map<number, Track[]>()
  const open = new Map<number, Track[]>()
  const most = Math.max(1, index.bodyOf.length)
  const valleys: Valleys = {
    count: 0,
    t: new Float64Array(most),
    d: new Float64Array(most),
    ridge: new Float64Array(most),
  }
  const approaches = new Map<number, Approach | undefined>()
  for (let from = 0; from < along.at.length; ) {
    let to = from + 1
    while (to < along.at.length && along.at[to]! - along.at[from]! <= chunkLength) to++
    const pieces = piecesIn(index, chunkBox(along, from, to, widestLimit))
    // pieces come grouped by body
    for (let i = 0; i < pieces.length; ) {
      const body = index.bodyOf[pieces[i]!]!
      let end = i + 1
      while (end < pieces.length && index.bodyOf[pieces[end]!] === body) end++
      if (!approaches.has(body)) approaches.set(body, approachTo(body))
      const approach = approaches.get(body)
      if (approach !== undefined) {
        const group = pieces.subarray(i, end)
        for (let k = from; k < to; k++) {
          findValleys(valleys, index, group, approach, along, k)
          const going = join(open.get(body) ?? [], valleys, along, k, line.length)
          open.set(body, going.open)
          if (going.started.length > 0) tracks.set(body, [...(tracks.get(body) ?? []), ...going.started])
        }
      }
      i = end
    }
    from = to
  }
  return tracks
}

function chunkBox(along: Stations, from: number, to: number, margin: number) {
  const low = [Infinity, Infinity, Infinity]
  const high = [-Infinity, -Infinity, -Infinity]
  for (let k = from; k < to; k++) {
    for (let c = 0; c < 3; c++) {
      low[c] = Math.min(low[c]!, along.points[3 * k + c]!)
      high[c] = Math.max(high[c]!, along.points[3 * k + c]!)
    }
  }
  return [
    low[0]! - margin,
    low[1]! - margin,
    low[2]! - margin,
    high[0]! + margin,
    high[1]! + margin,
    high[2]! + margin,
  ] as const
}

/**
 * Numeric kernel: distances from station k to the pieces of one body (ascending), and the valleys among them. On a
 * piece the square of the distance is convex, so a valley is a foot inside a piece, a corner that both its pieces
 * fall towards, or an end of the path; a ridge is always at a corner.
 */
function findValleys(
  valleys: Valleys,
  index: PieceIndex,
  pieces: Int32Array,
  approach: Approach,
  along: Stations,
  k: number,
): void {
  const { ends, at, lengths, bodyOf } = index
  const x = along.points[3 * k]!
  const y = along.points[3 * k + 1]!
  const z = along.points[3 * k + 2]!
  const s = along.at[k]!
  const limit2 = approach.limit * approach.limit
  let previous = -2
  let fallsToEnd = false
  let ridge2 = Infinity
  valleys.count = 0
  for (let i = 0; i < pieces.length; i++) {
    const piece = pieces[i]!
    if (approach.self && at[piece]! + lengths[piece]! < s) continue
    const e = 6 * piece
    const px = x - ends[e]!
    const py = y - ends[e + 1]!
    const pz = z - ends[e + 2]!
    const ax = ends[e + 3]! - ends[e]!
    const ay = ends[e + 4]! - ends[e + 1]!
    const az = ends[e + 5]! - ends[e + 2]!
    const square = ax * ax + ay * ay + az * az
    const raw = square > 0 ? (px * ax + py * ay + pz * az) / square : 0
    const u = raw < 0 ? 0 : Math.min(raw, 1)
    const dx = px - u * ax
    const dy = py - u * ay
    const dz = pz - u * az
    const d2 = dx * dx + dy * dy + dz * dz
    const follows = piece === previous + 1
    // the ridge since the last valley; pieces left out are out of reach
    ridge2 = follows ? Math.max(ridge2, px * px + py * py + pz * pz) : Infinity
    const first = piece === 0 || bodyOf[piece - 1] !== bodyOf[piece]
    const last = piece + 1 === bodyOf.length || bodyOf[piece + 1] !== bodyOf[piece]
    const valley =
      (u > 0 && u < 1) || (u === 0 && (first || (follows && fallsToEnd))) || (u === 1 && last) || square === 0
    if (valley && d2 <= limit2) {
      const d = Math.sqrt(d2)
      const t = at[piece]! + u * lengths[piece]!
      if (areApart(approach, s, t, d) && keepValley(valleys, t, d, Math.sqrt(ridge2))) ridge2 = 0
    }
    previous = piece
    fallsToEnd = u === 1
  }
}

/** Adds a valley unless it is ripple beside a deeper one; takes out shallower ripple before it. */
function keepValley(valleys: Valleys, t: number, d: number, ridgeBefore: number): boolean {
  let ridge = ridgeBefore
  while (valleys.count > 0) {
    const before = valleys.count - 1
    if (ridge - Math.max(valleys.d[before]!, d) >= ripple) break
    if (valleys.d[before]! <= d) return false
    ridge = Math.max(ridge, valleys.ridge[before]!)
    valleys.count = before
  }
  valleys.t[valleys.count] = t
  valleys.d[valleys.count] = d
  valleys.ridge[valleys.count] = ridge
  valleys.count++
  return true
}

/** Goes on with the open tracks that reach this station, nearest first, and starts new ones. */
function join(
  before: readonly Track[],
  valleys: Valleys,
  along: Stations,
  k: number,
  length: number,
): { open: Track[]; started: Track[] } {
  const waiting = before.filter((track) => track.first + track.t.length === k)
  const step = k > 0 ? along.at[k]! - along.at[k - 1]! : length
  const open: Track[] = []
  const started: Track[] = []
  const taken = new Set<number>()
  // a foot moves no faster than the station, but for the inside of a bend; faster than thrice is a jump
  for (const [track, v] of nearestFirst(waiting, valleys, 3 * step + 0.005)) {
    if (taken.has(v) || open.includes(track)) continue
    track.t.push(valleys.t[v]!)
    track.d.push(valleys.d[v]!)
    taken.add(v)
    open.push(track)
  }
  for (let v = 0; v < valleys.count; v++) {
    if (taken.has(v)) continue
    const track = { first: k, t: [valleys.t[v]!], d: [valleys.d[v]!] }
    open.push(track)
    started.push(track)
  }
  return { open, started }
}

function nearestFirst(
  tracks: readonly Track[],
  valleys: Valleys,
  most: number,
): (readonly [Track, number])[] {
  const near: (readonly [Track, number, number])[] = []
  for (const track of tracks) {
    for (let v = 0; v < valleys.count; v++) {
      const moved = Math.abs(valleys.t[v]! - track.t[track.t.length - 1]!)
      if (moved <= most) near.push([track, v, moved])
    }
  }
  near.sort((p, q) => p[2] - q[2])
  return near.map(([track, v]) => [track, v] as const)
}
