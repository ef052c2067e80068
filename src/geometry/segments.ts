/**
 * Centre-lines cut into straight segments, the pieces that carry one charge each. Metres.
 *
 * A segment is a chord of the path. Cuts come where the path turns sharply and where it goes through a metal face;
 * between those the path is shared out evenly, finer where it bends and where another conductor crosses it steeply
 * at a small gap. No segment is shorter than about one radius: the thin-wire equation gets unstable below half of
 * that, so short pieces of path are merged into one chord.
 */
import { type Approach, closestApproach, lineStride } from './closest-approach.js'
import type { Polyline } from './conductors.js'
import { pointAt } from './polyline.js'

export interface Segments {
  readonly count: number
  /** start x, y, z, unit direction x, y, z and length of each segment */
  readonly lines: Float64Array
  /** two unit vectors across each segment, at right angles to each other */
  readonly frames: Float64Array
  /** equivalent and outer radius of each */
  readonly radius: Float64Array
  readonly outer: Float64Array
  /** index of the body each belongs to */
  readonly body: Int32Array
  /** path length from the start of the body to the middle of each */
  readonly at: Float64Array
  /** length of the body's path where that is closed, otherwise 0 */
  readonly loop: Float64Array
  /** +1 in front of a metal face, −1 behind it (everywhere +1 without one) */
  readonly side: Int8Array
}

/** What the cutting needs to know of a body. */
export interface Cuttable {
  readonly line: Polyline
  readonly equivalentRadius: number
  readonly outerRadius: number
}

export interface CutRules {
  /** usual and least length of a segment, in equivalent radii */
  readonly usual: number
  readonly least: number
  /** there is metal at z = 0 */
  readonly plane: boolean
}

/** A stretch of path to be cut finer. */
export interface Window {
  readonly at: number
  readonly reach: number
  readonly length: number
}

/** turn of the path that always makes a cut, and turn that one segment may bridge */
const sharpTurn = (30 * Math.PI) / 180
const turnPerSegment = (50 * Math.PI) / 180

const directionAt = (line: Polyline, piece: number, k: number): number =>
  (line.points[3 * piece + 3 + k]! - line.points[3 * piece + k]!) / (line.at[piece + 1]! - line.at[piece]!)

/** Angle between the pieces before and after corner v. */
function turnAt(line: Polyline, v: number): number {
  let cosine = 0
  for (let k = 0; k < 3; k++) cosine += directionAt(line, v - 1, k) * directionAt(line, v, k)
  return Math.acos(Math.min(1, Math.max(-1, cosine)))
}

/** Path lengths where a cut must be: both ends, sharp corners (not closer than `least`), passages through z = 0. */
function mustCut(line: Polyline, least: number, plane: boolean): number[] {
  const corners: number[] = []
  const passages: number[] = []
  for (let v = 0; v + 1 < line.at.length; v++) {
    if (v > 0 && turnAt(line, v) > sharpTurn) corners.push(line.at[v]!)
    const z0 = line.points[3 * v + 2]!
    const z1 = line.points[3 * v + 5]!
    if (plane && z0 * z1 < 0) passages.push(line.at[v]! + ((line.at[v + 1]! - line.at[v]!) * z0) / (z0 - z1))
  }
  const fixed = [0, ...passages, line.length]
  const kept: number[] = []
  for (const s of corners) {
    if (fixed.every((f) => Math.abs(f - s) >= least) && s - (kept.at(-1) ?? -Infinity) >= least) kept.push(s)
  }
  return [...fixed, ...kept].sort((p, q) => p - q)
}

/** Running cost along the path, one unit a segment: length over usual length, and turning. */
function costAlong(
  line: Polyline,
  usual: number,
  windows: readonly Window[],
): { s: number[]; cost: number[] } {
  const s = [0]
  const cost = [0]
  const step = windows.reduce((least, w) => Math.min(least, w.length), usual) / 4
  for (let v = 0; v + 1 < line.at.length; v++) {
    const from = line.at[v]!
    const length = line.at[v + 1]! - from
    if (v > 0) {
      s.push(from)
      cost.push(cost.at(-1)! + Math.min(1, turnAt(line, v) / turnPerSegment))
    }
    const steps = Math.max(1, Math.ceil(length / step))
    for (let k = 1; k <= steps; k++) {
      const middle = from + ((k - 0.5) * length) / steps
      let local = usual
      for (const w of windows) if (Math.abs(middle - w.at) < w.reach) local = Math.min(local, w.length)
      s.push(from + (k * length) / steps)
      cost.push(cost.at(-1)! + length / steps / local)
    }
  }
  return { s, cost }
}

