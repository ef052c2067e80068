/** Cautions in English: the same on the screen and in `check`. */
import type { Units } from '../layout/layout.js'
import type { Caution, CircuitRuleFinding, PairFinding } from '../rules/findings.js'
import { widestUnmet } from '../rules/pair-rules.js'
import type { MissingRules, Quantity } from '../rules/rule-set.js'
import { loadingClause } from './loading-text.js'
import {
  hertz,
  kv,
  length,
  lengthFigure,
  ma,
  maFigure,
  metres,
  needOf,
  openText,
  openTubeGoverns,
  outcomeText,
  percent,
  placeText,
  touchText,
} from './words.js'

/** What holds for every sign and is always in view, the shorter forms for narrow screens. */
const standing = [
  'HIGH VOLTAGE KILLS AND STARTS FIRES. Off, locked out and discharged before touching; licensed person and local code decide.',
  'HIGH VOLTAGE KILLS AND STARTS FIRES. Off, locked out, discharged before touching. Code and licence decide.',
  'HIGH VOLTAGE KILLS. Lock out and discharge first. Local code decides.',
  'HIGH VOLTAGE KILLS. Lock out first.',
] as const

/** the longest form that fits into `width` cells; the shortest where none does */
export const standingWarning = (width = Infinity): string =>
  standing.find((text) => text.length <= width) ?? standing[3]

export const generalCautions: readonly string[] = [
  'The voltages here kill. Switch off, lock out and discharge before touching glass, leads or metal; one slip is enough.',
  'Sparks and creeping discharges start fires: keep combustible material away from leads and electrodes.',
  'Bond and ground all metal of the sign, frames and boxes included.',
  'Do not measure kilovolts with ordinary meters or probes; measure only what an instrument rated for it can take.',
  'The figures are a model of clean, dry, new glass; they do not replace an inspection. A licensed person and the local code decide.',
]

const some = (names: readonly string[], most = 4): string =>
  names.length <= most
    ? names.join(', ')
    : `${names.slice(0, most).join(', ')} and ${names.length - most} more`
const practice = '(common practice)'

/** A caution in one or two sentences; lengths of the sign in the units of its layout. */
export function cautionText(caution: Caution, units: Units): string {
  switch (caution.code) {
    case 'dark':
      return darkText(caution)
    case 'may-go-dark':
      return `${caution.supply} lights the string by the gradient law, but not if the glass takes ${percent(caution.band)} more: the sign may go dark.`
    case 'pairs':
      return pairsText(caution.pair, caution.fix, caution.watch, units)
    case 'open-tube':
      return openTubeText(caution, units)
    case 'floating-metal':
      return `Metal "${caution.id}" is not grounded: it floats to ${kv(caution.voltage)} rms, and ${touchText(caution.touch)} would flow through a person touching it. Bond it to ground.`
    case 'loading':
      return `${caution.supply} ${loadingClause(caution.loading, units)}.`
    case 'rule':
      return ruleText(caution.supply, caution.finding, units)
    case 'conduit':
      return `Never run an electronic supply's lead in metal conduit: ${some(caution.leads)} (${caution.governs}).`
    case 'rules-missing':
      return `Rule set missing, so not judged by it: ${caution.missing.map(missingText).join('; ')}.`
    case 'glass-meets':
      return `Glass meets in the drawing: ${some(caution.tubes.map(([a, b]) => (a === b ? `${a} with itself` : `${a} and ${b}`)))}. Which is in front? Give their heights (z).`
    case 'strained':
      return `Drawn into other parts, so capacitances there are rough: ${some(caution.parts)}. Give heights (z).`
    case 'route-misfit':
      return `The drawn route does not reach the end it joins: ${some(caution.leads.map((l) => `${l.name} (${length(l.off, units)} off)`))}. Draw it again in the file.`
    case 'route-assumed':
      return `Route assumed where it passes glass or metal: ${some(caution.leads)}. Give the real route in the file.`
    case 'off-metal':
      return `Output leads near the metal face: ${some(caution.leads)}. Lift output leads off the metal: 25 mm of spacer helps much ${practice}.`
    case 'lower-voltage':
      return `${caution.supply}: lower voltage is better – two 6 kV supplies rather than one 12 kV ${practice}.`
    case 'stray':
      return strayText(caution)
    case 'frequency':
      if (caution.type === 'core-and-coil')
        return `${caution.supply}: a core-and-coil transformer runs on the mains, the layout says ${hertz(caution.frequency)}. Is the type right?`
      return `${caution.supply}: electronic supplies run at 20–30 kHz; the layout says ${hertz(caution.frequency)} ${practice}.`
  }
}

type Of<Code extends Caution['code']> = Extract<Caution, { code: Code }>

function darkText({ supply, why, neededVoltage, noLoadVoltage, dark }: Of<'dark'>): string {
  const [first, ...then] = dark
  const which = first ? ` ${first} goes dark first${then.length > 0 ? ` (then ${some(then)})` : ''}.` : ''
  const reason =
    why === 'needs-more-than-no-load' && neededVoltage !== undefined
      ? `it takes ${kv(neededVoltage)} rms and the supply has ${kv(noLoadVoltage)} at no load`
      : why === 'not-enough-current'
        ? 'stray capacitance takes the current before it reaches the far tubes'
        : 'there is no stable operating point'
  return `${supply} cannot light its whole string: ${reason}.${which} Its pairs are judged on nameplate.`
}

