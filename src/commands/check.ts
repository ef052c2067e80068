/** `tubewright check`: the findings of one or more layouts, for people and for scripts. */
import { readLayoutFile, rulesBeside } from '../files.js'
import { type Inspection, inspection, prepare, solver } from '../inspection.js'
import type { Layout } from '../layout/layout.js'
import { printable } from '../layout/printable.js'
import { checkJson } from '../report/check-json.js'
import { type CheckedFile, checkSummary } from '../report/check-summary.js'
import { checkText } from '../report/check-text.js'
import { explained } from '../report/explained.js'
import { argumentsOf, complain, status, UsageFault } from './common.js'

interface Options {
  readonly json: boolean
  readonly all: boolean
  readonly condition: 'lit' | 'nameplate'
  readonly rules: readonly string[] | undefined
}

export function checkCommand(args: readonly string[]): number {
  const { values, positionals } = argumentsOf({
    args: [...args],
    allowPositionals: true,
    options: {
      json: { type: 'boolean' },
      all: { type: 'boolean' },
      condition: { type: 'string' },
      rules: { type: 'string' },
    },
  })
  if (positionals.length === 0) throw new UsageFault('check needs a layout file')
  const options: Options = {
    json: values.json ?? false,
    all: values.all ?? false,
    condition: conditionOf(values.condition),
    rules: values.rules
      ?.split(',')
      .map((name) => name.trim())
      .filter((name) => name !== ''),
  }
  const checked: CheckedFile[] = []
  for (const path of positionals) {
    // a blank line between the texts of two layouts; JSON is one object a line
    if (checked.length > 0 && !options.json) process.stdout.write('\n')
    checked.push(checkFile(path, options))
  }
  if (checked.length > 1 && !options.json) process.stdout.write(`\n${checkSummary(checked)}`)
  return Math.max(...checked.map(statusOf))
}

const statusOf = ({ inspection: found, toFix }: CheckedFile): number =>
  found === undefined ? status.unusable : toFix ? status.somethingToFix : status.fine

function conditionOf(text: string | undefined): 'lit' | 'nameplate' {
  if (text === undefined || text === 'lit') return 'lit'
  if (text === 'nameplate') return 'nameplate'
  throw new UsageFault(
    text === 'broken'
      ? 'the condition "broken" is not computed by this version; lit and nameplate are'
      : `there is no condition "${text}"; expected lit or nameplate`,
  )
}

function checkFile(path: string, options: Options): CheckedFile {
  const file = printable(path)
  const read = readLayoutFile(path)
  if (!read.ok) {
    complain(read.complaint)
    return { file, toFix: true }
  }
  const layout: Layout = options.rules ? { ...read.file.layout, rules: options.rules } : read.file.layout
  const rules = rulesBeside(path, layout.rules)
  for (const { complaint: why } of rules.missing) complain(why)
  const prepared = prepare(layout, rules)
  const found = inspection(prepared, layout.wiring, solver(prepared)(layout.wiring), options.condition)
  process.stdout.write(
    options.json
      ? `${JSON.stringify(checkJson(path, layout, found))}\n`
      : checkText(file, layout, found, { all: options.all, condition: options.condition }),
  )
  return { file, toFix: somethingToFix(found), inspection: found }
}

/** A pair, a dark or overloaded circuit, a rule set that is missing. */
export const somethingToFix = ({ pairs, circuits, cautions }: Inspection): boolean =>
  pairs.some((p) => p.verdict === 'fix') ||
  circuits.some((c) => c.verdict === 'fix') ||
  cautions.some((c) => c.code === 'rules-missing')
