/** What is under the cursor: the selected pair, the probe from a mark, or one conductor alone. */
import { pointAt } from '../../geometry/polyline.js'
import type { Units } from '../../layout/layout.js'
import { nodeMix, rmsPotential } from '../../network/potentials.js'
import type { PairFinding, RuleFinding, Spot } from '../../rules/findings.js'
import { widestUnmet } from '../../rules/pair-rules.js'
import { bodyOf, partName } from '../../rules/passing.js'
import {
  gapFigure,
  kv,
  kvFigure,
  length,
  lengthFigure,
  ma,
  openText,
  openTubeGoverns,
  outcomeText,
  placeText,
  severityFigure,
  signedKv,
  verdictText,
} from '../../view/words.js'
import { findingInView, footUnderCursor, underCursor } from '../aim.js'
import { openTube } from '../conditions.js'
import { type InstantShown, instantAt, instantOf } from '../instant.js'
import { fitted, type Line, line, lineWidth, span } from '../lines.js'
import type { Foot, State } from '../state.js'
import { dots } from './words.js'
import { verdictMark } from './worst.js'

export function readoutLines(state: State, width: number, height: number): Line[] {
  const finding = findingInView(state)
  const lines = finding ? pairReadout(state, finding, width) : footReadout(state)
  return lines.slice(0, height).map((spans) => fitted(spans, width, dots(state)))
}

function pairReadout(state: State, pair: PairFinding, width: number): Line[] {
  const { layout } = state.present.sign
  const verdict = verdictText(pair.verdict, state.inspection.context.ruleSets)
  const shown = instantOf(state, [pair.a.body, pair.b.body])
  return [
    [
      span(
        `${verdictMark[pair.verdict]} ${placeText(pair.a, layout.units, 'long')} to ${placeText(pair.b, layout.units, 'long')}`,
        'title',
      ),
      span(`  gap ${gapFigure(pair.gap, widestUnmet(pair)?.needs, layout.units)} ${layout.units}`, 'title'),
      span(
        `  ${pair.verdict === 'within' ? '' : `${verdict.toUpperCase()}${pair.unsure ? '?' : ''} `}`,
        pair.verdict,
      ),
      span(`${severityFigure(pair.severity)} x its limit`, pair.verdict),
      // names of rule sets may be long: last, where a narrow screen cuts
      span(pair.verdict === 'within' ? `, ${verdict}${pair.unsure ? '?' : ''}` : '', 'within'),
    ],
    differenceLine(state, shown, pair, width),
    needLine(pair, layout.units),
    [
      span(`air ${kv(pair.air.peak)} peak, a discharge starts at ${kv(pair.air.startsAt)} peak: `),
      span(outcomeText[pair.air.outcome], pair.air.outcome === 'nothing' ? 'within' : 'fix'),
      ...openSpans(pair),
    ],
    [...spotSpans(state, shown, 'a', pair.a), span('  '), ...spotSpans(state, shown, 'b', pair.b)],
    // the rule that asks for most stands above already
    ...pair.rules
      .filter((r) => r !== widestUnmet(pair))
      .map((r): Line => line(ruleText(r, layout.units), 'dim')),
  ]
}

const ruleText = (r: RuleFinding, units: Units): string =>
  `${r.set}: ${r.clause}: ${r.ok ? 'met' : `needs ${length(r.needs, units)}`} – ${r.advice}`

/** What gap is needed and which rule says so; where another criterion sets the severity, that one too. */
function needLine(pair: PairFinding, units: Units): Line {
  const rule = widestUnmet(pair)
  if (!rule) {
    const as = pair.verdict === 'within' ? 'within' : pair.verdict
    const words = { within: 'gap is enough: ', watch: 'near its limit: ', fix: 'gap is not enough: ' }[
      pair.verdict
    ]
    return [span(words, as), span(pair.governs)]
  }
  const name = `${rule.set}: ${rule.clause}`
  return [
    span(`needs ${gapFigure(rule.needs, pair.gap, units)} ${units}: `, 'fix'),
    span(name),
    span(pair.governs === name ? '' : `; x by ${pair.governs}`),
    span(` – ${rule.advice}`, 'dim'),
  ]
}

/** what a tube open does in the air, where it is more than without */
function openSpans({ air: { open, outcome, startsAt }, judgedOn }: PairFinding): Line {
  if (!open || judgedOn === 'broken' || open.outcome === outcome) return []
  const share = `; with a tube open ${kvFigure(open.peak)} of ${kv(startsAt)}: `
  const words = outcomeText[open.outcome]
  return open.counted
    ? [span(share), span(words, 'fix')]
    : [span(share, 'dim'), span(`${words} unless the supply's protection trips`, 'dim')]
}

