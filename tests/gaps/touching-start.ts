import { uniformBreakdown, worstWedge } from '../../src/gaps/discharge.js'

export interface Wall {
  /** m */
  readonly thickness: number
  readonly permittivity: number
}

/** Difference (V peak) at which touching parts start in the wedge of air beside the contact; 0 for bare metal. */
export function touchingStart(walls: readonly Wall[], pressureBar = 1.01325): number {
  const air = walls.reduce((sum, wall) => sum + wall.thickness / wall.permittivity, 0)
  const gap = worstWedge(air, pressureBar)
  return gap > 0 ? (uniformBreakdown(gap, pressureBar) * (gap + air)) / gap : 0
}
