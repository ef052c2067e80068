/** SVG path data as straight pieces. Lengths are those of the data; knows nothing of layouts. */
import svgpath from 'svgpath'

export type PlanePoint = readonly [x: number, y: number]

/** Why path data could not be used; `at` is the character in the data where known. */
export type PathRefusal =
  | { readonly code: 'syntax'; readonly detail: string; readonly at?: number }
  | { readonly code: 'too-long'; readonly limit: number }
  | { readonly code: 'too-many-points'; readonly limit: number }
  | { readonly code: 'not-finite' }

export type FlatPath =
  | { readonly ok: true; readonly subpaths: readonly (readonly PlanePoint[])[] }
  | { readonly ok: false; readonly why: PathRefusal }

export interface Flattening {
  /** largest distance between a curve and its chords */
  readonly tolerance: number
  /** most points of all subpaths together */
  readonly limit: number
}

/** longest path data that is read, characters (the parser's time grows with the square) */
export const longestPathData = 100_000
/** an arc's chords turn by no more than this, so that small bends keep their length to 0.3 % */
const largestTurn = Math.PI / 12

interface Pen {
  readonly subpaths: PlanePoint[][]
  /** the subpath being drawn; not yet in the list while it has one point */
  points: PlanePoint[]
  /** how many more points are allowed, of how many */
  room: number
  readonly limit: number
  refused?: PathRefusal
}

/**
 * The subpaths of path data (all commands of SVG 1.1/2: M L H V C S Q T A Z, absolute and relative), curves cut into
 * chords no farther than `tolerance` from them. A moveto that draws nothing is no subpath.
 */
export function flatPath(data: string, { tolerance, limit }: Flattening): FlatPath {
  if (data.length > longestPathData) return { ok: false, why: { code: 'too-long', limit: longestPathData } }
  const path = svgpath(data)
  const fault = syntaxFault(data, 'err' in path ? path.err : '')
  if (fault) return { ok: false, why: fault }

  const pen: Pen = { subpaths: [], points: [], room: limit, limit }
  let refusal: PathRefusal | undefined
  path
    .abs()
    .unshort()
    .iterate((segment, _index, x, y) => {
      if (refusal) return
      const name: string = segment[0]
      if (name === 'R') refusal = { code: 'syntax', detail: 'R is no command of SVG path data' }
      else if (segment.some((value) => typeof value === 'number' && !Number.isFinite(value)))
        refusal = { code: 'not-finite' }
      else draw(pen, segment, [x, y], tolerance)
      refusal ??= pen.refused
    })
  return refusal ? { ok: false, why: refusal } : { ok: true, subpaths: pen.subpaths }
}

function syntaxFault(data: string, message: unknown): PathRefusal | undefined {
  if (data.trim() === '') return { code: 'syntax', detail: 'the path data is empty', at: 0 }
  if (typeof message !== 'string' || message === '') return undefined
  const detail = message.replace(/^SvgPath: /, '').replace(/ \(at pos \d+\)$/, '')
  const at = /\(at pos (\d+)\)$/.exec(message)?.[1]
  return at === undefined ? { code: 'syntax', detail } : { code: 'syntax', detail, at: Number(at) }
}

type Segment = Parameters<Parameters<ReturnType<typeof svgpath>['iterate']>[0]>[0]

function draw(pen: Pen, segment: Segment, from: PlanePoint, tolerance: number): void {
  switch (segment[0]) {
    case 'M':
      pen.points = [[segment[1], segment[2]]]
      break
    case 'L':
      line(pen, from, [segment[1], segment[2]])
      break
    case 'H':
      line(pen, from, [segment[1], from[1]])
      break
    case 'V':
      line(pen, from, [from[0], segment[1]])
      break
    case 'Q': {
      const [, cx, cy, x, y] = segment
      quadratic(pen, from, [cx, cy], [x, y], tolerance)
      break
    }
    case 'C': {
      const [, cx, cy, dx, dy, x, y] = segment
      cubic(pen, from, [cx, cy], [dx, dy], [x, y], tolerance)
      break
    }
    case 'A': {
      const [, rx, ry, turn, large, sweep, x, y] = segment
      arc(pen, from, { rx, ry, turn, large: large !== 0, sweep: sweep !== 0, to: [x, y] }, tolerance)
      break
    }
    case 'Z':
      close(pen, from)
      break
  }
}

function close(pen: Pen, from: PlanePoint): void {
  const start = pen.points[0]
  if (start && !same(start, from)) line(pen, from, start)
  // what is drawn behind a close is another subpath
  pen.points = start ? [start] : []
}

const same = (p: PlanePoint, q: PlanePoint): boolean => p[0] === q[0] && p[1] === q[1]

function line(pen: Pen, from: PlanePoint, to: PlanePoint): void {
  if (!makeRoom(pen, 1)) return
  if (pen.points.length === 0) pen.points.push(from)
  if (pen.points.length === 1) {
    pen.subpaths.push(pen.points)
    pen.room--
  }
  pen.points.push(to)
  pen.room--
}

