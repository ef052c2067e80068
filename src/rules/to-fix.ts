/** How much of a sign is to fix: the one count that title, edits and `check` tell. */
import type { CircuitFinding, PairFinding } from './findings.js'

/** Pairs and circuits with the verdict `fix`. */
export const toFix = ({ pairs, circuits }: ToFix): number =>
  [...pairs, ...circuits].filter(({ verdict }) => verdict === 'fix').length

interface ToFix {
  readonly pairs: readonly Pick<PairFinding, 'verdict'>[]
  readonly circuits: readonly Pick<CircuitFinding, 'verdict'>[]
}
