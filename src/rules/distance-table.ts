/** How much distance a rule asks for at a voltage, and how much voltage a distance may have. V, m. */
import type { DistanceTable } from './rule-set.js'

/** distances that differ by less are the same, m: rounding of the geometry */
export const sameDistance = 1e-6

/** The distance that the table asks for at a voltage. */
export function distanceAt(
  { voltages, distances, interpolation, beyond }: DistanceTable,
  voltage: number,
): number {
  const last = voltages.length - 1
  if (interpolation === 'step') {
    const row = voltages.findLastIndex((from) => from < voltage)
    return row < 0 ? 0 : distances[row]!
  }
  const above = voltages.findIndex((v) => v >= voltage)
  if (above === 0) return distances[0]!
  if (above < 0 && (beyond === 'last' || last === 0)) return distances[last]!
  const high = above < 0 ? last : above
  const [v0, v1] = [voltages[high - 1]!, voltages[high]!]
  const [d0, d1] = [distances[high - 1]!, distances[high]!]
  return d0 + ((d1 - d0) * (voltage - v0)) / (v1 - v0)
}

/** The highest voltage for which the table asks for no more than this distance; Infinity where none asks for more. */
export function voltageAt(
  { voltages, distances, interpolation, beyond }: DistanceTable,
  distance: number,
): number {
  const last = voltages.length - 1
  const row = distances.findLastIndex((d) => d <= distance + sameDistance)
  if (interpolation === 'step') return row === last ? Infinity : voltages[row + 1]!
  if (row < 0) return 0
  const flat = last === 0 || beyond === 'last'
  if (row === last && flat) return Infinity
  const low = row === last ? last - 1 : row
  const [v0, v1] = [voltages[low]!, voltages[low + 1]!]
  const [d0, d1] = [distances[low]!, distances[low + 1]!]
  return d1 <= d0 ? Infinity : Math.max(voltages[row]!, v0 + ((v1 - v0) * (distance - d0)) / (d1 - d0))
}

/** What distances are multiplied with at an altitude (m): 1 below the first row, on along the last two rows above. */
export function altitudeFactor(rows: readonly (readonly [number, number])[], altitude: number): number {
  const first = rows[0]
  if (!first) return 1
  const above = rows.findIndex(([height]) => height >= altitude)
  if (above === 0 || rows.length === 1) return altitude <= first[0] ? 1 : first[1]
  const high = above < 0 ? rows.length - 1 : above
  const [h0, f0] = rows[high - 1]!
  const [h1, f1] = rows[high]!
  return f0 + ((f1 - f0) * (altitude - h0)) / (h1 - h0)
}
