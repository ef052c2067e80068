/** The figures of a sign that symptoms point at, each as a line of text. */
import { columnLaw } from '../network/columns.js'
import { lawBand } from '../network/lit.js'
import type { CircuitFinding, PairFinding } from '../rules/findings.js'
import type { LeadSaving } from '../rules/lead-savings.js'
import { cautionText } from './caution-text.js'
import { givenBy, leadLines, residualLines } from './lead-text.js'
import { loadingBriefly } from './loading-text.js'
import type { WhySign } from './why-walk.js'
import {
  hertz,
  kv,
  length,
  ma,
  metres,
  outcomeText,
  percent,
  placeText,
  severityFigure,
  touchText,
} from './words.js'

/** so many of a list are told */
const told = 5

const marginOf = ({ air }: PairFinding): number => air.peak / air.startsAt

/** The gaps with the most of their start, with their numbers in the list. */
export function airLines(sign: WhySign): string[] {
  const { pairs } = sign.inspection
  if (pairs.length === 0) return ['No two conductors pass each other closely.']
  const ranked = pairs
    .map((pair, i) => ({ pair, number: i + 1 }))
    .sort((a, b) => marginOf(b.pair) - marginOf(a.pair))
  const over = ranked.filter(({ pair }) => marginOf(pair) >= 1).length
  return [
    `${over} of ${pairs.length} pairs reach the start of a discharge${over === 0 ? '; the nearest are' : '. The worst'}:`,
    ...ranked.slice(0, told).map(({ pair, number }) => {
      const { peak, startsAt, outcome } = pair.air
      return `pair ${number}, ${between(sign, pair)}: ${kv(peak)} peak in the air, a discharge starts at ${kv(startsAt)}: ${severityFigure(marginOf(pair))} x, ${outcomeText[outcome] ?? outcome}.`
    }),
  ]
}

const between = ({ layout: { units } }: WhySign, { a, b, gap }: PairFinding): string =>
  `${placeText(a, units, 'long')} to ${placeText(b, units, 'long')}, gap ${length(gap, units)}`

/** Glass with the greatest difference to a neighbour for its gap. */
export function neighbourLines(sign: WhySign): string[] {
  const found = sign.inspection.pairs
    .map((pair, i) => ({ pair, number: i + 1 }))
    .filter(({ pair }) => pair.a.kind === 'tube' || pair.b.kind === 'tube')
    .map((one) => ({ ...one, volts: one.pair.difference.lit ?? one.pair.difference.nameplate }))
    .sort((a, b) => b.volts / (b.pair.gap + 0.001) - a.volts / (a.pair.gap + 0.001))
  if (found.length === 0) return ['No other part passes close to the glass.']
  return found
    .slice(0, told)
    .map(
      ({ pair, number, volts }) =>
        `pair ${number}, ${between(sign, pair)}: ${kv(volts)} rms${pair.difference.lit === undefined ? ' on paper' : ''}.`,
    )
}

const lit = ({ inspection }: WhySign): CircuitFinding[] => inspection.circuits.filter((c) => c.lit)
const notLit = 'No circuit of this sign is lit: there are no currents to show.'

/** The dimmest place of every tube, the dimmest tube first. */
export function weakestLines(sign: WhySign): string[] {
  const tubes = lit(sign).flatMap((c) =>
    c.tubes.flatMap((t) => (t.least ? [{ id: t.id, least: t.least }] : [])),
  )
  if (tubes.length === 0) return [notLit]
  return tubes
    .sort((a, b) => a.least.current - b.least.current)
    .slice(0, told)
    .map(({ id, least }) => `${id}: ${ma(least.current)} at ${length(least.at, sign.layout.units)}.`)
}

/** What reaches each tube of the string, in light of what the supply gives, the dimmest first. */
export function currentLines(sign: WhySign): string[] {
  const { layout } = sign
  const circuits = lit(sign)
  if (circuits.length === 0) return [notLit]
  return circuits.flatMap((c) => {
    const given = givenBy(c)
    const tubes = c.tubes.flatMap((t) => (t.least ? [{ id: t.id, current: t.least.current }] : []))
    return [
      `${c.supply} gives ${ma(given)}; light goes about with the current (from memory), under 10 % of the rated counts as dark (ours).`,
      ...tubes
        .sort((a, b) => a.current - b.current)
        .slice(0, told)
        .map(({ id, current }) => {
          const tube = layout.tubes.find((t) => t.id === id)!
          const { ratedCurrent } = columnLaw(tube.diameter, tube.fill)
          return `${id}: ${ma(current)} at its dimmest place, ${percent(current / given)} of that, ${percent(current / ratedCurrent)} of the rated ${ma(ratedCurrent)}.`
        }),
    ]
  })
}

