/** What a peak difference does in the air between two surfaces: the facts that pair findings are made of. */
import { airDensity, effectivePressureBar, frequencyFactor, type StartMode } from './air.js'
import { airStart, peekField, uniformBreakdown, worstWedge } from './discharge.js'
import { airShare, curvature, type FacingLine, facingLine, fieldShape, type Surface } from './facing-line.js'

/** Two surfaces and the air between them. */
export interface Gap {
  /** clear distance between the surfaces, m; under 1 nm counts as 1 nm */
  readonly gap: number
  readonly a: Surface
  readonly b: Surface
  /** Hz, of the voltage between them */
  readonly frequency: number
  /** m above sea level; 20 °C is assumed */
  readonly altitude: number
  readonly mode: StartMode
}

/** When a discharge starts in a gap, whatever the voltage now is. */
export interface GapStart {
  /** m of air where it starts: the clear gap, or of the wedge beside it where walls nearly touch */
  readonly airGap: number
  /** V peak across that air at which it starts, with the frequency factor */
  readonly startsAt: number
  /** V peak between the conductors at which it starts */
  readonly difference: number
  /** voltage across that air per volt between the conductors */
  readonly share: number
  /** greatest field in the air on the facing line per volt between the conductors, 1/m */
  readonly fieldPerVolt: number
  /** V peak across the air from which bare parts flash over; Infinity where a wall is between */
  readonly flashover: number
}

export type Outcome = 'nothing' | 'hiss-and-ozone' | 'flashover'

export interface GapStress {
  /** V peak across the air */
  readonly airPeak: number
  /** V peak across that air at which a discharge starts, with the frequency factor */
  readonly startsAt: number
  /** airPeak over startsAt: a discharge can start from 1 */
  readonly margin: number
  /** V peak between the conductors at which a discharge starts */
  readonly differenceAtStart: number
  /** greatest field in the air, V/m peak */
  readonly field: number
  readonly outcome: Outcome
}

/** utilisation at u' = 3 and u' = 8: from the first on, bare parts glow before they flash over */
const glowFrom = Math.acosh(3) / Math.sqrt(8)
const glowFully = Math.acosh(8) / Math.sqrt(63)
/**
 * V/m: average field that carries a streamer right across: 4.5 to 5 kV/cm in air (H. Francisco et al., Simulations of
 * positive streamers in air, 2021, abstract)
 */
const streamerAdvance = 4.5e5

/**
 * The start of a discharge between two surfaces. Independent of the voltage, so one call serves every condition.
 *
 * Where walls lie in series and the surfaces nearly touch, the place that starts first is not the facing line but
 * the wedge of air beside it. The start is the least over all wedge gaps from the clear gap up, with walls and
 * utilisation as they are on the facing line: it joins the touching formula at gap 0 and the facing line's own at
 * the worst wedge gap, and grows with the gap throughout.
 */
export function gapStart(place: Gap): GapStart {
  const { density } = airDensity(place.altitude)
  const pressureBar = effectivePressureBar(density)
  const { line, wallsAsAir, fieldPerVolt } = airShare(place.gap, place.a, place.b)
  const airGap = Math.max(line.gap, worstWedge(wallsAsAir, pressureBar))
  const air = airGap === line.gap ? line : facingLine(line.sharp, line.blunt, airGap)
  const start = withGlow(place, air, airStart(air, pressureBar), density)
  const startsAt = start * frequencyFactor(place.frequency, airGap, place.mode)
  const share = airGap / (airGap + wallsAsAir)
  const flashover = flashoverFrom(place, air, startsAt, density)
  return { airGap, startsAt, difference: startsAt / share, share, fieldPerVolt, flashover }
}

/** What a peak difference (V) does, given the start of the gap. */
export function stressFrom(start: GapStart, peak: number): GapStress {
  const airPeak = peak * start.share
  const margin = airPeak / start.startsAt
  return {
    airPeak,
    startsAt: start.startsAt,
    margin,
    differenceAtStart: start.difference,
    field: peak * start.fieldPerVolt,
    outcome: margin < 1 ? 'nothing' : airPeak < start.flashover ? 'hiss-and-ozone' : 'flashover',
  }
}

const isBare = (s: Surface): boolean => s.kind === 'bare' || (s.kind === 'plane' && s.wall <= 0)

/** The start lowered to Peek's corona of bare wires and ends, phased in from u' = 3 to 8 so that it makes no step. */
function withGlow({ a, b, mode }: Gap, air: FacingLine, start: number, density: number): number {
  const weight = Math.min(1, (glowFrom - air.utilisation) / (glowFrom - glowFully))
  if (weight <= 0) return start
  const roughness = mode === 'cautious' ? 0.8 : 1
  let corona = start
  for (const side of [a, b]) {
    if (side.kind !== 'bare') continue
    // the voltage across the air that brings this surface to its corona field
    const bent = curvature(side)
    const shape = bent === air.sharp ? 1 : fieldShape(air, air.gap)
    const there = peekField(1 / bent, density, roughness) / shape
    corona = Math.min(corona, there * air.utilisation * air.gap)
  }
  return start + weight * (corona - start)
}

/** Bare on both sides, a nearly even field flashes over as soon as it starts; an uneven one when streamers cross. */
function flashoverFrom({ a, b }: Gap, air: FacingLine, startsAt: number, density: number): number {
  if (!isBare(a) || !isBare(b)) return Number.POSITIVE_INFINITY
  if (air.utilisation > glowFrom) return startsAt
  const crossing = streamerAdvance * density * air.gap
  return Math.max(startsAt, Math.min(crossing, uniformBreakdown(air.gap, effectivePressureBar(density))))
}
