/** A lead inside metal conduit sees nothing but the conduit. */
import type { LeadBody } from '../geometry/conductors.js'
import { epsilon } from './constants.js'

/**
 * Capacitance per metre of a lead that lies on the inside of grounded metal conduit, F/m: eccentric cylinders,
 * 2πε0/acosh((R² + a² − e²)/2Ra) with the equivalent radius a and e = R − b. Without a stated bore the conduit is taken
 * as a close fit of twice the lead's diameter.
 */
export function conduitCapacitance(lead: LeadBody): number {
  const bore = Math.max(lead.boreRadius ?? 2 * lead.outerRadius, 1.001 * lead.outerRadius)
  const a = lead.equivalentRadius
  const off = bore - lead.outerRadius
  return (2 * Math.PI * epsilon) / Math.acosh((bore * bore + a * a - off * off) / (2 * bore * a))
}
