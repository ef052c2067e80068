/** What was measured beside what is computed, in words: the same on the screen and in `check`. */
import type { MeasuredCircuit, MeasuredFigure } from '../network/calibration.js'
import { lawBand } from '../network/lit.js'
import { ma, watts } from './words.js'

/** The figures, one a line, then what follows for the law. */
const measuredLines = (circuit: MeasuredCircuit): string[] => [
  ...(circuit.primaryPower ? [`measured ${beside(circuit.primaryPower, watts, 'at the plug')}`] : []),
  ...circuit.currents.map((figure) => `measured ${beside(figure, ma, `at ${figure.end}`)}`),
  lawText(circuit),
]

/** Everything in one line: "measured 96 W at the plug, computed 103 W: the law is scaled by 0.92, band ±5 %". */
export function measuredText(circuit: MeasuredCircuit): string {
  const lines = measuredLines(circuit)
  return `${lines.slice(0, -1).join('; ')}: ${lines.at(-1)}`
}

/** The same for little room: `plug 96 W (computed 94 W), law x1.03 ±5 %`, then the milliamps. */
export function measuredBriefly(circuit: MeasuredCircuit): string[] {
  const { primaryPower, currents, factor } = circuit
  const brief = ({ measured, computed }: MeasuredFigure, figure: (value: number) => string): string =>
    `${figure(measured)} (${computed === undefined ? 'computed: not lit' : `computed ${figure(computed)}`})`
  const law = `law ${factor === undefined ? 'as it is' : `x${factor.toFixed(2)}`} ±${Math.round(lawBand(circuit.factor) * 100)} %`
  const rows = [
    ...(primaryPower ? [`plug ${brief(primaryPower, watts)}`] : []),
    ...currents.map((current) => `${current.end} ${brief(current, ma)}`),
  ]
  const [first = '', ...rest] = rows
  return [first === '' ? law : `${first}, ${law}`, ...rest]
}

const beside = (
  { measured, computed }: MeasuredFigure,
  figure: (value: number) => string,
  where: string,
): string =>
  `${figure(measured)} ${where}, ${computed === undefined ? 'not lit by the default law' : `computed ${figure(computed)}`}`

function lawText(circuit: MeasuredCircuit): string {
  const band = `band ±${Math.round(lawBand(circuit.factor) * 100)} %`
  if (circuit.factor !== undefined) return `the law is scaled by ${circuit.factor.toFixed(2)}, ${band}`
  return circuit.from === 'nothing'
    ? `an electronic supply sets its own mA, so the law stays, ${band}`
    : `no believable law explains it, so it is not used, ${band}`
}
