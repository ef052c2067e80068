/** `tubewright check`: the findings of one or more layouts, for people and for scripts. */
import { readLayoutFile, rulesBeside } from '../files.js'
import type { StartMode } from '../gaps/air.js'
import { type Inspection, inspection, prepare, solver } from '../inspection.js'
import type { Layout } from '../layout/layout.js'
import { printable } from '../layout/printable.js'
import { checkJson } from '../report/check-json.js'
import { type CheckedFile, checkSummary } from '../report/check-summary.js'
import { checkText } from '../report/check-text.js'
import { explainedText } from '../report/explained.js'
import type { Condition } from '../rules/findings.js'
import { type LeadSaving, leadSavings } from '../rules/lead-savings.js'
import { toFix } from '../rules/to-fix.js'
import type { Explanation } from '../view/explanation.js'
import { aboutLeads, type Symptom, symptomNamed, symptomSheet, symptoms } from '../view/symptoms.js'
import { why } from '../view/why.js'
import { airOf, argumentsOf, complain, oneOf, status, UsageFault } from './common.js'

interface Options {
  readonly json: boolean
  readonly all: boolean
  readonly condition: Condition
  readonly air: StartMode
  readonly rules: readonly string[] | undefined
  /** number of the pair to explain, as in the list */
  readonly why: number | undefined
  readonly symptom: Symptom | undefined
}

export function checkCommand(args: readonly string[]): number {
  const { values, positionals } = argumentsOf({
    args: [...args],
    allowPositionals: true,
    options: {
      json: { type: 'boolean' },
      all: { type: 'boolean' },
      condition: { type: 'string' },
      air: { type: 'string' },
      rules: { type: 'string' },
      why: { type: 'string' },
      symptom: { type: 'string' },
    },
  })
  if (values.symptom === 'list') return listSymptoms()
  if (positionals.length === 0) throw new UsageFault('check needs a layout file')
  const options: Options = {
    json: values.json ?? false,
    all: values.all ?? false,
    condition: oneOf('--condition', values.condition ?? 'lit', ['lit', 'nameplate', 'broken'] as const),
    air: airOf(values.air),
    rules: values.rules
      ?.split(',')
      .map((name) => name.trim())
      .filter((name) => name !== ''),
    why: values.why === undefined ? undefined : pairNumber(values.why),
    symptom: values.symptom === undefined ? undefined : symptomAsked(values.symptom),
  }
  oneQuestion(options, positionals.length)
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
  const prepared = prepare(layout, rules, options.air)
  const solve = solver(prepared)
  const solved = solve(layout.wiring)
  const found = inspection(prepared, layout.wiring, solved, options.condition)
  const savings = () => leadSavings({ layout, ...found }, solved, (laid) => solve(layout.wiring, laid))
  process.stdout.write(answer(path, layout, found, options, savings))
  return { file, toFix: somethingToFix(found), inspection: found }
}

function answer(
  path: string,
  layout: Layout,
  found: Inspection,
  options: Options,
  savings: () => readonly LeadSaving[],
): string {
  const file = printable(path)
  if (options.json) return `${JSON.stringify(checkJson(path, layout, found))}\n`
  const explanation = explanationOf(file, layout, found, options, savings)
  return explanation
    ? explainedText(file, layout, explanation)
    : checkText(file, layout, found, {
        all: options.all,
        condition: options.condition,
        savings: savings(),
      })
}

/** What `--why` or `--symptom` asks for. */
function explanationOf(
  file: string,
  layout: Layout,
  found: Inspection,
  { why: number, symptom }: Options,
  savings: () => readonly LeadSaving[],
): Explanation | undefined {
  const sign = { layout, inspection: found }
  if (symptom) return symptomSheet(sign, symptom, aboutLeads(symptom) ? savings() : undefined)
  if (number === undefined) return undefined
  const pair = found.pairs[number - 1]
  if (pair) return why(sign, pair)
  throw new UsageFault(
    found.pairs.length === 0
      ? `--why ${number}: ${file} has no pairs`
      : `--why ${number}: the pairs of ${file} are numbered 1 to ${found.pairs.length}`,
  )
}

function pairNumber(text: string): number {
  const number = /^\d{1,9}$/.test(text) ? Number(text) : 0
  if (number < 1) throw new UsageFault(`--why "${text}" is not a number of the list of pairs, from 1 on`)
  return number
}

function symptomAsked(text: string): Symptom {
  const symptom = symptomNamed(text)
  if (symptom) return symptom
  throw new UsageFault(
    `there is no symptom "${text}"; expected ${symptoms.map((one) => one.symptom).join(', ')} or list`,
  )
}

/** `--why` and `--symptom` answer one question about one layout, in words. */
function oneQuestion({ why: number, symptom, json, all }: Options, files: number): void {
  if (number === undefined && symptom === undefined) return
  const option = number === undefined ? '--symptom' : '--why'
  const other = json ? '--json' : all ? '--all' : number !== undefined && symptom ? '--symptom' : undefined
  if (other) throw new UsageFault(`${option} does not go with ${other}`)
  if (files > 1) throw new UsageFault(`${option} takes one layout; ${files} were named`)
}

function listSymptoms(): number {
  process.stdout.write(symptoms.map(({ symptom, name }) => `${symptom.padEnd(14)}${name}\n`).join(''))
  return status.fine
}

/** A pair, a dark or overloaded circuit, a rule set that is missing. */
const somethingToFix = (found: Inspection): boolean =>
  toFix(found) > 0 || found.cautions.some((c) => c.code === 'rules-missing')