/** Path lengths of all cuts of a line, both ends included. */
export function cutPlaces(
  line: Polyline,
  radius: number,
  usual: number,
  rules: CutRules,
  windows: readonly Window[] = [],
): number[] {
  const least = rules.least * radius
  const stops = mustCut(line, least, rules.plane)
  const { s, cost } = costAlong(line, usual, windows)
  const costAt = (place: number): number => {
    const k = Math.max(
      1,
      s.findIndex((x) => x >= place - 1e-12),
    )
    const span = s[k]! - s[k - 1]!
    return cost[k - 1]! + (span > 0 ? ((place - s[k - 1]!) / span) * (cost[k]! - cost[k - 1]!) : 0)
  }
  const places = [0]
  for (let p = 1; p < stops.length; p++) {
    const from = stops[p - 1]!
    const to = stops[p]!
    const c0 = costAt(from)
    const total = costAt(to) - c0
    const pieces = Math.max(1, Math.min(Math.ceil(total - 0.3), Math.floor((to - from) / least)))
    let k = 1
    for (let q = 1; q < pieces; q++) {
      // the place where the cost reaches q shares of the stretch
      const wanted = c0 + (q * total) / pieces
      while (k + 1 < s.length && cost[k]! < wanted) k++
      const rise = cost[k]! - cost[k - 1]!
      const place = s[k - 1]! + (rise > 0 ? ((wanted - cost[k - 1]!) / rise) * (s[k]! - s[k - 1]!) : 0)
      if (place - places.at(-1)! >= least && to - place >= least) places.push(place)
    }
    places.push(to)
  }
  return places
}

/** One chord before it goes into the arrays. */
interface Chord {
  readonly p: readonly number[]
  readonly q: readonly number[]
  readonly at: number
  readonly side: 1 | -1
}

/** The chord between two places; with a plane both ends are held `clear` away from it, on the side of its middle. */
function chord(line: Polyline, from: number, to: number, clear: number, plane: boolean): Chord {
  const p = [...pointAt(line, from)]
  const q = [...pointAt(line, to)]
  const at = (from + to) / 2
  const side = plane && p[2]! + q[2]! < 0 ? -1 : 1
  if (plane) for (const end of [p, q]) end[2] = side * Math.max(clear, side * end[2]!)
  return { p, q, at, side }
}

const chordLength = ({ p, q }: Chord): number => Math.hypot(q[0]! - p[0]!, q[1]! - p[1]!, q[2]! - p[2]!)

/** All chords of a body. What vanishes in the hole of the face carries no charge; a body keeps one chord at least. */
function chordsOf(body: Cuttable, places: readonly number[], rules: CutRules): Chord[] {
  // bare metal on a metal face would have no gap at all: three hundredths of a radius are left
  const clear = Math.max(body.outerRadius, 1.03 * body.equivalentRadius)
  const chords: Chord[] = []
  for (let k = 1; k < places.length; k++) {
    chords.push(chord(body.line, places[k - 1]!, places[k]!, clear, rules.plane))
  }
  const kept = chords.filter((c) => chordLength(c) > 0.3 * body.equivalentRadius)
  if (kept.length > 0) return kept
  const { p, at, side } = chord(body.line, body.line.length / 2, body.line.length / 2, clear, rules.plane)
  const half = body.equivalentRadius / 2
  return [{ p: [p[0]! - half, p[1]!, p[2]!], q: [p[0]! + half, p[1]!, p[2]!], at, side }]
}

/** Two unit vectors across a direction. */
function crossFrame(u: Float64Array, at: number, out: Float64Array, to: number): void {
  const x = u[at]!
  const y = u[at + 1]!
  const z = u[at + 2]!
  // start from the axis that is most across
  const flat = Math.abs(z) < 0.8
  let ex = flat ? -y : 0
  let ey = flat ? x : -z
  let ez = flat ? 0 : y
  const norm = Math.hypot(ex, ey, ez)
  ex /= norm
  ey /= norm
  ez /= norm
  out.set([ex, ey, ez, y * ez - z * ey, z * ex - x * ez, x * ey - y * ex], to)
}

