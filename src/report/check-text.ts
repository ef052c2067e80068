/** `check`: the findings as text, to read or to paste into a job file. At most 100 columns. */
import type { Inspection } from '../inspection.js'
import type { Layout, Supply } from '../layout/layout.js'
import { supplyOf } from '../layout/parts.js'
import { magnitude } from '../math/complex.js'
import { noLoadVoltage } from '../network/supplies.js'
import type { CircuitFinding, Condition, PairFinding, Verdict } from '../rules/findings.js'
import type { LeadSaving } from '../rules/lead-savings.js'
import { widestUnmet } from '../rules/pair-rules.js'
import { cautionText, generalCautions, standingWarning } from '../view/caution-text.js'
import { leadLines, residualLines } from '../view/lead-text.js'
import { loadingRow } from '../view/loading-text.js'
import { measuredText } from '../view/measured-text.js'
import {
  airText,
  gapFigure,
  groundingText,
  hertz,
  kv,
  kvFigure,
  length,
  ma,
  maFigure,
  metres,
  needOf,
  openTubeGoverns,
  placeText,
  severityFigure,
  touchText,
  verdictText,
  watts,
} from '../view/words.js'
import { wrap } from '../view/wrap.js'
import { pageColumns as columns, folded, table } from './table.js'

export interface CheckOptions {
  /** list every pair, not only those to fix or watch and the first few within */
  readonly all: boolean
  readonly condition: Condition
  /** what laying the output leads otherwise gives back, where it was computed */
  readonly savings?: readonly LeadSaving[]
}

/** pairs within the rules that are still listed, so that a clean sign shows its nearest */
const listedWithin = 5

export function checkText(
  file: string,
  layout: Layout,
  inspection: Inspection,
  options: CheckOptions,
): string {
  const rules = inspection.context.ruleSets.map(({ id }) => id).join(', ') || 'none'
  const lines = [
    `${layout.title || 'Untitled sign'} (${file})`,
    `Condition ${options.condition}. Rules: ${rules}. Air: ${airText[inspection.context.air]}.`,
    'kV and mA are rms unless marked peak. Clean, dry, new glass.',
    ...wrap(standingWarning(), columns),
    '',
    ...inspection.circuits.flatMap((circuit, i) => circuitLines(layout, inspection, circuit, i)),
    ...pairLines(layout, inspection, options),
    '',
    'LEADS',
    ...inspection.circuits.flatMap((c, i) =>
      [
        ...leadLines(
          layout,
          c,
          options.savings?.filter(({ circuit }) => circuit === i),
        ),
        ...residualLines(c),
      ].flatMap(bullet),
    ),
    '',
    ...floatingLines(inspection),
    'CAUTIONS',
    ...[
      ...inspection.cautions.map((c) => `${c.level}: ${cautionText(c, layout.units)}`),
      ...generalCautions,
    ].flatMap(bullet),
    ...(layout.assumed.length > 0
      ? [
          '',
          'ASSUMED, because the layout does not say',
          ...layout.assumed.flatMap((a) => bullet(`${a.about}: ${a.text}`)),
        ]
      : []),
  ]
  return `${lines.flatMap((line) => folded(line.trimEnd(), columns)).join('\n')}\n`
}

const bullet = (text: string): string[] =>
  wrap(text, columns - 4).map((line, i) => `${i === 0 ? '  - ' : '    '}${line}`)

function circuitLines(layout: Layout, inspection: Inspection, c: CircuitFinding, index: number): string[] {
  const circuit = inspection.wiring.circuits[index]!
  const supply = supplyOf(layout, circuit.supply)
  const string = circuit.string.map((e) => `${e.reversed ? '-' : ''}${e.tube}`).join(' ')
  return [
    `SUPPLY ${supply.id}  ${supplyText(supply)}`,
    ...wrap(`string  ${string}   (- = entered at end b)`, columns - 2).map((l) => `  ${l}`),
    ...stateLines(c),
    ...(c.measured ? wrap(measuredText(c.measured), columns - 2).map((l) => `  ${l}`) : []),
    ...c.loadings.map((l) => `  ${loadingRow(l, layout.units).padEnd(66)} ${mark(l.verdict)}`),
    '',
    ...table(
      [
        [
          'tube',
          'length',
          'kV a',
          'kV b',
          'drop kV',
          'mA a',
          'mA b',
          'least mA',
          'stray mA',
          'nameplate a/b',
        ],
        ...c.tubes.map((t) => [
          t.id,
          metres(t.length),
          t.a ? kvFigure(magnitude(t.a.voltage)) : '',
          t.b ? kvFigure(magnitude(t.b.voltage)) : '',
          t.drop === undefined ? '' : kvFigure(t.drop),
          t.a ? maFigure(magnitude(t.a.current)) : '',
          t.b ? maFigure(magnitude(t.b.current)) : '',
          t.least ? maFigure(t.least.current) : '',
          t.stray === undefined ? '' : maFigure(t.stray),
          `${kvFigure(t.nameplateA)} / ${kvFigure(t.nameplateB)}`,
        ]),
      ],
      columns,
    ),
    '',
    ...table(
      [
        ['lead', 'role', 'length', 'kV', 'stray mA', 'to ground', 'to parts', 'route'],
        ...c.leads.map((l) => [
          l.between.join('–'),
          l.role,
          length(l.length, layout.units),
          l.voltage === undefined ? '' : kvFigure(l.voltage),
          l.stray === undefined ? '' : maFigure(l.stray),
          l.toGround === undefined ? '' : maFigure(l.toGround),
          l.toNeighbours === undefined ? '' : maFigure(l.toNeighbours),
          l.assumed ? 'assumed' : 'drawn',
        ]),
      ],
      columns,
    ),
    '',
  ]
}

