/** Plates and upright walls of a layout as sheets in space. Metres. */
import type { Face, Layout, PathPoint, Plate, Wall } from '../layout/layout.js'
import type { SheetBody } from './conductors.js'
import { rectangleStride } from './rectangles.js'

/** a plate nearer than this to the metal face lies on it, m (ours: a coat of paint and an uneven sheet) */
export const lyingHeight = 0.0005

/** turn of a wall's path that stays a corner, and turn that one chord may bridge */
const sharpTurn = (20 * Math.PI) / 180
const turnPerChord = (25 * Math.PI) / 180

/**
 * Sheets in layout order. A plate that lies on a grounded face is held by it over its whole area, painted or not, so
 * it counts as grounded whatever the file says. A wall that stands on the face touches it along an edge at most: there
 * the file's word holds.
 */
export const sheetBodies = (layout: Pick<Layout, 'metal' | 'face'>): readonly SheetBody[] =>
  layout.metal.flatMap((metal) => {
    if (metal.kind === 'plate') return [plateBody(metal, layout.face)]
    return metal.kind === 'wall' ? [wallBody(metal)] : []
  })

function plateBody({ id, grounded, corners: [p, q], height }: Plate, face: Face): SheetBody {
  const rectangles = Float64Array.of(
    ...[(p.x + q.x) / 2, (p.y + q.y) / 2, height],
    ...[1, 0, 0],
    ...[0, 1, 0],
    ...[Math.abs(q.x - p.x) / 2, Math.abs(q.y - p.y) / 2],
  )
  const held = face.metal === 'grounded' && Math.abs(height) < lyingHeight
  const edges = Uint8Array.of(1, 1, 1, 1)
  return { kind: 'sheet', name: id, grounded: grounded || held, rectangles, chords: rectangles, edges }
}

function wallBody({ id, grounded, path, from, to }: Wall): SheetBody {
  const corners = path.filter((p, i) => i === 0 || apart(p, path[i - 1]!) > 1e-9)
  const few = chordCorners(corners)
  const closed = apart(corners[0]!, corners[corners.length - 1]!) < 1e-6
  const last = few.length - 2
  const edges = few
    .slice(1)
    .flatMap((_, k) => [!closed && k === 0 ? 1 : 0, !closed && k === last ? 1 : 0, 1, 1])
  return {
    kind: 'sheet',
    name: id,
    grounded,
    rectangles: upright(corners, from, to),
    chords: upright(few, from, to),
    edges: Uint8Array.from(edges),
  }
}

const apart = (p: PathPoint, q: PathPoint): number => Math.hypot(p.x - q.x, p.y - q.y)

function upright(corners: readonly PathPoint[], from: number, to: number): Float64Array {
  const out = new Float64Array(Math.max(0, corners.length - 1) * rectangleStride)
  for (let k = 0; k + 1 < corners.length; k++) {
    const [p, q] = [corners[k]!, corners[k + 1]!]
    const length = apart(p, q)
    out.set(
      [
        ...[(p.x + q.x) / 2, (p.y + q.y) / 2, (from + to) / 2],
        ...[(q.x - p.x) / length, (q.y - p.y) / length, 0],
        ...[0, 0, 1],
        ...[length / 2, Math.abs(to - from) / 2],
      ],
      k * rectangleStride,
    )
  }
  return out
}

/** The corners that chords run between: sharp ones, and as few of a curve as keep each chord's turn small. */
function chordCorners(corners: readonly PathPoint[]): PathPoint[] {
  const heading = (k: number): number =>
    Math.atan2(corners[k + 1]!.y - corners[k]!.y, corners[k + 1]!.x - corners[k]!.x)
  const kept = [corners[0]!]
  let turned = 0
  for (let k = 1; k + 1 < corners.length; k++) {
    const change = heading(k) - heading(k - 1)
    const turn = Math.abs(Math.atan2(Math.sin(change), Math.cos(change)))
    turned += turn
    if (turn <= sharpTurn && turned <= turnPerChord) continue
    kept.push(corners[k]!)
    turned = turn > sharpTurn ? 0 : turn
  }
  return [...kept, corners[corners.length - 1]!]
}
