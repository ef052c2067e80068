/** When a discharge starts in air: voltages across the air, peak, at 50 Hz. V and m; pressures in bar as at 20 °C. */
import type { FacingLine } from './facing-line.js'

/**
 * Breakdown of a uniform gap (m) at a pressure (bar), V peak: 24.36 pd + 6.72 √(pd) kV with d in cm
 * (E. Kuffel, W. S. Zaengl, J. Kuffel, High Voltage Engineering, 2000, from memory). It tends to 0 with the gap,
 * below the least voltage of Paschen's law: the safe side.
 */
export function uniformBreakdown(gap: number, pressureBar: number): number {
  const pd = 100 * gap * pressureBar
  return 24_360 * pd + 6_720 * Math.sqrt(pd)
}

// effective ionisation of air, x = E/p in kV/(mm bar), ᾱ/p in 1/(mm bar):
// curve [(x − onset)² − offset] up to the join, slope x − drop above (N. Petcharaks, 1995, after Zaengl; from memory).
// The two published pieces differ by 0.23 % at the join
const curve = 1.6053
const onset = 2.165
const offset = 0.2873
const join = 7.943
const slope = 16.7766
const drop = 80.0006
/** E/p where ionisation outweighs attachment */
const threshold = onset + Math.sqrt(offset)

/** ln of the number of electrons at which an avalanche turns into a streamer (K ≈ 9.2, ISH 2009) */
export const streamerCriterion = 9.15

/** ᾱ/p in 1/(mm bar) at E/p in kV/(mm bar); 0 where electrons are lost. */
export function ionisation(x: number): number {
  if (x <= threshold) return 0
  return x <= join ? curve * ((x - onset) ** 2 - offset) : slope * x - drop
}

export interface StreamerIntegral {
  readonly value: number
  /** change per kV/(mm bar) of the greatest E/p */
  readonly slope: number
}

/**
 * ∫ᾱ dx along the facing line where ᾱ > 0, for a greatest E/p of `x` kV/(mm bar), in closed form: with z measured
 * from the place of least field, E = x/(top − q z²), whose first and second powers have elementary integrals.
 */
export function streamerIntegral(line: FacingLine, x: number, pressureBar: number): StreamerIntegral {
  const { gap, sharp, bend: q } = line
  if (x <= threshold) return { value: 0, slope: 0 }
  // the place of least field lies on the line, and E grows from there to both surfaces
  const middle = sharp / (2 * q)
  const top = 1 + (sharp * middle) / 2
  const reach = (limit: number) => Math.sqrt(Math.max(0, (top - x / limit) / q))
  const first = reach(threshold)
  const steep = reach(join)
  const part = { value: 0, slope: 0 }
  for (const end of [middle, Math.max(0, gap - middle)]) {
    const from = Math.min(first, end)
    const turn = Math.min(steep, end)
    addStretch(part, x, q, top, from, turn, false)
    addStretch(part, x, q, top, turn, end, true)
  }
  const mmBar = 1e3 * pressureBar
  return { value: part.value * mmBar, slope: part.slope * mmBar }
}

/** Adds ∫ᾱ/p dz (m) and its change with x over z0…z1, all in one of the two pieces of the ionisation law. */
function addStretch(
  sum: { value: number; slope: number },
  x: number,
  q: number,
  top: number,
  z0: number,
  z1: number,
  steep: boolean,
): void {
  if (z1 <= z0) return
  const length = z1 - z0
  // ∫dz/(top − q z²), as a difference of inverse hyperbolic tangents that stays exact when their arguments near 1
  const d0 = top - q * z0 * z0
  const d1 = top - q * z1 * z1
  const scale = Math.sqrt(q / top)
  const once = (Math.log((1 + scale * z1) / (1 + scale * z0)) + Math.log(d0 / d1) / 2) / (scale * top)
  if (steep) {
    sum.value += slope * x * once - drop * length
    sum.slope += slope * once
    return
  }
  const twice = (z1 / d1 - z0 / d0 + once) / (2 * top)
  sum.value += curve * (x * x * twice - 2 * onset * x * once + (onset * onset - offset) * length)
  sum.slope += 2 * curve * (x * twice - onset * once)
}

/**
 * Voltage across the air (V peak) at which the streamer integral along the line reaches 9.15. Newton's method on an
 * increasing, convex function: relative error below 1e-10, two to ten evaluations of a closed form.
 */
export function streamerStart(line: FacingLine, pressureBar: number): number {
  const air = line.utilisation * line.gap
  // start at the uniform breakdown voltage, which is above the answer or near it
  const perField = 1e-6 / (air * pressureBar)
  let x = Math.max(3, uniformBreakdown(line.gap, pressureBar) * perField)
  for (let step = 0; step < 60; step++) {
    const { value, slope: change } = streamerIntegral(line, x, pressureBar)
    const next =
      change > 0
        ? Math.min(4 * x, Math.max((threshold + x) / 2, x - (value - streamerCriterion) / change))
        : 2 * x
    const moved = Math.abs(next - x)
    x = next
    if (moved < 1e-10 * x) break
  }
  return x / perField
}

/** The lower of uniform breakdown and streamer start, V peak across the air of the line. */
export const airStart = (line: FacingLine, pressureBar: number): number =>
  Math.min(uniformBreakdown(line.gap, pressureBar), streamerStart(line, pressureBar))

/**
 * Field at the surface of a bare conductor of `radius` (m) where corona starts, V/m peak:
 * 30 m δ (1 + 0.301/√(δ r)) kV/cm with r in cm (F. W. Peek, Dielectric Phenomena in High Voltage Engineering, 1929,
 * second-hand). `roughness` m: 1 clean and polished, 0.8 for what hangs on a wall.
 */
export const peekField = (radius: number, density: number, roughness: number): number =>
  3e6 * roughness * density * (1 + 0.301 / Math.sqrt(density * radius * 100))

/**
 * The gap (m) beside a facing line at which a wedge of air starts first, when walls worth `wallsAsAir` metres of air
 * lie in series: the least of V_b(d)(d + T)/d. With y = √(pd) it is the root of A y³ + (B/2)(y² − pT) = 0.
 */
export function worstWedge(wallsAsAir: number, pressureBar: number): number {
  const pT = 100 * wallsAsAir * pressureBar
  let y = Math.sqrt(pT) // above the root of a convex function: Newton's method falls on to it
  for (let step = 0; step < 40 && y > 0; step++) {
    const next = y - (24.36 * y ** 3 + 3.36 * (y * y - pT)) / (73.08 * y * y + 6.72 * y)
    if (y - next < 1e-12 * y) break
    y = next
  }
  return (y * y) / (100 * pressureBar)
}
