/** Leads in words: what they eat, what another way of laying them gives back, what makes the residual. */
import type { Layout, Units } from '../layout/layout.js'
import { supplyOf } from '../layout/parts.js'
import { magnitude } from '../math/complex.js'
import { noLoadVoltage } from '../network/supplies.js'
import type { CircuitFinding, LeadFinding } from '../rules/findings.js'
import type { LeadSaving, Saving } from '../rules/lead-savings.js'
import { terminalVoltage } from '../rules/pair-rules.js'
import { kv, length, ma, maFigure, percent } from './words.js'

/** what shows in figures with a tenth of a milliamp, A */
const visible = 5e-5
/** of the parts that make the residual, so many are named */
const named = 5

/** the larger current out of the terminals, A */
export const givenBy = ({ terminals }: CircuitFinding): number =>
  Math.max(0, ...terminals.map(({ current }) => magnitude(current)))

/** What each lead of a circuit takes and stands at, and what laying the output leads otherwise gives back. */
export function leadLines(
  layout: Layout,
  circuit: CircuitFinding,
  savings: readonly LeadSaving[] | undefined,
): string[] {
  const given = givenBy(circuit)
  return [
    ...(given > 0 ? [`${circuit.supply} gives ${ma(given)}; what each lead eats of it sideways:`] : []),
    ...circuit.leads.map((lead) => leadLine(layout.units, circuit, lead)),
    ...(savings ?? []).flatMap((saving) => savingLines(layout.units, saving)),
    insulationLine(layout, circuit),
  ]
}

function leadLine(units: Units, circuit: CircuitFinding, lead: LeadFinding): string {
  const name = `${lead.between.join('–')}, ${lead.role}, ${length(lead.length, units)}`
  const paper = `${kv(Math.abs(lead.nameplate) * Math.SQRT2)} peak at no load`
  if (lead.voltage === undefined || lead.stray === undefined) return `${name}: stands at ${paper}.`
  const given = givenBy(circuit)
  const share = given > 0 ? ` (${percent(lead.stray / given)})` : ''
  return `${name}: eats ${ma(lead.stray)}${share}; stands at ${kv(lead.voltage * Math.SQRT2)} peak, ${paper}.`
}

/** How a lead's rating is to be chosen. No table of insulation classes is shipped, as none could be sourced. */
function insulationLine(layout: Layout, { supply }: CircuitFinding): string {
  const own = supplyOf(layout, supply)
  const most = (own.grounding === 'none' ? noLoadVoltage(own) : terminalVoltage(own)) * Math.SQRT2
  return `With a tube open any lead of ${supply} may stand at ${kv(most)} peak to ground: the rating of its insulation must exceed that.`
}

function savingLines(units: Units, { between, cut, lift }: LeadSaving): string[] {
  const name = between.join('–')
  return [
    ...(cut
      ? [`${name} cut to the straight ${length(cut.length, units)}: ${gains(cut)}.`]
      : [`${name} is as short as it goes already.`]),
    ...(lift
      ? [`${name} lifted ${length(Math.abs(lift.by), units)}, to 25 mm off the metal: ${gains(lift)}.`]
      : []),
  ]
}

function gains({ stray, least, residual }: Saving): string {
  const change = (less: number) => `${less >= 0 ? 'less' : 'more'} by ${ma(Math.abs(less))}`
  return (
    `it eats ${change(stray)}, the dimmest tube gets ${ma(Math.abs(least))} ${least >= 0 ? 'more' : 'less'}, ` +
    `the residual is ${change(residual)}`
  )
}

/** The current back through ground and the parts that make most of it. */
export function residualLines(circuit: CircuitFinding): string[] {
  const { residual, supply } = circuit
  if (residual === undefined) return []
  const parts = [
    ...circuit.tubes.map((t) => ({ name: t.id, share: t.ofResidual })),
    ...circuit.leads.map((l) => ({ name: `lead ${l.between.join('–')}`, share: l.ofResidual })),
  ].flatMap(({ name, share }) => (share === undefined ? [] : [{ name, share }]))
  const ranked = [...parts].sort((a, b) => Math.abs(b.share) - Math.abs(a.share))
  const told = ranked.slice(0, named)
  const others = ranked.slice(named).reduce((sum, { share }) => sum + share, 0)
  const rest = residual - parts.reduce((sum, { share }) => sum + share, 0)
  const trip = circuit.loadings.find(({ by }) => by === 'residual')
  const signed = (amperes: number) => `${amperes >= visible ? '+' : ''}${maFigure(amperes)}`
  return [
    `${supply} gets ${ma(residual)} back through ground` +
      (trip
        ? `: ${percent(trip.share)} of the ${ma(trip.limit)} that trips it.`
        : '; no trip value is stated.'),
    ...(residual < visible
      ? []
      : [
          `Made by (mA in step with it, minus balances the others): ${[
            ...told.map(({ name, share }) => `${name} ${signed(share)}`),
            ...(ranked.length > named ? [`${ranked.length - named} more parts ${signed(others)}`] : []),
            ...(Math.abs(rest) >= visible ? [`ungrounded metal and other circuits ${signed(rest)}`] : []),
          ].join(', ')}.`,
        ]),
  ]
}
