/** What the patches of sheets must be fine enough for: conductors near them, and the edges of sheets that face them. */
import type { SheetBody } from '../geometry/conductors.js'
import { pieceToRectangle, rectangleStride } from '../geometry/rectangles.js'
import type { Segments } from '../geometry/segments.js'

/** Straight lines whose charge sheets must resolve. */
export interface Sources {
  readonly lines: Float64Array
  /** of conductors their equivalent radii, of edges 0 */
  readonly radius: Float64Array
  /** size of a patch over the distance, in units of the rule's */
  readonly scale: Float64Array
  /** sheets that do not heed it: their own edges, and those of sheets they touch */
  readonly deaf: readonly (ReadonlySet<number> | undefined)[]
}

/** a sheet nearer than this to an edge is joined to it, m */
const joined = 0.002
/** patches facing an edge may be so much larger than those facing a conductor */
const edgeScale = 1.5

/** Segments of conductors alone. */
export const segmentSources = ({ lines, radius }: Pick<Segments, 'lines' | 'radius'>): Sources => ({
  lines,
  radius,
  scale: new Float64Array(radius.length).fill(1),
  deaf: [],
})

/** Segments of what is fixed, and the edges of sheets. */
export function sources({ lines, radius }: Segments, sheets: readonly SheetBody[], plane: boolean): Sources {
  const pieces = Array.from(lines)
  const deaf: (ReadonlySet<number> | undefined)[] = Array.from(radius, () => undefined)
  for (const [s, sheet] of sheets.entries()) {
    for (const piece of edgesOf(sheet)) {
      pieces.push(...piece)
      deaf.push(joinedTo(piece, s, sheets))
      if (!plane) continue
      // the own image is a sheet that faces this one, but for one that touches the face
      const image = piece.map((x, k) => (k === 2 || k === 5 ? -x : x))
      pieces.push(...image)
      deaf.push(joinedTo(image, -1, sheets))
    }
  }
  const conductors = radius.length
  return {
    lines: Float64Array.from(pieces),
    radius: Float64Array.from(deaf, (_, i) => radius[i] ?? 0),
    scale: Float64Array.from(deaf, (_, i) => (i < conductors ? 1 : edgeScale)),
    deaf,
  }
}

/** Start, direction and length. */
function pieceBetween(p: ArrayLike<number>, q: ArrayLike<number>): number[] {
  const along = [0, 1, 2].map((k) => q[k]! - p[k]!)
  const length = Math.hypot(...along)
  return [p[0]!, p[1]!, p[2]!, ...along.map((x) => x / length), length]
}

/** The outer edges of a sheet as lines. */
function edgesOf({ chords, edges }: SheetBody): number[][] {
  return Array.from(edges).flatMap((free, n) => {
    if (!free) return []
    const r = chords.subarray((n >> 2) * rectangleStride)
    const corner = (s: number, t: number) =>
      [0, 1, 2].map((k) => r[k]! + s * r[9]! * r[3 + k]! + t * r[10]! * r[6 + k]!)
    const end = n & 1 ? 1 : -1
    return [
      (n & 2) === 0
        ? pieceBetween(corner(end, -1), corner(end, 1))
        : pieceBetween(corner(-1, end), corner(1, end)),
    ]
  })
}

/** Sheets that touch this line, with its own. */
function joinedTo(piece: readonly number[], own: number, sheets: readonly SheetBody[]): ReadonlySet<number> {
  const from = [piece[0]!, piece[1]!, piece[2]!] as const
  const to = [0, 1, 2].map((k) => piece[k]! + piece[6]! * piece[3 + k]!)
  const touching = sheets.flatMap(({ chords }, s) => {
    for (let k = 0; k * rectangleStride < chords.length; k++)
      if (pieceToRectangle(chords, k, from, [to[0]!, to[1]!, to[2]!], 20, foot) < joined) return [s]
    return []
  })
  return new Set([own, ...touching])
}

const foot = new Float64Array(5)
