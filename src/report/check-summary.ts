/** One line for each of several layouts that were checked. */
import type { Inspection } from '../inspection.js'
import { percent } from '../view/words.js'
import { pageColumns, table } from './table.js'

/** A file by the name it was given, and what was found; no inspection where it could not be used. */
export interface CheckedFile {
  readonly file: string
  readonly toFix: boolean
  readonly inspection?: Inspection
}

/** At most 100 columns; the file's name loses its middle where it is too long. */
export function checkSummary(files: readonly CheckedFile[]): string {
  const [first = [], ...rest] = files.map(({ file, toFix, inspection }) =>
    inspection
      ? [verdictOf(toFix, inspection), file, pairsText(inspection), suppliesText(inspection)]
      : ['unusable', file, '', ''],
  )
  return `SUMMARY\n${table([first, ...rest], pageColumns, [1, 3]).join('\n')}\n`
}

function verdictOf(toFix: boolean, { pairs, circuits }: Inspection): string {
  if (toFix) return 'fix'
  return [...pairs, ...circuits].some(({ verdict }) => verdict === 'watch') ? 'watch' : 'within'
}

function pairsText({ pairs }: Inspection): string {
  const count = (verdict: string) => pairs.filter((p) => p.verdict === verdict).length
  return `${count('fix')} ${count('fix') === 1 ? 'pair' : 'pairs'} to fix, ${count('watch')} to watch`
}

const suppliesText = ({ circuits }: Inspection): string =>
  circuits
    .map((c) => `${c.supply} ${c.lit ? `load ${percent(c.load ?? 0)}` : c.solved ? 'not lit' : 'not solved'}`)
    .join(', ')
