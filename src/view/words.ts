/** Figures in words: the same on the screen, in `check` and on the job sheet. In: SI. Out: text with its unit. */
import type { Supply, Units } from '../layout/layout.js'
import type { PairFinding, Spot, Verdict } from '../rules/findings.js'
import { openTubePhysics } from '../rules/pairs.js'

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
export const length = (value: number, units: Units): string => `${lengthFigure(value, units)} ${units}`

/** how many times over its limit: 2.8, 0.64, over 99 */
export const severityFigure = (severity: number): string =>
  severity >= 99.5 ? '>99' : fixed(severity, severity < 9.95 ? 2 : 0)

/** `K 190` – a place on a part, with its distance from end a */
export const spotText = (spot: Spot, units: Units): string =>
  spot.kind === 'face'
    ? 'face'
    : spot.kind === 'metal'
      ? spot.part
      : `${spot.part} @${lengthFigure(spot.at, units)}`

/** never "safe": within the rule sets that were asked */
export const verdictText = (verdict: Verdict, ruleSets: readonly string[]): string =>
  verdict === 'within' ? `within ${ruleSets.length > 0 ? ruleSets.join(', ') : 'physics'}` : verdict

/** the widest gap that any rule not met asks for, m */
export const needOf = (pair: PairFinding): number | undefined => {
  const needs = pair.rules.filter((r) => !r.ok).map((r) => r.needs)
  return needs.length > 0 ? Math.max(...needs) : undefined
}

/** is it what an open tube does that decides? */
export const openTubeGoverns = ({ judgedOn, governs }: PairFinding): boolean =>
  judgedOn === 'broken' || governs === openTubePhysics

/** `K open`, `K and X open`; empty where no break makes a difference */
export const openText = ({ difference: { openTubes } }: PairFinding): string =>
  openTubes.length === 0 ? '' : `${openTubes.join(' and ')} open`

export const outcomeText: Record<string, string> = {
  nothing: 'no discharge in the air',
  'hiss-and-ozone': 'hiss and ozone, glass and insulation attacked in time',
  flashover: 'flashover',
}

export const groundingText = {
  midpoint: 'midpoint grounded',
  'one-end': 'terminal 2 grounded',
  none: 'not grounded',
} as const

/** `electronic 8.0 kV 30 mA 24 kHz` */
export const supplyShort = (s: Supply): string =>
  `${s.type} ${kv(s.noLoadVoltage)} ${ma(s.shortCircuitCurrent)} ${hertz(s.frequency)}`
