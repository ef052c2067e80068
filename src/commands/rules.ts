/** `tubewright rules`: the rule sets with their clauses and sources, a check of a shop's own, and a template for one. */
import { rulesFrom } from '../files.js'
import { pageColumns as columns } from '../report/table.js'
import { shippedNames } from '../rules/resolve.js'
import { ruleTemplate } from '../rules/sets/template.js'
import { markText, ruleSetLines } from '../view/rule-text.js'
import { wrap } from '../view/wrap.js'
import { argumentsOf, complain, status, UsageFault } from './common.js'

const closing =
  'A limit that nobody could source is not shipped: enter it in a rule file of your own (--template). The local code and a licensed person decide.'

export function rulesCommand(args: readonly string[]): number {
  const { values, positionals } = argumentsOf({
    args: [...args],
    allowPositionals: true,
    options: { template: { type: 'boolean' } },
  })
  if (values.template) {
    if (positionals.length > 0) throw new UsageFault('--template goes to stdout and takes no names')
    process.stdout.write(ruleTemplate)
    return status.fine
  }
  const { sets, missing } = rulesFrom('.', positionals.length > 0 ? positionals : shippedNames)
  const marks = Object.entries(markText).map(([mark, words]) => `${mark} ${words}`)
  const lines = [
    ...sets.flatMap((set) => [...ruleSetLines(set, columns), '']),
    ...(sets.length > 0 ? [...wrap(`Marks: ${marks.join(', ')}.`, columns), ...wrap(closing, columns)] : []),
  ]
  if (lines.length > 0) process.stdout.write(`${lines.join('\n')}\n`)
  if (missing.length > 0) complain(missing.map(({ complaint }) => complaint).join('\n\n'))
  return missing.length > 0 ? status.somethingToFix : status.fine
}
