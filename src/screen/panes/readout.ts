/** What is under the cursor: the selected pair, the probe from a mark, or one conductor alone. */
import { pointAt } from '../../geometry/polyline.js'
import { instantPotential, nodeMix, rmsPotential } from '../../network/potentials.js'
import type { PairFinding, Spot } from '../../rules/findings.js'
import {
  kv,
  kvFigure,
  length,
  lengthFigure,
  ma,
  needOf,
  openText,
  outcomeText,
  severityFigure,
  signedKv,
  verdictText,
} from '../../view/words.js'
import { bodyOf, findingInView, footUnderCursor, underCursor } from '../aim.js'
import { openTube } from '../conditions.js'
import { fieldsShown, phaseShown } from '../instant.js'
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
  const need = needOf(pair)
  const verdict = verdictText(pair.verdict, layout.rules)
  return [
    [
      span(
        `${verdictMark[pair.verdict]} ${placeText(state, pair.a)} to ${placeText(state, pair.b)}`,
        'title',
      ),
      span(`  gap ${length(pair.gap, layout.units)}`, 'title'),
      span(
        `  ${pair.verdict === 'within' ? '' : `${verdict.toUpperCase()}${pair.unsure ? '?' : ''} `}`,
        pair.verdict,
      ),
      span(`${severityFigure(pair.severity)} x its limit`, pair.verdict),
      // names of rule sets may be long: last, where a narrow screen cuts
      span(pair.verdict === 'within' ? `, ${verdict}${pair.unsure ? '?' : ''}` : '', 'within'),
    ],
    differenceLine(state, pair, width),
    [
      span(
        need === undefined ? 'gap is enough: ' : `needs ${length(need, layout.units)}: `,
        need === undefined ? 'within' : 'fix',
      ),
      span(`${pair.governs}`),
      span(ruleAdvice(pair), 'dim'),
    ],
    [
      span(`air ${kv(pair.air.peak)} peak, a discharge starts at ${kv(pair.air.startsAt)} peak: `),
      span(
        outcomeText[pair.air.outcome] ?? pair.air.outcome,
        pair.air.outcome === 'nothing' ? 'within' : 'fix',
      ),
      ...openSpans(pair),
    ],
    [...spotSpans(state, 'a', pair.a), span('  '), ...spotSpans(state, 'b', pair.b)],
    ...pair.rules.map(
      (r): Line =>
        line(
          `${r.set}: ${r.clause}: ${r.ok ? 'met' : `needs ${length(r.needs, layout.units)}`} – ${r.advice}`,
          'dim',
        ),
    ),
  ]
}

/** what a tube open does in the air, where it is more than without */
function openSpans({ air: { open, outcome, startsAt }, judgedOn }: PairFinding): Line {
  if (!open || judgedOn === 'broken' || open.outcome === outcome) return []
  const share = `; with a tube open ${kvFigure(open.peak)} of ${kv(startsAt)}: `
  const words = outcomeText[open.outcome] ?? open.outcome
  return open.counted
    ? [span(share), span(words, 'fix')]
    : [span(share, 'dim'), span(`${words} unless the supply's protection trips`, 'dim')]
}

const brokenRule = (pair: PairFinding) => pair.rules.find((r) => !r.ok)

function ruleAdvice(pair: PairFinding): string {
  const broken = brokenRule(pair)
  return broken ? ` – ${broken.advice}` : ''
}

/** What the condition on the screen goes by comes first; what an open tube does is left out where it has no room. */
function differenceLine(state: State, pair: PairFinding, width: number): Line {
  const d = pair.difference
  const now = span(`now ${signedKv(instantOf(state, pair.a) - instantOf(state, pair.b))}  `)
  const nameplate = span(
    `nameplate ${kv(d.nameplate)} rms`,
    state.condition === 'nameplate' ? 'title' : 'dim',
  )
  const open = openText(pair)
  if (state.condition === 'broken')
    return [
      span(`${kv(d.broken)} rms${open === '' ? '' : `, ${open}`}  `, 'title'),
      now,
      ...(d.lit === undefined ? [] : [span(`lit ${kv(d.lit)} rms  `, 'dim')]),
      nameplate,
    ]
  const lit =
    d.lit === undefined
      ? [span('not lit: judged on nameplate  ', 'watch')]
      : [
          span(`${kv(d.lit)} rms`, 'title'),
          span(
            ` (${kvFigure(d.litLow ?? d.lit)} to ${kvFigure(d.litHigh ?? d.lit)}), peak ${kv(d.litPeak ?? d.lit * Math.SQRT2)}  `,
          ),
        ]
  const always = [...lit, now, nameplate]
  const broken = span(`  broken ${kv(d.broken)} rms, ${open}`, 'dim')
  return open !== '' && lineWidth([...always, broken]) <= width ? [...always, broken] : always
}

function instantOf(state: State, spot: Spot): number {
  return instantPotential(
    fieldsShown(state),
    nodeMix(state.inspection.probe, spot.body, spot.at),
    phaseShown(state),
  )
}

const placeText = (state: State, spot: Spot): string => {
  const { units } = state.present.sign.layout
  if (spot.kind === 'face') return 'face'
  const kind = spot.kind === 'tube' ? '' : `${spot.kind} `
  return `${kind}${spot.part} at ${length(spot.at, units)}`
}

/** potential of one of the two places, and the tube's current there */
function spotSpans(state: State, name: string, spot: Spot): Line {
  const active = state.cursor.on === 'pair' && state.cursor.side === name
  return [
    span(`${active ? '>' : ' '}${name} ${spot.part} `, active ? 'cursor' : 'dim'),
    span(`${potentialText(state, { body: spot.body, at: spot.at })}`),
  ]
}

function potentialText(state: State, foot: Foot): string {
  const fields = fieldsShown(state)
  const mix = nodeMix(state.inspection.probe, foot.body, foot.at)
  const now = instantPotential(fields, mix, phaseShown(state))
  const current = currentAt(state, foot)
  return `${kv(rmsPotential(fields, mix))} rms, ${signedKv(now)} now${current === undefined ? '' : `, ${ma(current)}`}`
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

/** One conductor under a free cursor, or what to do where there is none. */
function footReadout(state: State): Line[] {
  const foot = footUnderCursor(state)
  const { units } = state.present.sign.layout
  if (!foot) {
    if (state.cursor.on === 'pair')
      return [line('No pair to show: nothing passes within reach of anything else.', 'dim')]
    return [
      line(
        'Nothing here. Move the cursor onto glass, a lead or metal; Tab goes back to the worst list.',
        'dim',
      ),
    ]
  }
  const body = bodyOf(state, foot.body)
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
    [span(potentialText(state, foot)), span(` to ground (${conditionText(state)})`, 'dim')],
    others.length > 0
      ? line(
          `also here: ${others.map((n) => bodyOf(state, n.body)?.name ?? '').join(', ')} (o picks the next)`,
          'dim',
        )
      : line('m marks this place: then move on to read gap and difference from here.', 'dim'),
  ]
}
