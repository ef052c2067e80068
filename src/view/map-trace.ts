/**
 * A centre-line as the chain of cells it passes through, in the order of its path: each cell with its path length
 * and with the directions to the cells before and behind, from which a stroke gets its character.
 */
import type { Body, Polyline } from '../geometry/conductors.js'
import { columnAt, type MapWindow, rowAt } from './map-window.js'

/** One pass of a line through one cell. */
export interface Visit {
  readonly column: number
  readonly row: number
  /** path length where it enters and where it leaves, m */
  readonly from: number
  readonly to: number
}

/** Directions on the screen, counter-clockwise from the right: 0 →, 1 ↗, 2 ↑, 3 ↖, 4 ←, 5 ↙, 6 ↓, 7 ↘. */
export const nowhere = 8

/** cells round the window that are still traced, so that strokes leave it in the right direction */
const apron = 2

/**
 * The chains of a line through the window: each an unbroken row of cells, neighbours sharing a side. A line that
 * leaves the window and comes back gives several.
 */
export function cellChains(line: Polyline, window: MapWindow): Visit[][] {
  const chains: Visit[][] = []
  let chain: Visit[] = []
  const close = () => {
    if (chain.length > 0) chains.push(chain)
    chain = []
  }
  for (let k = 0; k + 1 < line.at.length; k++) {
    const piece = clipped(pieceOf(line, k, window), window)
    if (piece === undefined || piece.s0 > line.at[k]!) close()
    if (piece === undefined) continue
    tracePiece(piece, chain)
    if (piece.s1 < line.at[k + 1]!) close()
  }
  close()
  return chains.map((visits) => withoutBumps(visits, bumpLength * window.step * window.aspect))
}

/** The chains of a body as the map draws them: glass with its stairs made diagonal. */
export const drawnChains = (body: Body, window: MapWindow): Visit[][] =>
  cellChains(body.line, window).map((chain) => (body.kind === 'tube' ? withDiagonals(chain) : chain))

/** A straight piece in cells, with its path lengths. */
interface Piece {
  readonly x0: number
  readonly y0: number
  readonly x1: number
  readonly y1: number
  readonly s0: number
  readonly s1: number
}

function pieceOf({ points, at }: Polyline, k: number, window: MapWindow): Piece {
  const p = 3 * k
  return {
    x0: columnAt(window, points[p]!),
    y0: rowAt(window, points[p + 1]!),
    x1: columnAt(window, points[p + 3]!),
    y1: rowAt(window, points[p + 4]!),
    s0: at[k]!,
    s1: at[k + 1]!,
  }
}

/** The part of a piece over the window and its apron (Liang and Barsky's test of each side in turn). */
function clipped(piece: Piece, { columns, rows }: MapWindow): Piece | undefined {
  const dx = piece.x1 - piece.x0
  const dy = piece.y1 - piece.y0
  let first = 0
  let last = 1
  const sides = [
    [-dx, piece.x0 + apron],
    [dx, columns + apron - piece.x0],
    [-dy, piece.y0 + apron],
    [dy, rows + apron - piece.y0],
  ] as const
  for (const [speed, room] of sides) {
    if (speed === 0 && room < 0) return undefined
    if (speed < 0) first = Math.max(first, room / speed)
    if (speed > 0) last = Math.min(last, room / speed)
  }
  if (first > last) return undefined
  if (first === 0 && last === 1) return piece
  const along = (t: number, a: number, b: number) => (t === 0 ? a : t === 1 ? b : a + t * (b - a))
  return {
    x0: along(first, piece.x0, piece.x1),
    y0: along(first, piece.y0, piece.y1),
    x1: along(last, piece.x0, piece.x1),
    y1: along(last, piece.y0, piece.y1),
    s0: along(first, piece.s0, piece.s1),
    s1: along(last, piece.s0, piece.s1),
  }
}

