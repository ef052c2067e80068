/** The voltages between two places of the sign, by condition. V rms and V peak. */
import { type Broken, brokenDifference, brokenPotential, openTubes } from '../network/broken.js'
import { ground, type NodeMix, peakDifference, rmsDifference } from '../network/potentials.js'
import type { PotentialField } from '../network/solution.js'
import type { Differences } from './findings.js'
import type { PlaceVoltage } from './pair-rules.js'

/** The lit fields of the nominal gradient and of the two ends of the band, of the circuits that are lit. */
export interface LitFields {
  readonly nominal: readonly PotentialField[]
  readonly band: readonly (readonly PotentialField[])[]
  /** where the upper end of the band does not burn: nominal times this (no-load over needed) stands for it */
  readonly ceiling?: number
}

type Measure = (fields: readonly PotentialField[], a: NodeMix, b: NodeMix) => number
const upper = (lit: LitFields, measure: Measure, a: NodeMix, b: NodeMix): number =>
  Math.max(
    measure(lit.nominal, a, b) * Math.max(1, lit.ceiling ?? 1),
    ...lit.band.map((fields) => measure(fields, a, b)),
  )
const lower = (lit: LitFields, measure: Measure, a: NodeMix, b: NodeMix): number =>
  Math.min(measure(lit.nominal, a, b), ...lit.band.map((fields) => measure(fields, a, b)))

/** rms difference at the upper end of the lit band, V */
export const litUpper = (lit: LitFields, a: NodeMix, b: NodeMix): number => upper(lit, rmsDifference, a, b)

/** Differences and potentials of one field set, or of one end of the lit band. */
function placeVoltage(
  measure: (take: Measure, a: NodeMix, b: NodeMix) => number,
  a: NodeMix,
  b: NodeMix,
): PlaceVoltage {
  const higher = (take: Measure) => Math.max(measure(take, a, ground), measure(take, b, ground))
  return {
    rms: measure(rmsDifference, a, b),
    peak: measure(peakDifference, a, b),
    toGround: () => ({ rms: higher(rmsDifference), peak: higher(peakDifference) }),
  }
}

function brokenVoltage(broken: Broken, a: NodeMix, b: NodeMix): PlaceVoltage {
  const both = (rms: number) => ({ rms, peak: Math.SQRT2 * rms })
  return {
    ...both(brokenDifference(broken, a, b)),
    toGround: () => both(Math.max(brokenPotential(broken, a), brokenPotential(broken, b))),
  }
}

/** The voltages at a place: on paper, with a tube open, and of the upper and lower end of the lit band. */
export interface Voltages {
  readonly nameplate: PlaceVoltage
  readonly broken: PlaceVoltage
  readonly openTubes: readonly string[]
  readonly lit?: { readonly nominal: number; readonly low: PlaceVoltage; readonly high: PlaceVoltage }
}

export function voltagesAt(
  { nameplate, broken }: { readonly nameplate: readonly PotentialField[]; readonly broken: Broken },
  lit: LitFields | undefined,
  a: NodeMix,
  b: NodeMix,
): Voltages {
  const always = {
    nameplate: placeVoltage((take, p, q) => take(nameplate, p, q), a, b),
    broken: brokenVoltage(broken, a, b),
    openTubes: openTubes(broken, a, b),
  }
  if (!lit) return always
  return {
    ...always,
    lit: {
      nominal: rmsDifference(lit.nominal, a, b),
      low: placeVoltage((take, p, q) => lower(lit, take, p, q), a, b),
      high: placeVoltage((take, p, q) => upper(lit, take, p, q), a, b),
    },
  }
}

export const differences = ({ nameplate, broken, openTubes: open, lit }: Voltages): Differences => ({
  ...(lit && { lit: lit.nominal, litLow: lit.low.rms, litHigh: lit.high.rms, litPeak: lit.high.peak }),
  nameplate: nameplate.rms,
  broken: broken.rms,
  openTubes: open,
})