/** Whether so many more points are allowed; refuses the path where not. */
function makeRoom(pen: Pen, pieces: number): boolean {
  const starts = pen.points.length < 2 ? 1 : 0
  if (!Number.isFinite(pieces)) pen.refused ??= { code: 'not-finite' }
  else if (pieces + starts > pen.room) pen.refused ??= { code: 'too-many-points', limit: pen.limit }
  return pen.refused === undefined
}

/** Draws n chords of the curve `at`, 0 < t ≤ 1; the last point is `to` itself. */
function chords(
  pen: Pen,
  pieces: number,
  from: PlanePoint,
  to: PlanePoint,
  at: (t: number) => PlanePoint,
): void {
  if (!makeRoom(pen, pieces)) return
  let last = from
  for (let k = 1; k <= pieces; k++) {
    const next = k === pieces ? to : at(k / pieces)
    line(pen, last, next)
    last = next
  }
}

/** Equal steps of the parameter: a chord over a step h lies within h²/8 · max|B″| of its curve. */
const bezierPieces = (secondDerivative: number, tolerance: number): number =>
  Math.max(1, Math.ceil(Math.sqrt(secondDerivative / (8 * tolerance))))

const bend = (p: PlanePoint, q: PlanePoint, r: PlanePoint): number =>
  Math.hypot(p[0] - 2 * q[0] + r[0], p[1] - 2 * q[1] + r[1])

function quadratic(pen: Pen, a: PlanePoint, b: PlanePoint, c: PlanePoint, tolerance: number): void {
  chords(pen, bezierPieces(2 * bend(a, b, c), tolerance), a, c, (t) => {
    const [u, v, w] = [(1 - t) ** 2, 2 * t * (1 - t), t * t]
    return [u * a[0] + v * b[0] + w * c[0], u * a[1] + v * b[1] + w * c[1]]
  })
}

function cubic(
  pen: Pen,
  a: PlanePoint,
  b: PlanePoint,
  c: PlanePoint,
  d: PlanePoint,
  tolerance: number,
): void {
  const pieces = bezierPieces(6 * Math.max(bend(a, b, c), bend(b, c, d)), tolerance)
  chords(pen, pieces, a, d, (t) => {
    const s = 1 - t
    const [u, v, w, z] = [s ** 3, 3 * s * s * t, 3 * s * t * t, t ** 3]
    return [u * a[0] + v * b[0] + w * c[0] + z * d[0], u * a[1] + v * b[1] + w * c[1] + z * d[1]]
  })
}

interface Arc {
  readonly rx: number
  readonly ry: number
  /** rotation of the ellipse's x axis, degrees */
  readonly turn: number
  readonly large: boolean
  readonly sweep: boolean
  readonly to: PlanePoint
}

/** An elliptical arc from its end points (W3C, SVG 2, implementation notes B.2.4–B.2.5). */
function arc(pen: Pen, from: PlanePoint, { rx, ry, turn, large, sweep, to }: Arc, tolerance: number): void {
  if (same(from, to)) return
  if (rx === 0 || ry === 0) {
    line(pen, from, to)
    return
  }
  const phi = (turn * Math.PI) / 180
  const [cos, sin] = [Math.cos(phi), Math.sin(phi)]

  // half the way between the ends, in the axes of the ellipse
  const [hx, hy] = [(from[0] - to[0]) / 2, (from[1] - to[1]) / 2]
  const [ux, uy] = [cos * hx + sin * hy, -sin * hx + cos * hy]

  // radii too small to reach are scaled up
  const reach = Math.hypot(ux / rx, uy / ry)
  const scale = Math.max(1, reach)
  const [a, b] = [Math.abs(rx) * scale, Math.abs(ry) * scale]

  // the centre, on the side that the two flags choose; the ends on the unit circle
  const [px, py] = [ux / a, uy / b]
  const square = px * px + py * py
  const side = (large === sweep ? -1 : 1) * Math.sqrt(Math.max(0, (1 - square) / square))
  const [qx, qy] = [side * py, -side * px]
  const start = Math.atan2(py - qy, px - qx)
  const end = Math.atan2(-py - qy, -px - qx)
  const full = 2 * Math.PI
  const span = sweep ? (((end - start) % full) + full) % full : -((((start - end) % full) + full) % full)

  // a chord over the angle θ of a circle of radius r bulges by r (1 − cos θ/2)
  const step = Math.min(largestTurn, 2 * Math.acos(Math.max(0, 1 - tolerance / Math.max(a, b))))
  const [cx, cy] = [(from[0] + to[0]) / 2, (from[1] + to[1]) / 2]
  chords(pen, Math.max(1, Math.ceil(Math.abs(span) / step)), from, to, (t) => {
    const [x, y] = [a * (Math.cos(start + t * span) + qx), b * (Math.sin(start + t * span) + qy)]
    return [cx + cos * x - sin * y, cy + sin * x + cos * y]
  })
}
