/** The supply loading, live: needed voltage, mA, chart, mains and trip as bars with the limit marked. */

import { supplyOf } from '../../layout/parts.js'
import { magnitude } from '../../math/complex.js'
import type { CircuitFinding, Loading, Verdict } from '../../rules/findings.js'
import { loadingBar, loadingFigures } from '../../view/loading-text.js'
import { measuredBriefly } from '../../view/measured-text.js'
import { hertz, kvFigure, ma, maFigure, metres, percent, supplyShort, watts } from '../../view/words.js'
import { fitted, type Line, line, lineWidth, span } from '../lines.js'
import type { State } from '../state.js'
import { dots } from './words.js'

export function loadingLines(state: State, width: number, height: number): Line[] {
  const { circuits } = state.inspection
  const each = Math.max(1, Math.floor(height / Math.max(1, circuits.length)))
  const lines =
    each < 3
      ? compactLines(state, circuits, width)
      : circuits.flatMap((circuit, i) => circuitLines(state, circuit, i, width).slice(0, each))
  return lines.slice(0, height).map((spans) => fitted(spans, width, dots(state)))
}

/** little room: a row for each supply, then what supply it is where there is one only */
function compactLines(
  { present, inspection }: State,
  circuits: readonly CircuitFinding[],
  width: number,
): Line[] {
  const [only, more] = inspection.wiring.circuits
  const rows = circuits.map((circuit) => compactLine(circuit, width))
  return only && !more
    ? [...rows, line(supplyShort(supplyOf(present.sign.layout, only.supply)), 'dim')]
    : rows
}

/** everything that must stay in view in one row */
function compactLine(c: CircuitFinding, width: number): Line {
  const row = [span(`${c.supply} `, 'title'), ...stateSpans(c), span(`  ${currents(c)}`)]
  if (lineWidth(row) <= width || !c.lit || !c.solved) return row
  // the load as a share tells more than the kilovolts it is a share of
  return [
    span(`${c.supply} `, 'title'),
    span(percent(c.load ?? 0), voltageVerdict(c)),
    span(` ${currents(c)}`),
  ]
}

function stateSpans(c: CircuitFinding): Line {
  if (!c.solved) return [span('solving: nameplate only', 'watch')]
  if (!c.lit) return [span('NOT LIT ', 'fix'), span(c.dark.length > 0 ? `dark from ${c.dark[0]}` : '', 'fix')]
  return [
    span(
      `${kvFigure(c.neededVoltage ?? 0)} of ${kvFigure(c.noLoadVoltage)} kV rms ${percent(c.load ?? 0)}`,
      voltageVerdict(c),
    ),
  ]
}

const voltageVerdict = (c: CircuitFinding): Verdict =>
  c.loadings.find((l) => l.by === 'voltage')?.verdict ?? 'within'
const currents = (c: CircuitFinding): string =>
  c.lit ? `out ${c.terminals.map((t) => maFigure(magnitude(t.current))).join('/')} mA` : ''

function circuitLines(state: State, c: CircuitFinding, index: number, width: number): Line[] {
  const supply = supplyOf(state.present.sign.layout, state.inspection.wiring.circuits[index]!.supply)
  const name: Line = [
    span(`${c.supply} `, 'title'),
    span(
      `${supply.type === 'electronic' ? 'electronic' : 'core-and-coil'} ${ma(supply.shortCircuitCurrent)} ${hertz(supply.frequency)}`,
      'dim',
    ),
  ]
  if (!c.solved) return [name, line('lit solution: solving', 'watch')]
  if (!c.lit)
    return [
      name,
      line('NOT LIT', 'fix'),
      line(c.dark.length > 0 ? `dark first: ${c.dark.join(' ')}` : 'the whole string stays dark', 'fix'),
      ...(c.neededVoltage !== undefined
        ? [line(`needs ${kvFigure(c.neededVoltage)} of ${kvFigure(c.noLoadVoltage)} kV rms`, 'fix')]
        : []),
    ]
  const bars = c.loadings.map((l) => barLine(state, l, width))
  const measured = c.measured ? measuredBriefly(c.measured).map((l) => line(l, 'dim')) : []
  return [
    name,
    ...bars.slice(0, 1),
    line(`${currents(c)}  stray ${maFigure(c.stray ?? 0)}`),
    ...measured.slice(0, 1),
    ...bars.slice(1, 2),
    [span(`residual ${maFigure(c.residual ?? 0)}  `), ...dimmest(c)],
    ...measured.slice(1),
    ...bars.slice(2),
    line(`glass ${metres(c.tubeLength)}, ${c.electrodePairs} pairs, ${watts(c.power ?? 0)}`, 'dim'),
  ]
}

const dimmest = ({ dimmest: place }: CircuitFinding): Line =>
  place ? [span(`least ${maFigure(place.current)} ${place.tube}`)] : []

/** `kVrms ████████···|· 64% 5.1/8.0`: the limit stands at the mark, more than it runs over */
function barLine({ ascii, present }: State, l: Loading, width: number): Line {
  const figures = `${percent(l.share).replace(' ', '').padStart(5)} ${loadingFigures(l, present.sign.layout.units)}`
  const room = Math.max(6, width - 6 - figures.length - 1)
  const limit = Math.max(3, Math.round(room * 0.8))
  const full = Math.min(room, Math.round(l.share * limit))
  const cells = Array.from({ length: room }, (_, i) =>
    i === limit ? '|' : i < full ? (ascii ? '#' : '█') : ascii ? '.' : '·',
  )
  return [span(loadingBar(l.by).padEnd(6), 'dim'), span(cells.join(''), l.verdict), span(figures, l.verdict)]
}
