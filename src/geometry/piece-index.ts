/** All straight pieces of some bodies, found by place. Metres. */
import Flatbush from 'flatbush'
import type { Body } from './conductors.js'

/** Pieces are numbered body after body, along each path; a body that is a single point has one piece without length. */
export interface PieceIndex {
  readonly bodies: readonly Body[]
  /** of each piece: which body, the path length at its start, its length */
  readonly bodyOf: Int32Array
  readonly at: Float64Array
  readonly lengths: Float64Array
  /** x, y, z of start and of end of each piece */
  readonly ends: Float64Array
  readonly tree: Flatbush | undefined
  readonly widestRadius: number
}

/** A box in space: least and greatest x, y, z. */
export type Box = readonly [number, number, number, number, number, number]

const piecesOf = ({ line }: Body): number => (line.at.length === 0 ? 0 : Math.max(1, line.at.length - 1))

export function pieceIndex(bodies: readonly Body[]): PieceIndex {
  const count = bodies.reduce((sum, body) => sum + piecesOf(body), 0)
  const bodyOf = new Int32Array(count)
  const at = new Float64Array(count)
  const lengths = new Float64Array(count)
  const ends = new Float64Array(6 * count)
  const tree = count > 0 ? new Flatbush(count) : undefined
  let next = 0
  for (const [k, body] of bodies.entries()) {
    const { points, at: lineAt } = body.line
    for (let i = 0; i < piecesOf(body); i++) {
      const last = Math.min(i + 1, lineAt.length - 1)
      for (let c = 0; c < 3; c++) {
        ends[6 * next + c] = points[3 * i + c]!
        ends[6 * next + 3 + c] = points[3 * last + c]!
      }
      bodyOf[next] = k
      at[next] = lineAt[i]!
      lengths[next] = lineAt[last]! - lineAt[i]!
      const e = 6 * next
      tree?.add(
        Math.min(ends[e]!, ends[e + 3]!),
        Math.min(ends[e + 1]!, ends[e + 4]!),
        Math.max(ends[e]!, ends[e + 3]!),
        Math.max(ends[e + 1]!, ends[e + 4]!),
      )
      next++
    }
  }
  tree?.finish()
  const widestRadius = bodies.reduce((widest, body) => Math.max(widest, body.outerRadius), 0)
  return { bodies, bodyOf, at, lengths, ends, tree, widestRadius }
}

/** Pieces whose boxes touch this box, in ascending order: grouped by body, along the path. */
export function piecesIn(index: PieceIndex, box: Box): Int32Array {
  const { ends, tree } = index
  const inHeight = (piece: number): boolean => {
    const z0 = ends[6 * piece + 2]!
    const z1 = ends[6 * piece + 5]!
    return Math.max(z0, z1) >= box[2] && Math.min(z0, z1) <= box[5]
  }
  return Int32Array.from(tree?.search(box[0], box[1], box[3], box[4], inHeight) ?? []).sort()
}
