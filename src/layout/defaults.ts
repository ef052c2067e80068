/** What is taken where a layout says nothing; metres. Cautious where two answers are usual. */
import { type Keyed, keyedAt } from './reading.js'

export const usual = {
  tube: { diameter: 0.012, height: 0.04, glass: 'soda-lime', fill: 'neon' },
  lead: { conductor: 0.0012, diameter: 0.007, insulation: 'silicone', height: 0.02 },
  bar: { diameter: 0.02, height: 0 },
  bore: 0.016,
  /** between the two terminals of a supply without places, and between two such supplies */
  terminalDistance: 0.04,
  supplyDistance: 0.12,
  rules: ['common-practice'],
} as const

/** relative permittivity of glass; from memory */
const glassPermittivity = { lead: 6.65, 'soda-lime': 7.1, borosilicate: 4.6 } as const
/** relative permittivity of lead insulation; from memory */
const insulationPermittivity = { polyethylene: 2.3, silicone: 3 } as const

/** Relative permittivity by name, or the number itself. */
export const glassValue = (glass: number | keyof typeof glassPermittivity): number =>
  typeof glass === 'number' ? glass : glassPermittivity[glass]

export const insulationValue = (insulation: number | keyof typeof insulationPermittivity): number =>
  typeof insulation === 'number' ? insulation : insulationPermittivity[insulation]

// walls usual for a diameter, mm; from memory
const walls = [
  [12, 1],
  [15, 1.1],
  [18, 1.2],
  [20, 1.2],
  [25, 1.4],
] as const

/** The wall usual for glass of this outer diameter, linear between the known sizes; m. */
function usualWall(diameter: number): number {
  const d = diameter * 1000
  let [below, wallBelow]: readonly [number, number] = walls[0]
  for (const [above, wallAbove] of walls) {
    if (d <= above)
      return (
        (above === below
          ? wallAbove
          : wallBelow + ((d - below) / (above - below)) * (wallAbove - wallBelow)) / 1000
      )
    ;[below, wallBelow] = [above, wallAbove]
  }
  return wallBelow / 1000
}

const lengthAt = (values: Keyed, key: string, unit: number): number | undefined => {
  const value = values[key]
  return typeof value === 'number' && Number.isFinite(value) ? value * unit : undefined
}

/** Diameter and wall of a tube of the file, with the defaults of the file and the usual ones; m. */
export function glassOf(file: Keyed, tube: Keyed, unit: number): { diameter: number; wall: number } {
  const defaults = keyedAt(keyedAt(file.defaults).tube)
  const diameter =
    lengthAt(tube, 'diameter', unit) ?? lengthAt(defaults, 'diameter', unit) ?? usual.tube.diameter
  return {
    diameter,
    wall: lengthAt(tube, 'wall', unit) ?? lengthAt(defaults, 'wall', unit) ?? usualWall(diameter),
  }
}

/** Wire and outer diameter of a route, with the defaults of the file and the usual ones; m. */
export function wireOf(file: Keyed, route: Keyed, unit: number): { conductor: number; diameter: number } {
  const defaults = keyedAt(keyedAt(file.defaults).lead)
  const pick = (key: 'conductor' | 'diameter') =>
    lengthAt(route, key, unit) ?? lengthAt(defaults, key, unit) ?? usual.lead[key]
  return { conductor: pick('conductor'), diameter: pick('diameter') }
}
