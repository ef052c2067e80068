/** First row: the program, the sign, what has to be fixed, and which condition and instant is shown. */
import { toFix } from '../../rules/to-fix.js'
import { openTube } from '../conditions.js'
import { type Line, span, spread } from '../lines.js'
import { type State, unsaved } from '../state.js'
import { activeVariant, dots } from './words.js'

export function titleLine(state: State, width: number): Line {
  const { inspection, opened, condition, instant, solving, present, view } = state
  const fix = toFix(inspection)
  // what could not be judged is not in order either
  const unread = inspection.cautions.some(({ code }) => code === 'rules-missing')
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
    ...(inspection.solved
      ? [fix > 0 ? span(`${fix} TO FIX `, 'fix') : span('0 to fix ', unread ? 'watch' : 'within')]
      : []),
    span(`${condition.toUpperCase()} `, 'key'),
    ...(condition === 'broken' ? [span(`${openTube(state) ?? 'none'} open `, 'key')] : []),
    span(`now ${String(instant * 30).padStart(3)}${state.ascii ? ' deg' : '°'} `, 'text'),
    // a mirrored or partial picture must never pass for the whole sign from the front
    ...(view.behind ? [span('BACK ', 'watch')] : []),
    ...(view.window ? [span('ZOOM ', 'watch')] : []),
    ...(solving ? [span('SOLVING ', 'watch')] : []),
  ]
  return spread(left, right, width, dots(state))
}
