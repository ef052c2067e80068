/** What an edit did to the worst pair and to the load, in one line. */
import type { Inspection } from '../inspection.js'
import { toFix } from '../rules/to-fix.js'
import { kvFigure, percent, severityFigure } from '../view/words.js'
import type { Message } from './state.js'

export function editChange(said: string, before: Inspection, after: Inspection): Message {
  const [was, is] = [before.pairs[0], after.pairs[0]]
  const difference = (p: typeof was) =>
    p ? kvFigure(p.difference[p.judgedOn] ?? p.difference.nameplate) : '–'
  const parts: string[] = []
  if (was && is)
    parts.push(
      `worst ${difference(was)} → ${difference(is)} kV rms (${severityFigure(was.severity)} → ${severityFigure(is.severity)} x limit)`,
    )
  parts.push(`to fix ${toFix(before)} → ${toFix(after)}`)
  parts.push(...after.circuits.map((c, i) => loadChange(before.circuits[i], c)))
  // the figures come first: the words are what a narrow screen may cut
  return { text: [...parts, said].join(' · '), level: level(before, after) }
}

function loadChange(
  was: Inspection['circuits'][number] | undefined,
  is: Inspection['circuits'][number],
): string {
  const load = (c: typeof was) => (!c ? '–' : !c.lit ? 'dark' : c.load === undefined ? '–' : percent(c.load))
  return `${is.supply} ${load(was)} → ${load(is)}`
}

function level(before: Inspection, after: Inspection): Message['level'] {
  const worse = (one: Inspection, other: Inspection) =>
    toFix(one) - toFix(other) || (one.pairs[0]?.severity ?? 0) - (other.pairs[0]?.severity ?? 0)
  const difference = worse(after, before)
  return difference < -1e-9 ? 'good' : difference > 1e-9 ? 'bad' : 'plain'
}
