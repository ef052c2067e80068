/** `rewire --json`: the proposals in the fixed form of interface.md §4, with more keys. mm, mA. Absent is absent. */
import type { CircuitWiring, Layout } from '../layout/layout.js'
import type { Proposal, Rewired } from '../rewire/rewire.js'
import type { CircuitFinding } from '../rules/findings.js'
import { rewireStepText } from '../view/rewire-text.js'

const rounded = (value: number, decimals: number): number => Number(value.toFixed(decimals))

/** `method` says how sure the list is; `wirings` how many there are. `before` is the file's wiring. */
export const rewireJson = (file: string, layout: Layout, rewired: Rewired): object => ({
  result: 1,
  file,
  title: layout.title,
  exact: rewired.exact,
  method: rewired.method,
  judged: rewired.judged,
  wirings: rewired.wirings,
  ...(rewired.stopped && { stopped: true }),
  before: proposalJson(rewired.before),
  proposals: rewired.proposals.map((proposal) => ({
    ...proposalJson(proposal),
    steps: proposal.steps.map(rewireStepText),
  })),
})

const proposalJson = ({ wiring, score, inspection }: Proposal): object => ({
  circuits: wiring.circuits.map((circuit, c) => circuitJson(circuit, inspection.circuits[c])),
  fix: score.fix,
  ...(score.unfit > 0 && { circuits_to_fix: score.unfit }),
  worst_severity: rounded(score.severities[0] ?? 0, 3),
  changed_jumpers: score.changed,
  lead_mm: rounded(score.lead * 1000, 0),
})

const circuitJson = ({ supply, string }: CircuitWiring, found: CircuitFinding | undefined): object => ({
  supply,
  string: string.map(({ tube, reversed }) => `${reversed ? '-' : ''}${tube}`),
  ...(found && { lit: found.lit }),
  ...(found?.load !== undefined && { load: rounded(found.load, 4) }),
  ...(found?.stray !== undefined && { stray_ma: rounded(found.stray * 1000, 3) }),
})
