/** From a valley of the distance to the few places that could be its worst. Metres. */

/** Places along a valley: path lengths on both bodies and the axis distance, in order along the first. */
export interface Places {
  readonly s: readonly number[]
  readonly t: readonly number[]
  readonly d: readonly number[]
}

const accuracy = 0.01
const mostSamples = 12
const longestStep = 0.1
/** minima less deep than this are ripple of flattened curves, m */
const ripple = 1e-4

const part = ({ s, t, d }: Places, from: number, to: number): Places => ({
  s: s.slice(from, to + 1),
  t: t.slice(from, to + 1),
  d: d.slice(from, to + 1),
})

/** The stretches of a valley whose distance is at most `most`. */
export function stretchesWithin(places: Places, most: number): Places[] {
  const stretches: Places[] = []
  for (let from = 0; from < places.d.length; from++) {
    if (places.d[from]! > most) continue
    let to = from
    while (to + 1 < places.d.length && places.d[to + 1]! <= most) to++
    stretches.push(part(places, from, to))
    from = to
  }
  return stretches
}

/**
 * Cuts a stretch at places between two really separate minima: where the gap is over 1.5 × the higher of the two
 * minima on either side + 5 mm. The place of the cut ends the one stretch and starts the other.
 */
export function separateStretches(places: Places, radii: number): Places[] {
  const n = places.d.length
  const gap = places.d.map((d) => Math.max(0, d - radii))
  const after = [...gap]
  for (let i = n - 2; i >= 0; i--) after[i] = Math.min(gap[i]!, after[i + 1]!)
  let before = Infinity
  let cut = -1
  let most = 0
  for (let i = 0; i < n; i++) {
    before = Math.min(before, gap[i]!)
    const over = gap[i]! - (1.5 * Math.max(before, after[i]!) + 0.005)
    if (over > most) {
      most = over
      cut = i
    }
  }
  if (cut < 0) return [places]
  return [
    ...separateStretches(part(places, 0, cut), radii),
    ...separateStretches(part(places, cut, n - 1), radii),
  ]
}

/**
 * Indices of the places to keep, ascending: both ends, the minima, the ends of stretches where the parts touch, and
 * as many between, the one missed most first, as leave gap and place on the other body straight to about 1 %.
 */
export function samplesToKeep(places: Places, radii: number): number[] {
  const gap = places.d.map((d) => Math.max(0, d - radii))
  const kept = keyPlaces(places, gap)
  while (kept.length < mostSamples) {
    const worst = worstMissed(places, gap, kept)
    if (worst < 0) break
    kept.push(worst)
    kept.sort((a, b) => a - b)
  }
  return kept
}

function keyPlaces({ d }: Places, gap: readonly number[]): number[] {
  const last = d.length - 1
  // the lowest minima first, in case there are too many
  const minima = prominentMinima(d).sort((a, b) => d[a]! - d[b]! || a - b)
  const touching: number[] = []
  for (let i = 0; i <= last; i++) {
    const edge = gap[i] === 0 && (gap[i - 1] !== 0 || gap[i + 1] !== 0)
    if (edge) touching.push(i)
  }
  const kept = new Set<number>([0, last])
  for (const i of [...minima.slice(0, 1), ...touching, ...minima.slice(1)]) {
    if (kept.size < mostSamples) kept.add(i)
  }
  return [...kept].sort((a, b) => a - b)
}

/** Minima that stand out on both sides from ripple. */
function prominentMinima(d: readonly number[]): number[] {
  const minima: number[] = []
  let low = 0
  let high = 0
  let falling = true
  for (let i = 1; i < d.length; i++) {
    if (falling) {
      if (d[i]! < d[low]!) low = i
      else if (d[i]! > d[low]! + ripple) {
        minima.push(low)
        falling = false
        high = i
      }
    } else if (d[i]! > d[high]!) high = i
    else if (d[i]! < d[high]! - ripple) {
      falling = true
      low = i
    }
  }
  if (falling) minima.push(low)
  return minima
}

/** The place that straight lines between the kept ones miss most, or -1 where they are good enough. */
function worstMissed({ s, t }: Places, gap: readonly number[], kept: readonly number[]): number {
  let worst = -1
  let most = accuracy
  for (let k = 0; k + 1 < kept.length; k++) {
    const from = kept[k]!
    const to = kept[k + 1]!
    const span = s[to]! - s[from]!
    for (let i = from + 1; i < to; i++) {
      const u = span > 0 ? (s[i]! - s[from]!) / span : 0
      // only a gap smaller than the line says can be worse than the kept places
      const inGap = (gap[from]! + u * (gap[to]! - gap[from]!) - gap[i]!) / (gap[i]! + 2e-4)
      // 10 mm along a column are a few volts
      const inPlace = Math.abs(t[from]! + u * (t[to]! - t[from]!) - t[i]!)
      // potentials are not quite straight over a long way: prefer the middle
      const inLength = (span / longestStep) * 2 * accuracy * Math.min(u, 1 - u)
      const missed = Math.max(inGap, inPlace, inLength)
      if (missed > most) {
        most = missed
        worst = i
      }
    }
  }
  return worst
}
