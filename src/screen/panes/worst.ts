/** The worst list: ranked, live, scrolling so that the selected pair stays in view. */
import type { PairFinding, Verdict } from '../../rules/findings.js'
import { widestUnmet } from '../../rules/pair-rules.js'
import type { Meaning } from '../../view/theme.js'
import { gapFigure, kvFigure, placeText, severityFigure } from '../../view/words.js'
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
  const rows = shownRows(selected, pairs.length, height - 1).map((index) => {
    const pair = pairs[index]!
    const chosen = index === selected
    const spans = rowSpans(pair, units, width, state.condition, dots(state))
    return fitted(
      chosen ? spans.map((s) => ({ ...s, as: rowMeaning(pair), marks: inverse })) : spans,
      width,
      dots(state),
      chosen ? span('', rowMeaning(pair), inverse) : undefined,
    )
  })
  return [head, ...rows]
}

/** the worst stay in view wherever the list is turned to */
const alwaysShown = 3

/** Places in the list of the rows shown: the worst ones, then the page that holds the selected pair. */
function shownRows(selected: number, count: number, room: number): number[] {
  const top = Math.min(alwaysShown, Math.floor(room / 2))
  const rest = room - top
  // turned by pages: a row scrolled at each step would send the whole list every time
  const page = selected < room ? top : top + (selected - top) - ((selected - top) % rest)
  const from = Math.max(top, Math.min(count - rest, page))
  const places = [
    ...Array.from({ length: top }, (_, i) => i),
    ...Array.from({ length: rest }, (_, i) => from + i),
  ]
  return places.filter((place) => place < count)
}

function headLine(state: State, pairs: readonly PairFinding[], width: number): Line {
  const count = (verdict: Verdict) => pairs.filter((p) => p.verdict === verdict).length
  const units = state.present.sign.layout.units
  const counts = `${count('fix')} fix ${count('watch')} watch`
  const as = count('fix') > 0 ? 'fix' : count('watch') > 0 ? 'watch' : 'within'
  const kv = { lit: 'kV rms', nameplate: 'kV n.p.', broken: 'kV brk' }[state.condition]
  const columns = isWide(width)
    ? `${units.padStart(6)} ${kv.padStart(7)} x limit`
    : `${units.padStart(4)} ${{ lit: 'kVrms', nameplate: 'kV np', broken: 'kVbrk' }[state.condition]}    x`
  const left: Line = [...(state.filter ? [span(`/${state.filter} `, 'key')] : []), span(counts, as)]
  return [...fitted(left, width - columns.length, dots(state)), span(columns, 'dim')]
}

/** room for the places along the parts beside their names */
const isWide = (width: number): boolean => width >= 45

const rowMeaning = ({ verdict }: PairFinding): Meaning => (verdict === 'within' ? 'text' : verdict)

/** of the condition on the screen; nameplate where that is lit and the circuit is not */
const shownDifference = ({ difference }: PairFinding, condition: State['condition']): number =>
  difference[condition] ?? difference.nameplate

function rowSpans(
  pair: PairFinding,
  units: 'mm' | 'in',
  width: number,
  condition: State['condition'],
  mark: string,
): Line {
  const wide = isWide(width)
  const shown = shownDifference(pair, condition)
  const kv = kvFigure(shown) + (condition === 'lit' && pair.difference.lit === undefined ? 'n' : '')
  const figures = wide
    ? `${gapFigure(pair.gap, widestUnmet(pair)?.needs, units).padStart(6)} ${kv.padStart(7)} ${severityFigure(pair.severity).padStart(7)}`
    : `${gapFigure(pair.gap, widestUnmet(pair)?.needs, units).padStart(4)} ${kv.padStart(5)} ${severityFigure(pair.severity).padStart(4)}`
  // a narrow list names the parts only: the places stand in the readout
  const names = wide
    ? `${placeText(pair.a, units, 'short')} – ${placeText(pair.b, units, 'short')}`
    : pair.a.part === pair.b.part
      ? `${pair.a.part} itself`
      : `${pair.a.part} ${pair.b.part}`
  return [
    span(`${verdictMark[pair.verdict]}${pair.unsure ? '?' : ' '}`, pair.verdict),
    ...fitted([span(names)], width - figures.length - 3, mark),
    span(` ${figures}`, rowMeaning(pair)),
  ]
}
