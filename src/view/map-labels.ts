/**
 * Where names fit: beside their part, on free cells, and not where they would be taken for the name of a neighbour.
 */
import stringWidth from 'string-width'
import type { MapScene } from './map-scene.js'
import type { MapWindow } from './map-window.js'

export interface LabelPlace {
  readonly cell: number
  /** one character for each cell */
  readonly text: string
}

/** A cell taken by a body, and where along its path. */
interface Taken {
  readonly cell: number
  readonly body: number
  readonly at: number
}

interface TakenByTerminal {
  readonly cell: number
  readonly supply: string
}

const free = -1
/** owner of cells that hold a terminal or a label */
const reserved = -2

type Sides = readonly (readonly [number, number])[]

/** where the name of a tube may sit beside a cell of its glass */
const besideGlass: Sides = [
  [-1, 0],
  [1, 0],
  [0, -1],
  [0, 1],
]
/** the name of a supply never touches the number of its terminal: `S1` and `2` would read as `S12` */
const besideTerminal: Sides = [
  [0, -1],
  [0, 1],
  [2, 0],
  [-2, 0],
]
/** places along a tube that are tried at most */
const tries = 48

/** Labels of supplies beside their terminals, and of tubes beside their glass: near end a where there is room. */
export function labelPlaces(
  { bodies }: MapScene,
  window: MapWindow,
  passes: readonly Taken[],
  terminals: readonly TakenByTerminal[],
): LabelPlace[] {
  const owner = new Int32Array(window.columns * window.rows).fill(free)
  for (const { cell, body } of passes) if (owner[cell] === free) owner[cell] = body
  for (const { cell } of terminals) owner[cell] = reserved
  const places: LabelPlace[] = []
  const place = (name: string, cells: readonly number[], own: number, sides: Sides) => {
    const found = bestPlace(cellText(name), cells, own, sides, owner, window)
    if (found === undefined) return
    places.push(found)
    owner.fill(reserved, found.cell, found.cell + found.text.length)
  }
  for (const [supply, cells] of grouped(terminals, ({ supply }) => supply))
    place(supply, cells, free, besideTerminal)
  const inPathOrder = [...passes].sort((p, q) => p.at - q.at)
  for (const [body, cells] of grouped(inPathOrder, ({ body }) => body)) {
    const { kind, name } = bodies[body]!
    if (kind === 'tube') place(name, cells, body, besideGlass)
  }
  return places
}

function grouped<T extends { readonly cell: number }, K>(taken: readonly T[], by: (one: T) => K) {
  const groups = new Map<K, number[]>()
  for (const one of taken) {
    const group = groups.get(by(one))
    if (group === undefined) groups.set(by(one), [one.cell])
    else group.push(one.cell)
  }
  return groups
}

/** A name as one character a cell; what is wider or narrower than a cell cannot stand in the grid. */
const cellText = (name: string): string =>
  Array.from(name, (letter) => (letter.length === 1 && stringWidth(letter) === 1 ? letter : '?')).join('')

/** The place with the fewest foreign neighbours, the first along the path among equals. */
function bestPlace(
  text: string,
  cells: readonly number[],
  own: number,
  sides: Sides,
  owner: Int32Array,
  { columns, rows }: MapWindow,
): LabelPlace | undefined {
  let best: LabelPlace | undefined
  let fewest = Infinity
  const stride = Math.max(1, Math.ceil(cells.length / tries))
  for (let k = 0; k < cells.length && fewest > 0; k += stride)
    for (const [dx, dy] of sides) {
      const row = Math.floor(cells[k]! / columns) + dy
      const column = startColumn((cells[k]! % columns) + dx, dx, text.length)
      if (row < 0 || row >= rows || column < 0 || column + text.length > columns) continue
      const strangers = strangersRound(row, column, text.length, own, owner, columns)
      if (strangers >= fewest) continue
      fewest = strangers
      best = { cell: row * columns + column, text }
    }
  return best
}

/** A label to the left ends beside its cell, to the right it starts there, above and below it is centred. */
function startColumn(beside: number, side: number, length: number): number {
  return side > 0 ? beside : side < 0 ? beside - length + 1 : beside - (length >> 1)
}

/** Cells of others that touch the label; Infinity where the label does not fit at all. */
function strangersRound(
  row: number,
  column: number,
  length: number,
  own: number,
  owner: Int32Array,
  columns: number,
): number {
  let strangers = 0
  for (let r = row - 1; r <= row + 1; r++)
    for (let c = Math.max(0, column - 1); c <= Math.min(columns - 1, column + length); c++) {
      const there = owner[r * columns + c] ?? free
      if (there === free) continue
      if (r === row && c >= column && c < column + length) return Infinity
      if (there !== own) strangers++
    }
  return strangers
}
