/**
 * What the measures of a sign may be, in the file and under an edit: least and greatest value, in the unit that the
 * key names; lengths of the drawing in metres.
 */
export type Range = readonly [low: number, high: number, unit: string]
export type Ranges = Readonly<Record<string, Range>>
export const length = 'length'

/** farthest place in front of or behind the face that is no slip of the pen, m */
export const highest = 10
const height: Range = [-highest, highest, length]

export const tubeRanges = {
  diameter: [0.003, 0.1, length],
  wall: [1e-4, 0.01, length],
  height,
  glass: [1, 20, ''],
} as const satisfies Ranges
export const leadRanges: Ranges = {
  conductor: [1e-4, 0.01, length],
  diameter: [5e-4, 0.05, length],
  insulation: [1, 12, ''],
  height,
  bore: [0.002, 0.2, length],
}
export const supplyRanges = {
  no_load_kv: [0.1, 30, 'kV'],
  no_load_peak_kv: [0.1, 60, 'kV'],
  short_circuit_ma: [1, 1000, 'mA'],
  frequency_hz: [10, 200_000, 'Hz'],
  rated_va: [1, 20_000, 'VA'],
  ground_fault_trip_ma: [0.1, 1000, 'mA'],
  max_lead_mm: [1, 100_000, 'mm'],
} as const satisfies Ranges
export const metalRanges: Ranges = {
  diameter: [0.0005, 1, length],
  height,
  from: height,
  to: height,
}

/** a hair of room, so that a bound written in inches is inside */
export const inside = (value: number, [low, high]: Range, scale = 1): boolean =>
  value * scale >= low - slack(low, high) && value * scale <= high + slack(low, high)
const slack = (low: number, high: number): number => 1e-9 * Math.max(Math.abs(low), Math.abs(high))

/** Figures of a supply in SI: their key in the file, and what they are multiplied with there. */
export const supplyKeys = {
  noLoadVoltage: ['no_load_kv', 1e-3],
  noLoadPeak: ['no_load_peak_kv', 1e-3],
  shortCircuitCurrent: ['short_circuit_ma', 1e3],
  frequency: ['frequency_hz', 1],
  ratedPower: ['rated_va', 1],
  groundFaultTrip: ['ground_fault_trip_ma', 1e3],
  maxLead: ['max_lead_mm', 1e3],
} as const