/** The tubes and leads that lose most current sideways. */
export function strayLines(sign: WhySign): string[] {
  const circuits = lit(sign)
  if (circuits.length === 0) return [notLit]
  return circuits.flatMap((c) => {
    const parts = [
      ...c.tubes.map((t) => ({ name: t.id, stray: t.stray ?? 0, long: t.length })),
      ...c.leads.map((l) => ({ name: `lead ${l.between.join('–')}`, stray: l.stray ?? 0, long: l.length })),
    ].sort((a, b) => b.stray - a.stray)
    return [
      `${c.supply}: ${ma(c.stray ?? 0)} of stray current in all, over ${metres(c.tubeLength)} of glass.`,
      ...parts
        .slice(0, told)
        .map(({ name, stray, long }) => `${name}, ${length(long, sign.layout.units)}: loses ${ma(stray)}.`),
    ]
  })
}

/** Voltage, chart, mains, trip and lead of each supply against their limits. */
export function loadLines({ inspection }: WhySign): string[] {
  return inspection.circuits.flatMap((c) => {
    const shares = c.loadings.map(loadingBriefly)
    return [`${c.supply}: ${shares.join(', ') || 'no figure of its load is known'}.`]
  })
}

/** Whether each circuit lights, and how much it has left. */
export function darkLines({ layout, inspection }: WhySign): string[] {
  return inspection.circuits.flatMap((c) => {
    const said = inspection.cautions
      .filter(({ code }) => code === 'dark' || code === 'may-go-dark')
      .filter((caution) => 'supply' in caution && caution.supply === c.supply)
      .map((caution) => cautionText(caution, layout.units))
    if (said.length > 0) return said
    if (!c.lit) return [`${c.supply}: the lit solution is not there yet.`]
    return [
      `${c.supply} lights the whole string: ${kv(c.neededVoltage ?? 0)} of ${kv(c.noLoadVoltage)} rms, also with glass that takes ${percent(lawBand(c.measured?.factor))} more.`,
    ]
  })
}

export function floatingLines({ inspection: { floating, solved } }: WhySign): string[] {
  if (floating.length > 0)
    return floating.map(
      (f) =>
        `${f.id} floats to ${kv(f.voltage)} rms; ${touchText(f.touch)} would flow through a person touching it.`,
    )
  return [solved ? 'All metal of this sign is grounded, or there is none.' : 'Not solved yet.']
}

/** What a supply can be heard or received at. */
export function soundLines({ layout, inspection }: WhySign): string[] {
  return inspection.circuits.flatMap(({ supply }) => {
    const s = layout.supplies.find(({ id }) => id === supply)!
    return s.type === 'core-and-coil'
      ? [
          `${s.id} is core-and-coil at ${hertz(s.frequency)}: iron and discharges sound at ${hertz(2 * s.frequency)}, twice that.`,
        ]
      : [
          `${s.id} is electronic at ${hertz(s.frequency)}${s.frequency > 16_000 ? ', above hearing' : ', which can be heard'}; harmonics of it reach into the radio bands.`,
        ]
  })
}

export function tripLines({ layout, inspection }: WhySign): string[] {
  return inspection.circuits.flatMap((c) => {
    const supply = layout.supplies.find(({ id }) => id === c.supply)!
    const protection = supply.openCircuitProtection
      ? `${c.supply} shuts down on an open circuit: a bad joint or a failed electrode trips it too.`
      : `${c.supply} has no open-circuit protection that the layout knows of.`
    return [...(c.lit ? residualLines(c) : [`${c.supply} is not lit: no residual to show.`]), protection]
  })
}

/** The leads of all circuits. */
export function leadsOf(sign: WhySign, savings: readonly LeadSaving[] | undefined): string[] {
  return sign.inspection.circuits.flatMap((c, i) =>
    leadLines(
      sign.layout,
      c,
      savings?.filter(({ circuit }) => circuit === i),
    ),
  )
}
