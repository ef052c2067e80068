/** Figures as people type them: 55, 55 mm, 2,5in, 0.5 kV. */

/** What may stand behind a figure, in lower case, and how much one of it is in SI. */
export type UnitScale = Readonly<Record<string, number>>

export const lengthUnits: UnitScale = { mm: 1e-3, cm: 1e-2, m: 1, in: 0.0254, '"': 0.0254 }
export const voltageUnits: UnitScale = { kv: 1e3, v: 1 }
export const currentUnits: UnitScale = { ma: 1e-3, a: 1 }
export const frequencyUnits: UnitScale = { hz: 1, khz: 1e3 }

/** The typed figure in SI; without a unit it counts in `unit`. A decimal comma is as good as a point. */
export function typedFigure(text: string, units: UnitScale, unit: string): number | undefined {
  const parts = /^\s*([+-]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+-]?\d+)?)\s*([a-z"]*)\s*$/i.exec(text)
  const scale = units[(parts?.[2] || unit).toLowerCase()]
  const value = Number(parts?.[1]?.replace(',', '.'))
  return scale === undefined || !Number.isFinite(value) ? undefined : value * scale
}