/** The segments of all bodies, cut at the given places. */
export function segmentsAt(
  bodies: readonly Cuttable[],
  places: readonly (readonly number[])[],
  rules: CutRules,
): Segments {
  const chords = bodies.map((body, b) => chordsOf(body, places[b]!, rules))
  const count = chords.reduce((sum, list) => sum + list.length, 0)
  const lines = new Float64Array(count * lineStride)
  const frames = new Float64Array(count * 6)
  const radius = new Float64Array(count)
  const outer = new Float64Array(count)
  const body = new Int32Array(count)
  const at = new Float64Array(count)
  const loop = new Float64Array(count)
  const side = new Int8Array(count)
  let i = 0
  bodies.forEach((cuttable, b) => {
    const closed = isClosed(cuttable.line)
    for (const c of chords[b]!) {
      const length = chordLength(c)
      for (let k = 0; k < 3; k++) {
        lines[i * lineStride + k] = c.p[k]!
        lines[i * lineStride + 3 + k] = (c.q[k]! - c.p[k]!) / length
      }
      lines[i * lineStride + 6] = length
      crossFrame(lines, i * lineStride + 3, frames, 6 * i)
      radius[i] = cuttable.equivalentRadius
      outer[i] = cuttable.outerRadius
      body[i] = b
      at[i] = c.at
      loop[i] = closed ? cuttable.line.length : 0
      side[i] = c.side
      i++
    }
  })
  return { count, lines, frames, radius, outer, body, at, loop, side }
}

function isClosed({ points, length }: Polyline): boolean {
  const n = points.length - 3
  const apart = Math.hypot(points[0]! - points[n]!, points[1]! - points[n + 1]!, points[2]! - points[n + 2]!)
  return apart < 1e-6 * length
}

/** Path length between the middles of two segments of one body, the shorter way round where it is closed. */
export function pathBetween(segments: Segments, i: number, j: number): number {
  const along = Math.abs(segments.at[i]! - segments.at[j]!)
  const loop = segments.loop[i]!
  return loop > 0 ? Math.min(along, loop - along) : along
}

/**
 * Where segments of `a` are crossed steeply (over 30°) by segments of `b` at a gap under twice the larger outer radius:
 * windows on the bodies of a. With b = a, crossings of a body with itself count where the path between is long.
 */
export function crossingWindows(a: Segments, b: Segments, bodies: number, rules: CutRules): Window[][] {
  const windows: Window[][] = Array.from({ length: bodies }, () => [])
  const found: Approach = new Float64Array(6)
  for (let i = 0; i < a.count; i++) {
    for (let j = 0; j < b.count; j++) {
      if (a.side[i] !== b.side[j] || (a === b && i === j)) continue
      const touching = a.outer[i]! + b.outer[j]!
      const reach = touching + 2 * Math.max(a.outer[i]!, b.outer[j]!)
      if (!mayCross(a, i, b, j, reach)) continue
      const distance = closestApproach(a.lines, i, b.lines, j, found)
      if (distance > reach) continue
      if (a === b && a.body[i] === b.body[j] && pathBetween(a, i, j) < 3 * Math.max(distance, touching))
        continue
      const axes = Math.max(distance, touching)
      const length = Math.max(rules.least * 1.25 * a.radius[i]!, 0.186 * rules.usual * axes)
      const at = a.at[i]! + found[1]! - a.lines[i * lineStride + 6]! / 2
      windows[a.body[i]!]!.push({ at, reach: 1.3 * axes, length })
    }
  }
  return windows
}

/** Steep enough, and middles near enough that the segments could be within `reach`. */
function mayCross(a: Segments, i: number, b: Segments, j: number, reach: number): boolean {
  const p = i * lineStride
  const q = j * lineStride
  const l = a.lines[p + 6]!
  const m = b.lines[q + 6]!
  let cosine = 0
  let apart = 0
  for (let k = 0; k < 3; k++) {
    const u = a.lines[p + 3 + k]!
    const v = b.lines[q + 3 + k]!
    cosine += u * v
    apart += (a.lines[p + k]! + (u * l) / 2 - b.lines[q + k]! - (v * m) / 2) ** 2
  }
  return cosine * cosine < 0.75 && apart < (reach + (l + m) / 2) ** 2
}