/** Walks from side to side of the cells under a piece (Amanatides and Woo 1987) and adds each to the chain. */
function tracePiece({ x0, y0, x1, y1, s0, s1 }: Piece, chain: Visit[]): void {
  let column = Math.floor(x0)
  let row = Math.floor(y0)
  const dx = x1 - x0
  const dy = y1 - y0
  // how much of the piece lies between two sides, and up to the next one
  const acrossColumn = dx === 0 ? Infinity : 1 / Math.abs(dx)
  const acrossRow = dy === 0 ? Infinity : 1 / Math.abs(dy)
  let nextColumn = dx === 0 ? Infinity : (dx > 0 ? column + 1 - x0 : x0 - column) * acrossColumn
  let nextRow = dy === 0 ? Infinity : (dy > 0 ? row + 1 - y0 : y0 - row) * acrossRow
  // counted, so that rounding can neither miss the last cell nor walk past it
  let columnsLeft = Math.abs(Math.floor(x1) - column)
  let rowsLeft = Math.abs(Math.floor(y1) - row)
  let from = s0
  while (columnsLeft + rowsLeft > 0) {
    const sideways = rowsLeft === 0 || (columnsLeft > 0 && nextColumn <= nextRow)
    const to = s0 + Math.min(1, sideways ? nextColumn : nextRow) * (s1 - s0)
    addVisit(chain, { column, row, from, to })
    from = to
    if (sideways) {
      column += dx > 0 ? 1 : -1
      nextColumn += acrossColumn
      columnsLeft--
    } else {
      row += dy > 0 ? 1 : -1
      nextRow += acrossRow
      rowsLeft--
    }
  }
  addVisit(chain, { column, row, from, to: s1 })
}

function addVisit(chain: Visit[], visit: Visit): void {
  const last = chain[chain.length - 1]
  if (last !== undefined && sameCell(last, visit)) chain[chain.length - 1] = { ...last, to: visit.to }
  else chain.push(visit)
}

const sameCell = (a: Visit, b: Visit): boolean => a.column === b.column && a.row === b.row
const lengthOf = (visit: Visit): number => visit.to - visit.from

/** in heights of a row: longer than the chord of a round end across a cell, shorter than both sides of a hairpin */
const bumpLength = 1.1

/**
 * Drops short touches of a cell beside the line, out of a cell and straight back into it. What is left of a hairpin
 * is longer than `bump`, so that a doubled-back tube loses its tip at most.
 */
function withoutBumps(chain: readonly Visit[], bump: number): Visit[] {
  const kept: Visit[] = []
  for (const visit of chain) {
    const touch = kept[kept.length - 1]
    const before = kept[kept.length - 2]
    const short = touch !== undefined && before !== undefined && lengthOf(touch) < bump
    if (short && sameCell(before, visit)) kept.splice(-2, 2, { ...before, to: visit.to })
    else kept.push(visit)
  }
  return kept
}

/** a staircase of fewer moves is drawn as corners */
const shortestStair = 4

/**
 * The same chain with its even staircases (right, down, right, down …) made diagonal: of every two cells of a stair
 * only the one that holds more of the line stays.
 */
export function withDiagonals(chain: readonly Visit[]): Visit[] {
  const dropped = new Set<number>()
  let start = 0
  while (start + 1 < chain.length) {
    const end = stairEnd(chain, start)
    if (end - start >= shortestStair) dropStair(chain, start, end, dropped)
    start = end
  }
  return chain.filter((_, k) => !dropped.has(k))
}

/** Index of the last cell of the staircase whose first move starts at cell `start`. */
function stairEnd(chain: readonly Visit[], start: number): number {
  let end = start + 1
  while (end + 1 < chain.length && stairGoesOn(chain, start, end)) end++
  return end
}

/** Whether the move from cell `k` goes on with the stair: across the move before, and along the one before that. */
function stairGoesOn(chain: readonly Visit[], start: number, k: number): boolean {
  const before = direction(chain[k - 1]!, chain[k]!)
  const next = direction(chain[k]!, chain[k + 1]!)
  if (before % 4 === next % 4) return false
  return k - 1 === start || next === direction(chain[k - 2]!, chain[k - 1]!)
}

function dropStair(chain: readonly Visit[], start: number, end: number, dropped: Set<number>): void {
  const held = [0, 0]
  for (let k = start + 1; k < end; k++) held[(k - start) % 2]! += lengthOf(chain[k]!)
  const parity = held[0]! <= held[1]! ? 0 : 1
  for (let k = start + 1; k < end; k++) if ((k - start) % 2 === parity) dropped.add(k)
}

/** The direction from one cell to a neighbour; `nowhere` for the same cell. */
export function direction(from: Visit, to: Visit): number {
  const dx = Math.sign(to.column - from.column)
  const dy = Math.sign(to.row - from.row)
  if (dx === 0 && dy === 0) return nowhere
  return dx === 1 ? [1, 0, 7][dy + 1]! : dx === 0 ? [2, nowhere, 6][dy + 1]! : [3, 4, 5][dy + 1]!
}
