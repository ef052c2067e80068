/** Rows of invented tubes, as text. */

/** Numbers from 0 to below 1, the same in every run (linear congruence of Numerical Recipes). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 32
  }
}

/** What a test says of a row of hooks. */
export interface Row {
  readonly tubes: number
  readonly seed?: number
  /** kV for each tube */
  readonly kv?: number
  readonly grounding?: 'midpoint' | 'one-end' | 'none'
  /** further keys of the supply */
  readonly supply?: string
  readonly rules?: string
}

/** A row of hooks of different heights, closer together than is good, strung in a wild order. */
export function rowText({
  tubes,
  seed = 1,
  kv = 0.8,
  grounding = 'midpoint',
  supply = '',
  rules,
}: Row): string {
  const random = seeded(seed)
  const between = (low: number, high: number) => Math.round(low + (high - low) * random())
  const lines = Array.from({ length: tubes }, (_, k) => {
    const [x, y] = [100 + 105 * k, between(60, 120)]
    const [foot, right] = [y + between(120, 260), x + between(45, 86)]
    const up = random() < 0.5 ? `, [${right}, ${y + 40}]` : ''
    return `  - {id: L${k + 1}, path: [[${x}, ${y}], [${x}, ${foot}], [${right}, ${foot}]${up}]}`
  })
  const names = Array.from({ length: tubes }, (_, k) => `L${k + 1}`)
  const string = names.map((name) => ({ name, at: random() })).sort((a, b) => a.at - b.at)
  return `layout: 1
title: row of ${tubes}
units: mm
altitude_m: 0
face: {size: [${105 * tubes + 200}, 600], metal: none}
defaults:
  tube: {diameter: 12, wall: 1, glass: lead, fill: neon, height: 40, boots: true}
  lead: {conductor: 1.2, diameter: 7, insulation: silicone, height: -20}
tubes:
${lines.join('\n')}
supplies:
  - {id: S1, type: electronic, no_load_kv: ${(kv * tubes + 1).toFixed(1)}, short_circuit_ma: 30, frequency_hz: 22000, grounding: ${grounding},
     open_circuit_protection: true, terminals: [[${50 * tubes}, 560, -20], [${50 * tubes + 60}, 560, -20]]${supply}}
circuits:
  - {supply: S1, string: [${string.map(({ name }) => name).join(', ')}]}
rules: [${rules ?? 'common-practice'}]
`
}
