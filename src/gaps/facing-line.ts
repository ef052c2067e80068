/**
 * The field between two cylinders, or a cylinder and a flat surface, along the line where they face each other.
 *
 *   surface of a |<----------- gap ----------->| surface of b
 *                s = 0                         s = gap          (s counts from the more curved of the two)
 *
 * Everything is written in curvatures (1/radius), so that a flat surface is curvature 0 and nothing cancels when the
 * gap is small: E(s) = E_max/(1 + c1 s − q s²), which is the two-cylinder field of physics text books with its
 * origin moved to the more curved surface.
 */

/** A surface that faces another: the outside of glass, insulation or metal. Lengths in m. */
export interface Surface {
  /** a plane is flat metal: its radius does not count */
  readonly kind: 'glass' | 'insulated' | 'bare' | 'plane'
  readonly outerRadius: number
  /** thickness of glass or insulation over the conductor; 0 for bare metal */
  readonly wall: number
  /** relative permittivity of the wall */
  readonly permittivity: number
}

export interface FacingLine {
  /** m, see `facingLine` for its bounds */
  readonly gap: number
  /** 1/m, of the more and of the less curved surface */
  readonly sharp: number
  readonly blunt: number
  /** q of E(s), 1/m² */
  readonly bend: number
  /** average field over greatest field, 0…1 */
  readonly utilisation: number
}

/** bounds that keep every result finite, m: gaps and radii outside them count as the bound */
const leastGap = 1e-9
const widestGap = 1e3
const flatRadius = 1e6
const leastRadius = 1e-9

/** 1/m */
export const curvature = (s: Surface): number =>
  1 / (s.kind === 'plane' ? flatRadius : Math.min(flatRadius, Math.max(leastRadius, s.outerRadius)))

/** The line between two surfaces of these curvatures (1/m, either order) and clear gap (m, at least 1 nm). */
export function facingLine(curvatureA: number, curvatureB: number, clearGap: number): FacingLine {
  const gap = Math.min(widestGap, Math.max(leastGap, clearGap))
  const sharp = Math.max(curvatureA, curvatureB, 1 / flatRadius)
  const blunt = Math.min(curvatureA, curvatureB)
  const bend = (gap * sharp * blunt + sharp + blunt) / (gap * (2 + gap * blunt))
  return { gap, sharp, blunt, bend, utilisation: averageOverGreatest(sharp, blunt, gap) }
}

/** The utilisation factor from curvatures, sharp ≥ blunt ≥ 0 and sharp > 0, any unit of length. */
function averageOverGreatest(sharp: number, blunt: number, gap: number): number {
  // u − 1 = w/2, where u = (D² − b1² − b2²)/(2 b1 b2)
  const w = gap * (gap * sharp * blunt + 2 * sharp + 2 * blunt)
  const root = Math.sqrt(w)
  return ((2 * Math.asinh(root / 2)) / root) * Math.sqrt((2 + gap * blunt) / (2 + gap * sharp))
}

/**
 * Average over greatest field between two cylinders of radius b1 and b2 with clear gap d (any one length unit);
 * Infinity stands for flat metal. η = b1(h − b1) acosh(u)/(σ d); with equal radii acosh(u')/√(u'² − 1),
 * u' = 1 + d/2b, and over metal u' = 1 + d/b: Schwaiger's utilisation factor.
 */
export function utilisation(b1: number, b2: number, d: number): number {
  const unit = Math.min(b1, b2) // dimensionless, so that no unit is preferred
  if (!Number.isFinite(unit)) return 1
  return d > 0 ? averageOverGreatest(1, unit / Math.max(b1, b2), d / unit) : 1
}

/** E(s)/E_max at distance s (m) from the more curved surface. */
export const fieldShape = (line: FacingLine, s: number): number => 1 / (1 + s * (line.sharp - line.bend * s))

/** ∫E ds/E_max over a stretch of the line, m: the voltage across it per volt per metre of the greatest field. */
export function lengthOfField(line: FacingLine, from: number, to: number): number {
  // s seen from the place of least field, where E = E_max/(top − q z²)
  const { sharp, bend: q } = line
  const middle = sharp / (2 * q)
  const top = 1 + (sharp * middle) / 2
  const scale = Math.sqrt(q / top)
  const antiderivative = (z: number) => Math.log1p(scale * z) - Math.log(top - q * z * z) / 2
  const odd = (z: number) => (z < 0 ? -antiderivative(-z) - Math.log(top) : antiderivative(z))
  return (odd(to - middle) - odd(from - middle)) / (scale * top)
}

/**
 * Thickness of air (m) that a wall is worth in series with the gap, per field at its outer surface:
 * τ = [t + (b ln(b/a) − t) d/(d + b)]/εr, between the plane-parallel value at a small gap and the coaxial one at a
 * large gap – but no more than the field between the two conductors without walls would make of it. That limit (ours)
 * takes over where a thin wire faces thick insulation: its field spreads inside the wall. Known limit: for bare metal up
 * to 4 mm thick within a few mm of thick insulation the start that follows is up to 17 % too high (2-D solution).
 */
export function wallAsAir(s: Surface, other: Surface, gap: number): number {
  if (s.wall <= 0) return 0
  const own = s.kind === 'plane' ? s.wall : curvedWall(s, gap)
  return Math.min(own, spreadWall(s, other, gap)) / s.permittivity
}

const coreCurvature = (s: Surface): number =>
  s.kind === 'plane' ? curvature(s) : Math.max(curvature(s), 1 / Math.max(leastRadius, coreRadius(s)))

const coreRadius = (s: Surface): number => {
  const b = Math.max(leastRadius, s.outerRadius)
  return Math.max(1e-3 * b, b - s.wall)
}

function curvedWall(s: Surface, gap: number): number {
  const b = Math.max(leastRadius, s.outerRadius)
  return s.wall + (b * Math.log(b / coreRadius(s)) - s.wall) * (gap / (gap + b))
}

/** Voltage across the place of the wall per field at its outer surface, between the bare conductors, m. */
function spreadWall(s: Surface, other: Surface, gap: number): number {
  const own = coreCurvature(s)
  const facing = coreCurvature(other)
  const whole = facingLine(own, facing, gap + s.wall + Math.max(0, other.wall))
  const [from, to] = own >= facing ? [0, s.wall] : [whole.gap - s.wall, whole.gap]
  return lengthOfField(whole, from, to) / fieldShape(whole, own >= facing ? to : from)
}

export interface AirShare {
  readonly line: FacingLine
  /** voltage across the air over the difference of the conductors, 0…1 */
  readonly share: number
  /** greatest field in the air per volt of that difference, 1/m */
  readonly fieldPerVolt: number
  /** Στ/η, m: the air that both walls are worth beside `gap` metres of evenly stressed air */
  readonly wallsAsAir: number
}

/**
 * How the difference of two conductors divides between the air and the walls: E_max = U/(η d + Στ), where the wall of
 * the less curved surface counts by the lower field that stands on it.
 */
export function airShare(gap: number, a: Surface, b: Surface): AirShare {
  const line = facingLine(curvature(a), curvature(b), gap)
  const far = fieldShape(line, line.gap)
  const aIsSharp = curvature(a) >= curvature(b)
  const bIsSharp = curvature(b) >= curvature(a)
  const walls =
    wallAsAir(a, b, line.gap) * (aIsSharp ? 1 : far) + wallAsAir(b, a, line.gap) * (bIsSharp ? 1 : far)
  const air = line.utilisation * line.gap
  return {
    line,
    share: air / (air + walls),
    fieldPerVolt: 1 / (air + walls),
    wallsAsAir: walls / line.utilisation,
  }
}
