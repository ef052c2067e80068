/** Legend, message, key footer and the two pinned banner rows. */

import { cautionText, standingWarning } from '../../view/caution-text.js'
import { potentialScale, scaleEntries } from '../../view/scale.js'
import { type Meaning, stepMeaning } from '../../view/theme.js'
import { peakPotential } from '../instant.js'
import { keyTable, keyText } from '../keys.js'
import { fitted, type Line, line, lineWidth, span } from '../lines.js'
import type { State } from '../state.js'
import { asciiOnly, dots } from './words.js'

/** glyph, colour and bounds of the seven steps; shorter forms on narrow screens */
export function legendLine(state: State, width: number): Line {
  const entries = scaleEntries(potentialScale(peakPotential(state)), state.ascii ? '..' : '…')
  const forms = [
    (e: (typeof entries)[number]) => `${e.glyph} ${e.text}  `,
    (e: (typeof entries)[number]) => `${e.glyph} ${e.text.replace('about 0', '0')} `,
    (e: (typeof entries)[number]) =>
      `${e.glyph} ${(e.low + e.high) / 2 === 0 ? '0' : e.text.split(/…|\.\./)[e.low < 0 ? 0 : 1]} `,
  ]
  const head = span(' kV now: ', 'dim')
  const form = forms.find((f) => 9 + entries.reduce((sum, e) => sum + f(e).length, 0) <= width) ?? forms[2]!
  return fitted([head, ...entries.map((e) => span(form(e), stepMeaning(e.step)))], width, dots(state))
}

export function messageLine({ message, dialog, ...state }: State, width: number): Line {
  if (dialog?.kind === 'quit')
    return fitted(
      [span(' Not saved. ', 'watch'), span('s save and quit   d discard and quit   Esc stay')],
      width,
      dots(state),
    )
  if (dialog?.kind === 'overwrite')
    return fitted(
      [span(' The file changed on disk since it was read. ', 'fix'), span('o overwrite it   Esc keep both')],
      width,
      dots(state),
    )
  if (!message) return line('')
  const as: Record<NonNullable<State['message']>['level'], Meaning> = {
    good: 'within',
    plain: 'text',
    bad: 'watch',
  }
  return fitted(
    [span(` ${state.ascii ? asciiOnly(message.text) : message.text}`, as[message.level])],
    width,
    dots(state),
  )
}

const dialogHints: Partial<Record<NonNullable<State['dialog']>['kind'], string>> = {
  prompt: ' Enter takes it   Esc leaves it',
  pick: ' Up/Down choose   Enter takes   Esc leaves',
  help: ' Up/Down/PgUp/PgDn scroll   others close',
  cautions: ' Up/Down/PgUp/PgDn scroll   others close',
  why: ' Up/Down/PgUp/PgDn scroll   others close',
  symptom: ' Up/Down/PgUp/PgDn scroll   others close',
}

/** As many keys as fit, the most needed first; those of an open dialog where one is open. */
export function footerLine(state: State, width: number): Line {
  const hint = state.dialog && dialogHints[state.dialog.kind]
  if (hint !== undefined) return fitted(line(hint, 'dim'), width, dots(state))
  const wanted = keyTable
    .flatMap(({ keys, footer }) => (footer ? [{ key: keyText(keys[0]!), ...footer }] : []))
    .sort((a, b) => a.rank - b.rank)
  const kept: typeof wanted = []
  let left = width - 1
  for (const entry of wanted) {
    const w = entry.key.length + entry.label.length + 3
    if (w > left) continue
    kept.push(entry)
    left -= w
  }
  const order = (rank: number) => (rank < 1 ? 100 + rank : rank)
  kept.sort((a, b) => order(a.rank) - order(b.rank))
  return [span(' '), ...kept.flatMap(({ key, label }) => [span(key, 'key'), span(` ${label}  `, 'dim')])]
}

/** Exactly two rows: the standing line, and the most pressing caution with the number of the others. */
export function bannerLines(state: State, width: number): [Line, Line] {
  const danger = span('', 'banner-danger')
  const first = fitted([span(` ${standingWarning(width - 2)}`, 'banner-danger')], width, dots(state), danger)
  const [worst, ...others] = state.inspection.cautions
  if (!worst)
    return [
      first,
      fitted([span(' No further caution. w lists the general ones.', 'banner-note')], width, dots(state)),
    ]
  const as = `banner-${worst.level}` as const
  const more = others.length > 0 ? span(` +${others.length} (w)`, as) : span('', as)
  const room = width - lineWidth([more])
  const said = cautionText(worst, state.present.sign.layout.units)
  const words = state.ascii ? asciiOnly(said) : said
  return [first, [...fitted([span(` ${worst.level.toUpperCase()}: ${words}`, as)], room, dots(state)), more]]
}
