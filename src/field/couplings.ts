/** The sparse coefficients P_hq between harmonics (rows) and charges, 1/m. */
export interface Couplings {
  /** row r holds entries starts[r] … starts[r + 1] */
  readonly starts: Int32Array
  readonly charges: Int32Array
  /** number of charges there are */
  readonly width: number
  readonly values: Float64Array
}

/** Collects coefficients in any order; what meets in one place is added up. */
export function couplingRows(rows: number, charges: number) {
  const which: number[][] = Array.from({ length: rows }, () => [])
  const amounts: number[][] = Array.from({ length: rows }, () => [])
  const add = (row: number, charge: number, value: number): void => {
    which[row]!.push(charge)
    amounts[row]!.push(value)
  }
  const finished = (): Couplings => {
    const sums = new Float64Array(charges)
    const seen = new Int32Array(charges).fill(-1)
    const starts = new Int32Array(rows + 1)
    const list: number[] = []
    const values: number[] = []
    for (let r = 0; r < rows; r++) {
      const from = list.length
      which[r]!.forEach((charge, k) => {
        if (seen[charge] !== r) {
          seen[charge] = r
          sums[charge] = 0
          list.push(charge)
        }
        sums[charge]! += amounts[r]![k]!
      })
      for (let k = from; k < list.length; k++) values.push(sums[list[k]!]!)
      starts[r + 1] = list.length
    }
    return { starts, width: charges, charges: Int32Array.from(list), values: Float64Array.from(values) }
  }
  return { add, finished }
}

/** Rows from … to, dense: the charges they touch, ascending, and for each of them a row of length to − from. */
export function denseColumns(
  { starts, charges, values, width }: Couplings,
  from: number,
  to: number,
): { touched: Int32Array; columns: Float64Array } {
  const place = new Int32Array(width)
  for (let k = starts[from]!; k < starts[to]!; k++) place[charges[k]!] = 1
  let count = 0
  for (let i = 0; i < width; i++) count += place[i]!
  const touched = new Int32Array(count)
  const size = to - from
  for (let i = 0, k = 0; i < width; i++) {
    if (place[i] === 0) continue
    touched[k] = i
    place[i] = k++ * size
  }
  const columns = new Float64Array(count * size)
  for (let r = from; r < to; r++) {
    for (let k = starts[r]!; k < starts[r + 1]!; k++) columns[place[charges[k]!]! + r - from] = values[k]!
  }
  return { touched, columns }
}
