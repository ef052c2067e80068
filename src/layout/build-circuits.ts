/** Supplies, strings and routes of the file in SI units. */
import type { Workshop } from './build.js'
import { chartKind } from './chart-key.js'
import { insulationValue, usual, wireOf } from './defaults.js'
import type { CircuitWiring, Face, Measured, PathPoint, Route, StringEntry, Supply, Tube } from './layout.js'
import { pointOf } from './paths.js'
import { nameText } from './reading.js'
import type { RouteValue, SupplyValue, WiringValue } from './schema.js'

/** The property made of a value, or none where there is no value. */
const given = <Value, Property extends object>(
  value: Value | undefined,
  make: (value: Value) => Property,
): Property | Record<never, never> => (value === undefined ? {} : make(value))

export function buildSupplies(shop: Workshop, tubes: readonly Tube[], face: Face): Supply[] {
  const { supplies } = shop.file
  const unplaced = supplies.filter(({ terminals }) => terminals === undefined)
  return supplies.map((supply) => {
    const place = unplaced.indexOf(supply)
    const terminals =
      placedTerminals(shop, supply) ?? assumedTerminals(tubes, face, place - (unplaced.length - 1) / 2)
    return buildSupply(shop, supply, terminals)
  })
}

function placedTerminals({ unit }: Workshop, { terminals }: SupplyValue): [PathPoint, PathPoint] | undefined {
  const [one, two] = terminals?.map((point) => pointOf(point, unit)) ?? []
  return one && two ? [one, two] : undefined
}

/** Side by side about the middle of the lower edge; `step` counts supplies from there. */
function assumedTerminals(tubes: readonly Tube[], face: Face, step: number): [PathPoint, PathPoint] {
  const box = glassBox(tubes)
  const x = (face.size ? face.size[0] / 2 : (box.left + box.right) / 2) + step * usual.supplyDistance
  const y = face.size ? face.size[1] : box.bottom
  const half = usual.terminalDistance / 2
  return [
    { x: x - half, y },
    { x: x + half, y },
  ]
}

/** The rectangle around all paths of glass, m. */
function glassBox(tubes: readonly Tube[]): { left: number; right: number; bottom: number } {
  const box = {
    left: Number.POSITIVE_INFINITY,
    right: Number.NEGATIVE_INFINITY,
    bottom: Number.NEGATIVE_INFINITY,
  }
  const grow = ({ x, y }: PathPoint) => {
    box.left = Math.min(box.left, x)
    box.right = Math.max(box.right, x)
    box.bottom = Math.max(box.bottom, y)
  }
  for (const { path } of tubes) path.forEach(grow)
  return box
}

function buildSupply(shop: Workshop, supply: SupplyValue, terminals: [PathPoint, PathPoint]): Supply {
  const id = nameText(supply.id) ?? ''
  const { assume } = shop.ledger
  if (supply.terminals === undefined) {
    const apart = shop.lengthText(usual.terminalDistance)
    assume(id, `terminals at the middle of the lower edge of the sign, ${apart} apart`)
  }
  if (supply.open_circuit_protection === undefined) assume(id, 'no open-circuit protection')
  if (supply.ground_fault_trip_ma === undefined) assume(id, 'no ground-fault protection')
  return {
    id,
    type: supply.type,
    noLoadVoltage: supply.no_load_kv * 1000,
    ...given(supply.no_load_peak_kv, (kv) => ({ noLoadPeak: kv * 1000 })),
    shortCircuitCurrent: supply.short_circuit_ma / 1000,
    frequency: supply.frequency_hz,
    grounding: supply.grounding,
    ...given(supply.rated_va, (ratedPower) => ({ ratedPower })),
    openCircuitProtection: supply.open_circuit_protection ?? false,
    ...given(supply.ground_fault_trip_ma, (ma) => ({ groundFaultTrip: ma / 1000 })),
    ...given(supply.max_lead_mm, (mm) => ({ maxLead: mm / 1000 })),
    chart: Object.entries(supply.chart_m ?? {}).flatMap(([key, length]) => {
      const kind = chartKind(key)
      return kind ? [{ ...kind, length }] : []
    }),
    terminals,
  }
}

/** The library of routes, of all circuits. */
export const buildRoutes = (shop: Workshop): Route[] =>
  shop.file.circuits.flatMap(({ leads = [] }, i) =>
    leads.map((route, k) => buildRoute(shop, route, `circuits.${i}.leads.${k}.path`)),
  )

function buildRoute(shop: Workshop, route: RouteValue, at: string): Route {
  const { unit, paths, file, ledger } = shop
  const between = [nameText(route.between[0]) ?? '', nameText(route.between[1]) ?? ''] as const
  const name = `${between[0]}–${between[1]}`
  if (route.conduit === undefined) ledger.assume(name, 'not in conduit')
  return {
    between,
    ...given(paths.get(at), (path) => ({ path })),
    ...given(route.height, (height) => ({ height: height * unit })),
    conduit: route.conduit ?? 'none',
    ...given(boreOf(shop, route, name), (bore) => ({ bore })),
    ...given(route.conductor, (conductor) => ({ conductor: conductor * unit })),
    ...given(route.diameter, () => ({ diameter: wireOf(file, route, unit).diameter })),
    ...given(route.insulation, (insulation) => ({ permittivity: insulationValue(insulation) })),
  }
}

/** Inside diameter of the conduit, m; one that fits the lead is assumed where metal conduit has none. */
function boreOf({ unit, file, ledger, lengthText }: Workshop, route: RouteValue, name: string) {
  if (route.bore !== undefined) return route.bore * unit
  if (route.conduit !== 'metal') return undefined
  const bore = Math.max(usual.bore, 1.5 * wireOf(file, route, unit).diameter)
  ledger.assume(name, `inside diameter of the conduit ${lengthText(bore)}`)
  return bore
}

/** A circuit of the file's wiring or of a variant. */
export function buildWiring({ supply, string, midpoint_return, measured }: WiringValue): CircuitWiring {
  return {
    supply: nameText(supply) ?? '',
    string: string.map(stringEntry),
    ...given(midpoint_return, (end) => ({ midpointReturn: nameText(end) ?? '' })),
    ...given(measured, (values) => ({ measured: measuredValues(values) })),
  }
}

function stringEntry(entry: string | number): StringEntry {
  const text = nameText(entry) ?? ''
  return text.startsWith('-') ? { tube: text.slice(1), reversed: true } : { tube: text, reversed: false }
}

const measuredValues = ({ primary_w, ma = {} }: NonNullable<WiringValue['measured']>): Measured => ({
  ...given(primary_w, (primaryPower) => ({ primaryPower })),
  currents: new Map(Object.entries(ma).map(([end, value]) => [end, value / 1000])),
})
