/** The worst list: ranked, live, scrolling so that the selected pair stays in view. */
import type { PairFinding, Verdict } from '../../rules/findings.js'
import type { Meaning } from '../../view/theme.js'
import { kvFigure, lengthFigure, severityFigure, spotText } from '../../view/words.js'
import { fitted, inverse, type Line, line, span } from '../lines.js'
import { listedPairs, type State } from '../state.js'
import { dots } from './words.js'

/** a sign for the verdict that needs no colour */
export const verdictMark: Record<Verdict, string> = { fix: '!', watch: '~', within: ' ' }

export function worstLines(state: State, width: number, height: number): Line[] {
  const pairs = listedPairs(state)
  const { cursor, present } = state
  const units = present.sign.layout.units
  const selected =
    cursor.on === 'pair'
      ? Math.max(
          0,
          pairs.findIndex((p) => p.key === cursor.key),
        )
      : -1
  const head = headLine(state, pairs, width)
  if (height <= 1) return [head]
  if (pairs.length === 0)
    return [
      head,
      line(state.filter ? ' no pair names this text' : ' no two conductors pass within reach', 'dim'),
    ]
  const room = height - 1
  const first = scrollTo(selected, pairs.length, room)
  const rows = pairs.slice(first, first + room).map((pair, i) => {
    const chosen = first + i === selected
    const spans = rowSpans(pair, units, width, state.condition)
    return fitted(
      chosen ? spans.map((s) => ({ ...s, as: rowMeaning(pair), marks: inverse })) : spans,
      width,
      dots(state),
      chosen ? span('', rowMeaning(pair), inverse) : undefined,
    )
  })
  return [head, ...rows]
}

/** The first row shown. The list turns by pages: a row scrolled at each step would send it whole every time. */
function scrollTo(selected: number, count: number, room: number): number {
  if (selected < 0 || count <= room) return 0
  return Math.min(count - room, selected - (selected % room))
}

function headLine(state: State, pairs: readonly PairFinding[], width: number): Line {
  const count = (verdict: Verdict) => pairs.filter((p) => p.verdict === verdict).length
  const units = state.present.sign.layout.units
  const counts = `${count('fix')} fix ${count('watch')} watch`
  const as = count('fix') > 0 ? 'fix' : count('watch') > 0 ? 'watch' : 'within'
  const kv = { lit: 'kV rms', nameplate: 'kV n.p.', broken: 'kV brk' }[state.condition]
  const columns = isWide(width)
    ? `${units.padStart(6)} ${kv.padStart(7)} x limit`
    : `${units.padStart(4)} ${kv.replace(' ', '').slice(-5)}    x`
  const left: Line = [...(state.filter ? [span(`/${state.filter} `, 'key')] : []), span(counts, as)]
  return [...fitted(left, width - columns.length, dots(state)), span(columns, 'dim')]
}

/** room for the places along the parts beside their names */
const isWide = (width: number): boolean => width >= 45

const rowMeaning = ({ verdict }: PairFinding): Meaning => (verdict === 'within' ? 'text' : verdict)

/** of the condition on the screen; nameplate where that is lit and the circuit is not */
const shownDifference = ({ difference }: PairFinding, condition: State['condition']): number =>
  difference[condition] ?? difference.nameplate

function rowSpans(pair: PairFinding, units: 'mm' | 'in', width: number, condition: State['condition']): Line {
  const wide = isWide(width)
  const shown = shownDifference(pair, condition)
  const kv = kvFigure(shown) + (condition === 'lit' && pair.difference.lit === undefined ? 'n' : '')
  const figures = wide
    ? `${lengthFigure(pair.gap, units).padStart(6)} ${kv.padStart(7)} ${severityFigure(pair.severity).padStart(7)}`
    : `${lengthFigure(pair.gap, units).padStart(4)} ${kv.padStart(5)} ${severityFigure(pair.severity).padStart(4)}`
  // a narrow list names the parts only: the places stand in the readout
  const names = wide
    ? `${spotText(pair.a, units)} – ${spotText(pair.b, units)}`
    : pair.a.part === pair.b.part
      ? `${pair.a.part} itself`
      : `${pair.a.part} ${pair.b.part}`
  return [
    span(`${verdictMark[pair.verdict]}${pair.unsure ? '?' : ' '}`, pair.verdict),
    ...fitted([span(names)], width - figures.length - 3, '~'),
    span(` ${figures}`, rowMeaning(pair)),
  ]
}
