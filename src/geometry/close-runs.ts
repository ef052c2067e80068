/** Where bodies of the sign pass each other within reach. Metres. */
import type { Face, Layout, Point } from '../layout/layout.js'
import type { Body, FixedBody, LeadBody, Polyline } from './conductors.js'
import { footOnFace } from './distance.js'
import { type PieceIndex, pieceIndex } from './piece-index.js'
import { pointAt } from './polyline.js'
import { faceTracks, refinedOnBody, refinedOnFace } from './refined.js'
import { type Places, samplesToKeep, separateStretches, stretchesWithin } from './run-samples.js'
import type { BodyRef, CloseRun } from './runs.js'
import { type Approach, type Stations, stations, tracksAlong } from './tracks.js'

/** clear gap within which two bodies make a run, m */
export const defaultReach = 0.065

/** longest step between two places where distances are taken, m */
export const spacing = 0.005
/** a minimum lies at most half a step from a station, so it is at most this much lower */
export const slack = spacing / 2 + 1e-6

/** One body under way along its stations. */
interface Driver {
  readonly body: Body
  readonly ref: BodyRef
  readonly along: Stations
}

const driver = (body: Body, ref: BodyRef): Driver => ({ body, ref, along: stations(body.line, spacing) })

/**
 * Runs between what the wiring does not move: tube–tube, tube with itself, tube–bar, tube–face. References are
 * places in `bodies`; of two tubes the earlier is a. Bars make no pairs with each other or with the face.
 */
export function fixedRuns(
  bodies: readonly FixedBody[],
  layout: Pick<Layout, 'face'>,
  reach = defaultReach,
): CloseRun[] {
  const index = indexOf(bodies)
  const runs: CloseRun[] = []
  for (const [i, body] of bodies.entries()) {
    if (body.kind !== 'tube') continue
    const tube = driver(body, { kind: 'fixed', index: i })
    const approachTo = (j: number): Approach | undefined => {
      const other = bodies[j]!
      const wanted = other.kind === 'bar' || j === i || drives(body, other, i < j)
      return wanted ? { limit: limitOf(body, other, reach), self: j === i, joints: [] } : undefined
    }
    for (const run of runsAlong(tube, index, approachTo, reach, fixedRef)) {
      const swap = run.b.kind === 'fixed' && bodies[run.b.index]!.kind === 'tube' && run.b.index < i
      runs.push(swap ? swapped(run) : run)
    }
    runs.push(...faceRuns(tube, layout.face, reach))
  }
  return runs
}

/**
 * Runs of one lead: with tubes and bars, with itself, with the face. The lead is a (its index is a placeholder, see
 * withLeadIndex). A lead in metal conduit makes none.
 */
export function leadRuns(
  lead: LeadBody,
  bodies: readonly FixedBody[],
  layout: Pick<Layout, 'face'>,
  reach = defaultReach,
): CloseRun[] {
  if (lead.conduit === 'metal') return []
  const own = driver(lead, leadRef())
  const toFixed = (j: number): Approach => ({
    limit: limitOf(lead, bodies[j]!, reach),
    self: false,
    joints: jointsWith(lead, bodies[j]!),
  })
  const toItself = (): Approach => ({ limit: limitOf(lead, lead, reach), self: true, joints: [] })
  return [
    ...runsAlong(own, indexOf(bodies), toFixed, reach, fixedRef),
    ...runsAlong(own, pieceIndex([lead]), toItself, reach, leadRef),
    ...faceRuns(own, layout.face, reach),
  ]
}

/** Runs between two leads; a is the first. Their indices are placeholders, see withLeadIndex. */
export function leadLeadRuns(a: LeadBody, b: LeadBody, reach = defaultReach): CloseRun[] {
  if (a.conduit === 'metal' || b.conduit === 'metal') return []
  const [first, second] = drives(a, b, true) ? [a, b] : [b, a]
  const approach = { limit: limitOf(a, b, reach), self: false, joints: jointsWith(first, second) }
  if (!boxesWithin(first.line, second.line, approach.limit)) return []
  const runs = runsAlong(driver(first, leadRef()), pieceIndex([second]), () => approach, reach, leadRef)
  return first === a ? runs : runs.map(swapped)
}

/** The same runs with the places of their leads in the wiring filled in; samples are shared, not copied. */
export function withLeadIndex(runs: readonly CloseRun[], a: number, b = a): CloseRun[] {
  return runs.map((run) => ({
    ...run,
    a: run.a.kind === 'lead' ? { kind: 'lead', index: a } : run.a,
    b: run.b.kind === 'lead' ? { kind: 'lead', index: b } : run.b,
  }))
}

const fixedRef = (index: number): BodyRef => ({ kind: 'fixed', index })
const leadRef = (): BodyRef => ({ kind: 'lead', index: -1 })

const limitOf = (a: Body, b: Body, reach: number): number => reach + slack + a.outerRadius + b.outerRadius