const supplyText = (s: Supply): string =>
  `${s.type}, ${kv(noLoadVoltage(s))} no-load, ${ma(s.shortCircuitCurrent)} short-circuit, ${hertz(s.frequency)}, ${groundingText[s.grounding]}`

function stateLines(c: CircuitFinding): string[] {
  if (!c.solved) return ['  lit solution not computed']
  if (!c.lit) return [`  NOT LIT  dark: ${c.dark.join(', ') || 'the whole string'}`]
  return [
    `  lit  ${c.terminals.map((t) => `${t.end} ${kv(magnitude(t.voltage))} ${ma(magnitude(t.current))}`).join('   ')}`,
    `  glass ${metres(c.tubeLength)}, ${c.electrodePairs} electrode pairs, ${watts(c.power ?? 0)} in the glass`,
    `  stray ${ma(c.stray ?? 0)}, residual to ground ${ma(c.residual ?? 0)}` +
      (c.dimmest ? `, dimmest ${c.dimmest.tube} with ${ma(c.dimmest.current)}` : ''),
  ]
}

const mark = (verdict: Verdict): string => (verdict === 'within' ? '' : verdict.toUpperCase())

function pairLines(layout: Layout, { pairs, context }: Inspection, options: CheckOptions): string[] {
  const count = (verdict: Verdict) => pairs.filter((p) => p.verdict === verdict).length
  const within = verdictText('within', context.ruleSets)
  const head = `PAIRS  ${count('fix')} to fix, ${count('watch')} to watch, ${count('within')} ${within}`
  if (pairs.length === 0) return [head]
  const urgent = count('fix') + count('watch')
  const shown = options.all ? pairs : pairs.slice(0, urgent + listedWithin)
  const left = pairs.length - shown.length
  const criteria = [...new Set(shown.map((p) => reasonOf(p)))]
  const opened = shown.some(openTubeGoverns)
  const titles = ['', '', 'from', 'to', `gap ${layout.units}`, 'kV', 'low–high', 'paper', 'needs', 'x', 'by']
  const rows = shown.map((p, i) => pairCells(layout, p, i, letter(criteria.indexOf(reasonOf(p)))))
  if (opened) {
    titles.splice(8, 0, 'broken')
    for (const [i, row] of rows.entries()) row.splice(8, 0, brokenCell(shown[i]!))
  }
  return [
    head,
    ...table([titles, ...rows], columns, [2, 3]),
    ...(left > 0 ? [`  and ${left} more ${within} (--all lists them)`] : []),
    ...criteria.map((criterion, i) => `  ${letter(i)} = ${criterion}`),
    '  kV: lit, with its band; paper: nameplate, shared out; x: difference over what the gap may have',
    ...(opened
      ? ['  broken: the worst with a tube open (one of each circuit, or half circuit, there), and which']
      : []),
  ]
}

/** The rule that asks for the widest gap where one is not met, else what governs. */
const reasonOf = (p: PairFinding): string => {
  const rule = widestUnmet(p)
  return rule ? `${rule.set}: ${rule.clause}` : p.governs
}

/** a, b … z, aa: what governs, in a column of its own */
const letter = (i: number): string =>
  (i < 26 ? '' : letter(Math.floor(i / 26) - 1)) + String.fromCharCode(97 + (i % 26))

function pairCells(layout: Layout, p: PairFinding, i: number, by: string): string[] {
  const d = p.difference
  const need = needOf(p)
  return [
    String(i + 1),
    `${p.verdict}${p.unsure ? '?' : ''}`,
    placeText(p.a, layout.units, 'short'),
    placeText(p.b, layout.units, 'short'),
    gapFigure(p.gap, need, layout.units),
    d.lit === undefined ? '' : kvFigure(d.lit),
    d.litLow === undefined || d.litHigh === undefined
      ? 'nameplate'
      : `${kvFigure(d.litLow)}–${kvFigure(d.litHigh)}`,
    kvFigure(d.nameplate),
    need === undefined ? '' : gapFigure(need, p.gap, layout.units),
    severityFigure(p.severity),
    by,
  ]
}

/** `8.0 K`: the worst over all breaks, and the tube that is open then */
const brokenCell = ({ difference: { broken, openTubes } }: PairFinding): string =>
  [kvFigure(broken), openTubes.join('+')].join(' ').trimEnd()

const floatingLines = ({ floating }: Inspection): string[] =>
  floating.length === 0
    ? []
    : [
        'UNGROUNDED METAL',
        ...floating.map(
          (f) => `  ${f.id}  floats to ${kv(f.voltage)}; ${touchText(f.touch)} through a person touching it`,
        ),
        '',
      ]
