/**
 * Cholesky factor of a sparse symmetric matrix whose rows are kept from their first non-zero on. The rows fall into
 * components that do not touch each other; each is solved alone.
 */
export interface Skyline {
  readonly count: number
  /** index of the first kept column of each row */
  readonly first: Int32Array
  /** place in `values` of column 0 of each row, so that element (r, c) is values[base[r] + c] */
  readonly base: Int32Array
  readonly values: Float64Array
}

/** An empty skyline with these first columns. */
export function skyline(first: Int32Array): Skyline {
  const count = first.length
  const base = new Int32Array(count)
  let size = 0
  for (let r = 0; r < count; r++) {
    base[r] = size - first[r]!
    size += r - first[r]! + 1
  }
  return { count, first, base, values: new Float64Array(size) }
}

/** L Lᵀ in place over rows from … to (a component); false when that part is not positive definite. */
export function factorSkyline({ first, base, values }: Skyline, from: number, to: number): boolean {
  for (let r = from; r < to; r++) {
    const row = base[r]!
    for (let c = first[r]!; c <= r; c++) {
      const other = base[c]!
      let sum = values[row + c]!
      for (let k = Math.max(first[r]!, first[c]!); k < c; k++) sum -= values[row + k]! * values[other + k]!
      if (c < r) values[row + c] = sum / values[other + c]!
      else if (sum > 0) values[row + c] = Math.sqrt(sum)
      else return false
    }
  }
  return true
}

/** x becomes L⁻¹ x over rows from … to (a component, or several); x[offset + r − from] belongs to row r. */
export function solveSkyline(sky: Skyline, from: number, to: number, x: Float64Array, offset: number): void {
  const { first, base, values } = sky
  const shift = offset - from
  for (let r = from; r < to; r++) {
    const row = base[r]!
    let sum = x[shift + r]!
    for (let k = first[r]!; k < r; k++) sum -= values[row + k]! * x[shift + k]!
    x[shift + r] = sum / values[row + r]!
  }
}

/** x becomes L⁻ᵀ x, places as above. */
export function solveSkylineTransposed(
  sky: Skyline,
  from: number,
  to: number,
  x: Float64Array,
  offset: number,
): void {
  const { first, base, values } = sky
  const shift = offset - from
  for (let r = to - 1; r >= from; r--) {
    const row = base[r]!
    const value = x[shift + r]! / values[row + r]!
    x[shift + r] = value
    for (let k = first[r]!; k < r; k++) x[shift + k]! -= values[row + k]! * value
  }
}

/**
 * Order of the vertices of a graph (Cuthill–McKee, reversed) that keeps neighbours together, with the component of
 * each place: `order` lists vertices, `component[k]` numbers the component of order[k], ascending.
 */
export function bandOrder(neighbours: readonly (readonly number[])[]): {
  order: number[]
  component: Int32Array
} {
  const count = neighbours.length
  const seen = new Uint8Array(count)
  const order: number[] = []
  const component = new Int32Array(count)
  let components = 0
  for (let start = 0; start < count; start++) {
    if (seen[start]) continue
    const part = breadthFirst(neighbours, farthest(neighbours, start), seen)
    part.reverse()
    component.fill(components++, order.length, order.length + part.length)
    for (const v of part) order.push(v)
  }
  return { order, component }
}

/** A vertex at the far end of the component: a good place to start from. */
function farthest(neighbours: readonly (readonly number[])[], start: number): number {
  return breadthFirst(neighbours, start, new Uint8Array(neighbours.length)).at(-1) ?? start
}

function breadthFirst(neighbours: readonly (readonly number[])[], start: number, seen: Uint8Array): number[] {
  const queue = [start]
  seen[start] = 1
  for (let k = 0; k < queue.length; k++) {
    for (const v of neighbours[queue[k]!]!) {
      if (seen[v]) continue
      seen[v] = 1
      queue.push(v)
    }
  }
  return queue
}
