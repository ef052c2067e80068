/** Text of a rule file → RuleSet, or everything that is wrong with the text. Shipped sets and a shop's go the same way. */
import { type KeyPath, readDocument } from '../layout/document.js'
import { foundIn } from '../layout/problems.js'
import { isKeyed } from '../layout/reading.js'
import { type Naming, reportIssue } from '../layout/shape.js'
import { builtRuleSet } from './build-rules.js'
import { checkRuleFile, type RuleReading } from './rule-checks.js'
import { type RuleFacts, type RuleProblem, ruleProblemText } from './rule-problems.js'
import { knownRuleKeys, ruleFileShape } from './rule-schema.js'
import type { RuleSet } from './rule-set.js'

export interface ParsedRules {
  /** absent when there are problems */
  readonly set?: RuleSet
  /** in file order */
  readonly problems: readonly RuleProblem[]
  /** each problem as `file:line:column: …` with its source line and a caret */
  readonly texts: readonly string[]
}

const naming: Naming = {
  known: (path: KeyPath) => {
    const last = path.findLast((key) => typeof key === 'string')
    return knownRuleKeys[last === undefined ? '' : String(last)] ?? []
  },
  holders: { rules: 'this rule', limit: 'the limit', by: 'by', when: 'when' },
}

/** The rule set in `text`. Never throws: what is wrong comes back as problems, all of them at once. */
export function parseRuleSet(text: string, file: string): ParsedRules {
  const problems: RuleProblem[] = []
  let set: RuleSet | undefined
  try {
    set = parsed(text, problems)
  } catch (fault) {
    const detail = fault instanceof Error ? fault.message : String(fault)
    problems.push({ code: 'internal', detail, place: { offset: 0, line: 1, column: 1 } })
  }
  problems.sort((a, b) => a.place.offset - b.place.offset)
  const texts = [...new Set(problems.map((problem) => ruleProblemText(problem, file, text)))]
  return set && problems.length === 0 ? { set, problems, texts } : { problems, texts }
}

function parsed(text: string, problems: RuleProblem[]): RuleSet | undefined {
  const { value, places, problems: faults } = readDocument(text)
  problems.push(...faults)
  if (value === undefined) return undefined
  const report = (offset: number, facts: RuleFacts) => {
    problems.push({ ...facts, place: places.place(offset) })
  }
  if (!isKeyed(value)) {
    report(places.value([]), {
      code: 'wrong-form',
      what: 'the file',
      form: 'rule-set',
      found: foundIn(value),
    })
    return undefined
  }
  const reading: RuleReading = { value, places, report }
  const shaped = ruleFileShape.safeParse(value)
  for (const issue of shaped.error?.issues ?? []) reportIssue(reading, issue, [], naming)
  checkRuleFile(reading)
  return shaped.success ? builtRuleSet(shaped.data) : undefined
}
