/** First row: the program, the sign, what has to be fixed, and which condition and instant is shown. */
import { openTube } from '../conditions.js'
import { type Line, span, spread } from '../lines.js'
import { type State, unsaved } from '../state.js'
import { activeVariant, dots } from './words.js'

export function titleLine(state: State, width: number): Line {
  const { inspection, opened, condition, instant, solving, present } = state
  const fix = inspection.pairs.filter((p) => p.verdict === 'fix').length
  const dark = inspection.circuits.some((c) => c.solved && !c.lit)
  const variant = activeVariant(state)
  const left: Line = [
    span(' tubewright ', 'title', 4),
    // before the names, which a narrow screen cuts
    ...(unsaved(state) ? [span(' (not saved)', 'watch')] : []),
    span(` ${present.sign.layout.title || opened.name}`, 'title'),
    ...(variant ? [span(` / ${variant}`, 'text')] : []),
  ]
  const right: Line = [
    span(' '),
    ...(dark ? [span('DARK ', 'fix')] : []),
    ...(inspection.solved ? [fix > 0 ? span(`${fix} TO FIX `, 'fix') : span('0 to fix ', 'within')] : []),
    span(`${condition.toUpperCase()} `, 'key'),
    ...(condition === 'broken' ? [span(`${openTube(state) ?? 'none'} open `, 'key')] : []),
    span(`now ${String(instant * 30).padStart(3)}${state.ascii ? ' deg' : '°'} `, 'text'),
    ...(solving ? [span('SOLVING ', 'watch')] : []),
  ]
  return spread(left, right, width, dots(state))
}