// the index of a list of bodies is made once: leads come and go, the list stays
const indices = new WeakMap<readonly FixedBody[], PieceIndex>()
function indexOf(bodies: readonly FixedBody[]): PieceIndex {
  const known = indices.get(bodies)
  if (known !== undefined) return known
  const made = pieceIndex(bodies)
  indices.set(bodies, made)
  return made
}

/**
 * Which of two bodies is followed: the shorter, else by corners. Goes by geometry alone, so that runs do not depend
 * on the order of bodies; `earlier` decides between equals.
 */
function drives(a: Body, b: Body, earlier: boolean): boolean {
  if (a.line.length !== b.line.length) return a.line.length < b.line.length
  const n = Math.min(a.line.points.length, b.line.points.length)
  for (let i = 0; i < n; i++) {
    const difference = a.line.points[i]! - b.line.points[i]!
    if (difference !== 0) return difference < 0
  }
  return earlier
}

/** Path lengths, on the lead and on the other, of the ends that the two share. */
function jointsWith(lead: LeadBody, other: Body): (readonly [number, number])[] {
  if (other.kind === 'bar') return []
  const ends = other.kind === 'tube' ? [`${other.name}.a`, `${other.name}.b`] : other.between
  const joints: (readonly [number, number])[] = []
  for (const [i, end] of lead.between.entries()) {
    for (const [j, otherEnd] of ends.entries()) {
      if (end === otherEnd) joints.push([i * lead.line.length, j * other.line.length])
    }
  }
  return joints
}

function boxesWithin(a: Polyline, b: Polyline, most: number): boolean {
  for (let c = 0; c < 3; c++) {
    const [lowA, highA] = extent(a.points, c)
    const [lowB, highB] = extent(b.points, c)
    if (lowA > highB + most || lowB > highA + most) return false
  }
  return true
}

function extent(points: Float64Array, c: number): readonly [number, number] {
  let low = Infinity
  let high = -Infinity
  for (let i = c; i < points.length; i += 3) {
    low = Math.min(low, points[i]!)
    high = Math.max(high, points[i]!)
  }
  return [low, high]
}

function runsAlong(
  { body, ref, along }: Driver,
  index: PieceIndex,
  approachTo: (body: number) => Approach | undefined,
  reach: number,
  refOf: (body: number) => BodyRef,
): CloseRun[] {
  const runs: CloseRun[] = []
  const widest = reach + slack + body.outerRadius + index.widestRadius
  for (const [j, tracks] of tracksAlong(body.line, along, index, widest, approachTo)) {
    const other = index.bodies[j]!
    const approach = approachTo(j)
    if (approach === undefined) continue
    const radii = body.outerRadius + other.outerRadius
    const onOther = (t: number) => pointAt(other.line, t)
    for (const track of tracks) {
      const places = refinedOnBody(track, along, other.line, approach)
      runs.push(...runsOf(places, radii, reach, ref, refOf(j), body.line, onOther))
    }
  }
  return runs
}

function faceRuns({ body, ref, along }: Driver, face: Face, reach: number): CloseRun[] {
  if (face.metal === 'none') return []
  const runs: CloseRun[] = []
  for (const track of faceTracks(along, face, reach + slack + body.outerRadius)) {
    const places = refinedOnFace(track, along, face)
    const foot = (_t: number, s: number) => footOnFace(pointAt(body.line, s), face.size)
    runs.push(...runsOf(places, body.outerRadius, reach, ref, { kind: 'face' }, body.line, foot))
  }
  return runs
}

/** The runs of one valley, thinned to the places that could be the worst. */
export function runsOf(
  places: Places,
  radii: number,
  reach: number,
  a: BodyRef,
  b: BodyRef,
  line: Polyline,
  onOther: (t: number, s: number) => Point,
): CloseRun[] {
  const runs: CloseRun[] = []
  for (const within of stretchesWithin(places, reach + radii)) {
    for (const stretch of separateStretches(within, radii)) {
      runs.push({ a, b, ...sampled(stretch, samplesToKeep(stretch, radii), radii, line, onOther) })
    }
  }
  return runs
}

function sampled(
  { s, t, d }: Places,
  kept: readonly number[],
  radii: number,
  line: Polyline,
  onOther: (t: number, s: number) => Point,
): Omit<CloseRun, 'a' | 'b'> {
  const n = kept.length
  const atA = new Float64Array(n)
  const atB = new Float64Array(n)
  const gap = new Float64Array(n)
  const pointA = new Float64Array(3 * n)
  const pointB = new Float64Array(3 * n)
  for (const [k, i] of kept.entries()) {
    atA[k] = s[i]!
    atB[k] = t[i]!
    gap[k] = Math.max(0, d[i]! - radii)
    pointA.set(pointAt(line, s[i]!), 3 * k)
    pointB.set(onOther(t[i]!, s[i]!), 3 * k)
  }
  return { atA, atB, gap, pointA, pointB }
}

/** A run seen from the other body; its samples keep their order, along the new b. */
function swapped(run: CloseRun): CloseRun {
  const { a, b, atA, atB, gap, pointA, pointB } = run
  return { a: b, b: a, atA: atB, atB: atA, gap, pointA: pointB, pointB: pointA }
}
