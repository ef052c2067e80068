/** `rewire` for people: what the wiring of the file is like, and the proposals with the steps to get there. */
import type { Layout } from '../layout/layout.js'
import type { Proposal, Rewired } from '../rewire/rewire.js'
import { standingWarning } from '../view/caution-text.js'
import { rewireStepText } from '../view/rewire-text.js'
import { length, ma, percent, severityFigure } from '../view/words.js'
import { wrap } from '../view/wrap.js'

const width = 100

export function rewireText(file: string, layout: Layout, rewired: Rewired): string {
  const { before, proposals } = rewired
  const lines = [
    `${layout.title} (${file})`,
    ...wrap(standingWarning(), width),
    '',
    `The file's wiring: ${summary(layout, before)}`,
    ...circuitLines(before),
    '',
    ...wrap(howSought(rewired), width),
    ...proposals.flatMap((proposal, i) => ['', ...proposalLines(layout, before, proposal, i + 1)]),
  ]
  if (proposals.length === 0)
    lines.push('', 'No wiring lights this sign: of those that looked best none has a lit solution.')
  return `${lines.join('\n')}\n`
}

function howSought({ exact, method, judged, wirings, stopped }: Rewired): string {
  const of = `${judged} of ${wirings > 1e9 ? wirings.toExponential(1) : wirings} wirings judged`
  if (exact && method === 'enumeration')
    return `All wirings judged (${judged}): the list begins with the best there is.`
  if (exact)
    return `${of}, the others left out because no better one can be among them: the list begins with the best there is.`
  return `${of}${stopped ? ', then stopped' : ''}: the best that was found, not proven to be the best there is.`
}

function summary({ units }: Layout, { score, inspection: { circuits } }: Proposal): string {
  const dark = circuits.filter(({ lit }) => !lit).map(({ supply }) => supply)
  return [
    dark.length > 0 ? `${dark.join(', ')} not lit` : '',
    `${score.fix} ${score.fix === 1 ? 'pair' : 'pairs'} to fix`,
    score.unfit > 0 ? `${score.unfit} ${score.unfit === 1 ? 'circuit' : 'circuits'} to fix` : '',
    `worst ${severityFigure(score.severities[0] ?? 0)} × its limit`,
    `leads ${length(score.lead, units)}`,
  ]
    .filter((part) => part !== '')
    .join(', ')
}

const circuitLines = ({ wiring, inspection }: Proposal): string[] =>
  wiring.circuits.map(({ supply, string }, c) => {
    const found = inspection.circuits[c]
    const entries = string.map(({ tube, reversed }) => `${reversed ? '-' : ''}${tube}`).join(' ')
    const load = found?.load === undefined ? '' : `, load ${percent(found.load)}`
    const stray = found?.stray === undefined ? '' : `, stray ${ma(found.stray)}`
    return `  ${supply}: ${entries}${load}${stray}`
  })

function proposalLines(layout: Layout, before: Proposal, proposal: Proposal, number: number): string[] {
  if (proposal === before) return ["The file's wiring is the best of them: nothing to change."]
  const { changed } = proposal.score
  return [
    `PROPOSAL ${number}  ${summary(layout, proposal)}, ${changed} ${changed === 1 ? 'jumper' : 'jumpers'} changed`,
    ...circuitLines(proposal),
    ...worstLine(proposal),
    ...proposal.steps.map((step, i) => `  ${String(i + 1).padStart(2)}. ${rewireStepText(step)}`),
  ]
}

function worstLine({ inspection }: Proposal): string[] {
  const [pair] = inspection.pairs
  if (!pair) return []
  return [`  worst pair: ${pair.a.part} – ${pair.b.part}, ${pair.verdict}, by ${pair.governs}`]
}