/** The worst pair with its gap, kV and need, and how many more there are. */
function pairsText(pair: PairFinding, fix: number, watch: number, units: Units): string {
  const { lit, nameplate } = pair.difference
  const difference = openTubeGoverns(pair)
    ? `${kv(pair.difference.broken)} rms with ${openText(pair)}`
    : lit === undefined
      ? `${kv(nameplate)} rms on paper`
      : `${kv(lit)} rms`
  const need = needOf(pair)
  const same = need !== undefined && length(need, units) === length(pair.gap, units)
  // 37.5 mm where 38 are needed is not to read "38 mm, needs 38 mm"
  const gap = same
    ? `${(pair.gap * (units === 'in' ? 1 / 0.0254 : 1000)).toFixed(units === 'in' ? 3 : 1)} ${units}`
    : length(pair.gap, units)
  const asked =
    need === undefined ? `against ${pair.governs}` : `needs ${length(need, units)} by ${governing(pair)}`
  const more = [...(fix > 0 ? [`${fix} more to fix`] : []), ...(watch > 0 ? [`${watch} to watch`] : [])]
  return (
    `${placeText(pair.a, units, 'short')} to ${placeText(pair.b, units, 'short')}: gap ${gap} at ${difference}, ${asked}` +
    `${more.length > 0 ? `; ${more.join(', ')}` : ''}.`
  )
}

function openTubeText({ pair, places }: Of<'open-tube'>, units: Units): string {
  const where = `${placeText(pair.a, units, 'short')} and ${placeText(pair.b, units, 'short')}`
  const outcome = outcomeText[pair.air.open?.outcome ?? 'nothing']
  const more = places > 1 ? ` (and in ${places - 1} more places)` : ''
  return `With ${openText(pair)}, ${kv(pair.difference.broken)} rms stand between ${where}${more}: ${outcome}. Open-circuit protection must switch the supply off: test it.`
}

/** the rule that asks for the widest gap */
const governing = (pair: PairFinding): string => {
  const widest = widestUnmet(pair)
  return widest ? `${widest.set}: ${widest.clause}` : pair.governs
}

/** What a quantity of rules is called, and how its figures are written. */
const quantityWords: Record<Quantity, { readonly name: string; readonly figure: (value: number) => string }> =
  {
    'no-load-kv': { name: 'no-load voltage', figure: kv },
    'terminal-kv': { name: 'no-load voltage of a terminal to ground', figure: kv },
    'needed-kv': { name: 'voltage needed', figure: kv },
    'short-circuit-ma': { name: 'short-circuit current', figure: ma },
    'terminal-ma': { name: 'current at the terminals', figure: ma },
    'residual-ma': { name: 'current back through ground', figure: ma },
    'rated-va': { name: 'rated input', figure: (value) => `${Math.round(value)} VA` },
    'mains-va': { name: 'mains input', figure: (value) => `about ${Math.round(value)} VA` },
    load: { name: 'voltage needed of the no-load voltage', figure: percent },
    'chart-share': { name: "footage of the maker's chart", figure: percent },
    'tube-m': { name: 'length of glass', figure: metres },
    'lead-m': { name: 'longest lead', figure: metres },
    'output-lead-m': { name: 'longest output lead', figure: metres },
    'all-leads-m': { name: 'leads together', figure: metres },
  }
export const quantityName = (quantity: Quantity): string => quantityWords[quantity].name
export const quantityFigure = (quantity: Quantity, value: number): string =>
  quantityWords[quantity].figure(value)

const requiredWords = {
  'ground-fault-protection': 'no ground-fault protection is stated',
  'open-circuit-protection': 'no open-circuit protection is stated',
} as const

function ruleText(supply: string, finding: CircuitRuleFinding, units: Units): string {
  const governs = `${finding.set}: ${finding.clause}`
  const advice = finding.advice === '' ? '' : ` – ${finding.advice}`
  if (finding.kind === 'required')
    return `${supply}: ${requiredWords[finding.requires]} (${governs}${advice}).`
  const { quantity, value, limit, parts } = finding
  const figure = (v: number) =>
    quantity === 'lead-m' || quantity === 'output-lead-m' ? leadLength(v, units) : quantityFigure(quantity, v)
  const which = parts.length > 0 ? ` (${some(parts)})` : ''
  return `${supply}: ${quantityName(quantity)} is ${figure(value)}${which}, at most ${figure(limit)} by ${governs}${advice}.`
}

const leadLength = (value: number, units: Units): string =>
  units === 'in' ? `${lengthFigure(value, units)} in` : metres(value)

/** the first of its faults; the command line prints all of them with their places */
function missingText({ complaint }: MissingRules): string {
  const [first = '', ...more] = complaint.split('\n\n')
  const [sentence = ''] = first.split('\n')
  return more.length > 0 ? `${sentence} (and ${more.length} more)` : sentence
}

function strayText({ supply, tube, least, given, tubeLength, onMetal }: Of<'stray'>): string {
  const only = `${supply}: only ${maFigure(least)} of ${ma(given)} reach ${tube}; stray capacitance takes current on the way, over ${metres(tubeLength)} of glass`
  return onMetal ? `${only}. Electronic supplies are not for long runs on metal ${practice}.` : `${only}.`
}