/** What the condition on the screen goes by comes first; what an open tube does is left out where it has no room. */
function differenceLine(state: State, shown: InstantShown, pair: PairFinding, width: number): Line {
  const d = pair.difference
  const at = (spot: Spot) => instantAt(shown, nodeMix(state.inspection.probe, spot.body, spot.at))
  const now = span(`now ${signedKv(at(pair.a) - at(pair.b))}  `)
  const nameplate = span(`nameplate ${kv(d.nameplate)} rms`, 'dim')
  const asLit = d.lit === undefined ? [] : [span(`lit ${kv(d.lit)} rms  `, 'dim')]
  const open = openText(pair)
  if (state.condition === 'broken') {
    const worst = span(`worst ${kv(d.broken)} rms${open === '' ? '' : `, ${open}`}  `, 'title')
    const here = [worst, span(`with ${openTube(state) ?? 'none'} open `, 'dim'), now]
    // what has no room is left out whole, never cut to half a figure
    const forms = [[...here, ...asLit, nameplate], [...here, nameplate], here]
    return forms.find((form) => lineWidth(form) <= width) ?? here
  }
  if (state.condition === 'nameplate')
    return [
      span(`${kv(d.nameplate)} rms nameplate`, 'title'),
      span(`, peak ${kv(d.nameplate * Math.SQRT2)}  `),
      now,
      ...asLit,
    ]
  const rms = d.lit === undefined ? [] : [span(`${kv(d.lit)} rms`, 'title')]
  const lit =
    d.lit === undefined
      ? [span(`NOT LIT BUT LIVE: ${kv(d.nameplate)} rms on paper  `, 'watch')]
      : [
          ...rms,
          span(
            ` (${kvFigure(d.litLow ?? d.lit)} to ${kvFigure(d.litHigh ?? d.lit)}, up to ${kvFigure(d.litPeak ?? d.lit * Math.SQRT2)} peak)  `,
          ),
        ]
  const always = d.lit === undefined ? [...lit, now] : [...lit, now, nameplate]
  if (open === '') return always
  const governs = openTubeGoverns(pair)
  const broken = span(`broken ${kv(d.broken)} rms, ${open}`, governs ? 'title' : 'dim')
  const all = [...always, span('  '), broken]
  if (!governs) return lineWidth(all) <= width ? all : always
  // what decides is never left out: other figures give way, one after the other
  const forms = [all, [...lit, now, broken], [...lit, broken], [...rms, span('  '), now, broken]]
  return forms.find((form) => lineWidth(form) <= width) ?? [broken, span('  '), ...rms]
}

/** potential of one of the two places, and the tube's current there */
function spotSpans(state: State, shown: InstantShown, name: string, spot: Spot): Line {
  const active = state.cursor.on === 'pair' && state.cursor.side === name
  return [
    span(`${active ? '>' : ' '}${name} ${spot.part} `, active ? 'cursor' : 'dim'),
    span(potentialText(state, shown, { body: spot.body, at: spot.at })),
  ]
}

function potentialText(state: State, shown: InstantShown, foot: Foot): string {
  const mix = nodeMix(state.inspection.probe, foot.body, foot.at)
  const now = instantAt(shown, mix)
  const current = currentAt(state, foot)
  return `${kv(rmsPotential(shown.fields, mix))} rms ${signedKv(now)} now${current === undefined ? '' : ` ${ma(current)}`}`
}

/** magnitude of the current of a lit tube at a path length, A */
function currentAt(state: State, { body, at }: Foot): number | undefined {
  if (body.kind !== 'fixed' || state.condition !== 'lit') return undefined
  for (const outcome of state.solved?.outcomes ?? []) {
    const column = outcome.lit ? outcome.columns.get(body.index) : undefined
    const tube = state.inspection.context.bodies[body.index]
    if (!column || !tube) continue
    const k = Math.min(
      column.re.length - 1,
      Math.max(0, Math.floor((at / tube.line.length) * column.re.length)),
    )
    return Math.hypot(column.re[k]!, column.im[k]!)
  }
  return undefined
}

const conditionText = (state: State): string =>
  state.condition === 'broken' ? `broken, ${openTube(state) ?? 'none'} open` : state.condition

function groundLine(state: State, foot: Foot): Line {
  const shown = instantOf(state, [foot.body])
  const mix = nodeMix(state.inspection.probe, foot.body, foot.at)
  const current = currentAt(state, foot)
  return [
    ...(shown.onPaper ? [span('NOT LIT BUT LIVE: ', 'watch')] : []),
    span(`${kv(rmsPotential(shown.fields, mix))} rms to ground, ${signedKv(instantAt(shown, mix))} now`),
    span(shown.onPaper ? ' (on paper)' : ` (${conditionText(state)})`, 'dim'),
    span(current === undefined ? '' : `; ${ma(current)} along the glass`),
  ]
}

/** The marked place, while the cursor is on nothing. */
const markedLines = (state: State, mark: Foot): Line[] => [
  line(
    `marked: ${partName(state.inspection.context, mark.body)} at ${length(mark.at, state.present.sign.layout.units)}`,
    'title',
  ),
  groundLine(state, mark),
]

/** One conductor under a free cursor, or what to do where there is none. */
function footReadout(state: State): Line[] {
  const foot = footUnderCursor(state)
  const { units } = state.present.sign.layout
  if (!foot) {
    if (state.cursor.on === 'pair' && state.filter !== '')
      return [line(`No pair names "${state.filter}". Esc shows all pairs again.`, 'watch')]
    if (state.cursor.on === 'pair')
      return [line('No pair to show: nothing passes within reach of anything else.', 'dim')]
    return [
      ...(state.mark ? markedLines(state, state.mark) : []),
      line(
        'Nothing here. Move the cursor onto glass, a lead or metal; Tab goes back to the worst list.',
        'dim',
      ),
    ]
  }
  const { context } = state.inspection
  const body = bodyOf(context, foot.body)
  if (!body) return []
  const [x, y, z] = pointAt(body.line, foot.at)
  const others = underCursor(state).slice(1)
  const kind = body.kind === 'bar' ? 'metal' : body.kind
  return [
    [
      span(
        `${kind} ${body.name} at ${length(foot.at, units)} of ${length(body.line.length, units)}`,
        'title',
      ),
      span(`  x ${lengthFigure(x, units)} y ${lengthFigure(y, units)} height ${length(z, units)}`, 'dim'),
    ],
    groundLine(state, foot),
    others.length > 0
      ? line(
          `also here: ${others.map((n) => partName(context, n.body)).join(', ')} (o picks the next)`,
          'dim',
        )
      : line('m marks this place: then move on to read gap and difference from here.', 'dim'),
  ]
}
