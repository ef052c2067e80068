/**
 * How each supply holds its two terminals, at the frequency of the supply whose field is solved.
 *
 * Electronic: an ideal source (a short for the fields of the others). Core-and-coil: no-load voltage behind
 * X = V_oc/I_sc at its own frequency, half in each leg where the midpoint is grounded.
 */
import type { Supply } from '../layout/layout.js'

/** W delivered for each W of mains input (ours) */
export const supplyEfficiency = 0.85

/** V rms: the nameplate's, or peak/√2 where that is greater (IEC 61347-2-10:2000). */
export const noLoadVoltage = ({ noLoadVoltage, noLoadPeak }: Supply): number =>
  Math.max(noLoadVoltage, (noLoadPeak ?? 0) / Math.SQRT2)

/** Ω at the supply's own frequency */
const shortCircuitReactance = (supply: Supply): number => noLoadVoltage(supply) / supply.shortCircuitCurrent

/** `volts` are the source voltages; a short or an inductance alone where they are 0. Susceptances are −1/X, S. */
export type Attachment =
  /** both terminals held at these potentials */
  | { readonly kind: 'held'; readonly volts: readonly [number, number] }
  /** terminal 1 minus terminal 2 held at this; nothing else joins them to ground */
  | { readonly kind: 'merged'; readonly volts: number }
  /** each terminal through its leg to its source; no second leg: terminal 2 is ground */
  | {
      readonly kind: 'legs'
      readonly susceptance: number
      readonly volts: readonly [number, number]
      readonly both: boolean
    }
  /** the source behind its reactance, between the terminals only */
  | { readonly kind: 'bridge'; readonly susceptance: number; readonly volts: number }

/** `source`: this supply feeds; an electronic one then gives 1 V between its terminals, to be scaled. */
export function attachment(supply: Supply, source: boolean, frequency: number): Attachment {
  const volts = source ? (supply.type === 'electronic' ? 1 : noLoadVoltage(supply)) : 0
  if (supply.type === 'electronic') {
    if (supply.grounding === 'none') return { kind: 'merged', volts }
    return { kind: 'held', volts: supply.grounding === 'one-end' ? [volts, 0] : [volts / 2, -volts / 2] }
  }
  const susceptance = -supply.frequency / (frequency * shortCircuitReactance(supply))
  if (supply.grounding === 'none') return { kind: 'bridge', susceptance, volts }
  if (supply.grounding === 'one-end') return { kind: 'legs', susceptance, volts: [volts, 0], both: false }
  return { kind: 'legs', susceptance: 2 * susceptance, volts: [volts / 2, -volts / 2], both: true }
}
