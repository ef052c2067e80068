/** Figures in words: the same on the screen and in `check`. In: SI. Out: text with its unit. */
import type { Outcome } from '../gaps/gap-stress.js'
import type { Supply, Units } from '../layout/layout.js'
import { noLoadVoltage } from '../network/supplies.js'
import type { PairFinding, Spot, Verdict } from '../rules/findings.js'
import { widestUnmet } from '../rules/pair-rules.js'
import { openTubePhysics } from '../rules/pairs.js'
import type { RuleSet } from '../rules/rule-set.js'

const fixed = (value: number, decimals: number): string => {
  const text = value.toFixed(decimals)
  return Number(text) === 0 ? text.replace('-', '') : text
}

/** kilovolts with the digits that the model can stand behind: 0.45, 2.1, 12.3 */
export const kvFigure = (volts: number): string => fixed(volts / 1000, Math.abs(volts) < 995 ? 2 : 1)
export const kv = (volts: number): string => `${kvFigure(volts)} kV`
/** kilovolts to a hundredth, where figures are added up: the last digit is not the model's to promise */
export const kv2 = (volts: number): string => `${fixed(volts / 1000, 2)} kV`
export const signedKv = (volts: number): string =>
  `${volts > 0 && Number(kvFigure(volts)) !== 0 ? '+' : ''}${kvFigure(volts)} kV`
export const maFigure = (amperes: number): string => fixed(amperes * 1000, 1)
/** milliamperes, or microamperes where those would read 0.0 */
export const ma = (amperes: number): string =>
  amperes > 0 && amperes < 5e-5 ? `${fixed(amperes * 1e6, 0)} µA` : `${maFigure(amperes)} mA`
/** current through a person; the word where it could not be solved */
export const touchText = (touch: number | undefined): string =>
  touch === undefined ? 'an unknown current' : ma(touch)
export const watts = (power: number): string => `${fixed(power, power < 9.95 ? 1 : 0)} W`
export const percent = (share: number): string => `${fixed(share * 100, 0)} %`
export const metres = (length: number): string => `${fixed(length, length < 9.95 ? 2 : 1)} m`
export const hertz = (frequency: number): string =>
  frequency >= 1000
    ? `${Number((frequency / 1000).toPrecision(3))} kHz`
    : `${Number(frequency.toPrecision(3))} Hz`

/** A length in the units of the layout: whole millimetres from 10 on, inches to a hundredth. */
export function lengthFigure(length: number, units: Units): string {
  if (units === 'in') return fixed(length / 0.0254, 2)
  const mm = length * 1000
  return fixed(mm, Math.abs(mm) < 9.95 ? 1 : 0)
}
/** A length beside another that it is compared with: with a decimal where both would read the same. */
export function gapFigure(gap: number, beside: number | undefined, units: Units): string {
  const plain = lengthFigure(gap, units)
  if (beside === undefined || gap === beside || lengthFigure(beside, units) !== plain) return plain
  return units === 'in' ? fixed(gap / 0.0254, 3) : fixed(gap * 1000, 1)
}
export const length = (value: number, units: Units): string => `${lengthFigure(value, units)} ${units}`

/** how many times over its limit: 2.8, 0.64, over 99 */
export const severityFigure = (severity: number): string =>
  severity >= 99.5 ? '>99' : fixed(severity, severity < 9.95 ? 2 : 0)

/** A place on a part with its distance from end a: short `K @190`, long `K at 190 mm` and with what kind of part it is. */
export function placeText({ kind, part, at }: Spot, units: Units, form: 'short' | 'long'): string {
  if (kind === 'face') return form === 'long' ? 'the face' : 'face'
  if (kind === 'metal') return form === 'long' ? `metal ${part}` : part
  if (form === 'short') return `${part} @${lengthFigure(at, units)}`
  return `${kind === 'lead' ? 'lead ' : ''}${part} at ${length(at, units)}`
}

/** never "safe": within the rule sets that were judged by; one that could not be read is not among them */
export const verdictText = (verdict: Verdict, ruleSets: readonly Pick<RuleSet, 'id'>[]): string =>
  verdict === 'within' ? `within ${ruleSets.map(({ id }) => id).join(', ') || 'physics'}` : verdict

/** the widest gap that any rule not met asks for, m */
export const needOf = (pair: PairFinding): number | undefined => widestUnmet(pair)?.needs

/** is it what an open tube does that decides? */
export const openTubeGoverns = ({ judgedOn, governs, rules }: PairFinding): boolean =>
  judgedOn === 'broken' ||
  governs === openTubePhysics ||
  rules.some((r) => r.condition === 'broken' && governs === `${r.set}: ${r.clause}`)

/** `K open`, `K and X open`; empty where no break makes a difference */
export const openText = ({ difference: { openTubes } }: PairFinding): string =>
  openTubes.length === 0 ? '' : `${openTubes.join(' and ')} open`

export const outcomeText: Record<Outcome, string> = {
  nothing: 'no discharge in the air',
  'hiss-and-ozone': 'hiss and ozone, glass and insulation attacked in time',
  flashover: 'flashover',
}

/** which of two readings of thin evidence starts of discharges go by */
export const airText = {
  cautious: 'cautious reading',
  best: 'likeliest, for clean air and smooth parts',
} as const

export const groundingText = {
  midpoint: 'midpoint grounded',
  'one-end': 'terminal 2 grounded',
  none: 'not grounded',
} as const

/** `electronic 8.0 kV 30 mA 24 kHz`; the no-load voltage that counts, by its peak where that is stated and greater */
export const supplyShort = (s: Supply): string =>
  `${s.type} ${kv(noLoadVoltage(s))} ${ma(s.shortCircuitCurrent)} ${hertz(s.frequency)}`
