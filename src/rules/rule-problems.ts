/** What is wrong with a rule file: the facts that any file can have, those of rule files, and their English. */
import { placedText, problemSentence } from '../layout/problem-text.js'
import type { Facts, Place } from '../layout/problems.js'

export type RuleFacts =
  | Facts
  /** more than one of the things that a rule can ask for */
  | { readonly code: 'several-limits'; readonly given: readonly string[] }
  /** a key that makes sense only beside another one */
  | { readonly code: 'key-needs'; readonly key: string; readonly needs: readonly string[] }
  /** rows must rise in the first number, and must not fall in the second (not rise, for limits) */
  | {
      readonly code: 'rows-order'
      readonly what: string
      readonly row: number
      readonly column: 'first' | 'second'
      readonly value: number
      readonly before: number
      readonly expected: 'more' | 'no less' | 'no more'
    }
  | { readonly code: 'empty-range'; readonly what: string }
  | { readonly code: 'range-order'; readonly what: string; readonly above: number; readonly upTo: number }
  | { readonly code: 'limit-value' }
  | { readonly code: 'set-id'; readonly id: string }

export type RuleProblem = RuleFacts & { readonly place: Place }

/** A problem in one sentence: what is wrong, what was expected. */
function ruleProblemSentence(problem: RuleFacts): string {
  switch (problem.code) {
    case 'several-limits':
      return `the rule has ${problem.given.join(' and ')}, expected one of them`
    case 'key-needs':
      return `${problem.key} makes sense only with ${problem.needs.join(' or ')}, expected both or neither`
    case 'rows-order':
      return (
        `the ${problem.column} number of row ${problem.row} of ${problem.what} is ${problem.value}, ` +
        `expected ${problem.expected} than ${problem.before}, the row before`
      )
    case 'empty-range':
      return `${problem.what} is an empty range, expected above, up_to or both`
    case 'range-order':
      return `${problem.what} is above ${problem.above} and up to ${problem.upTo}, expected a range that rises`
    case 'limit-value':
      return 'the limit has no figure or two, expected one of at_most and by_terminal_kv'
    case 'set-id':
      return `the id "${problem.id}" cannot be used, expected lower-case letters, digits and dashes, as our-shop`
    case 'not-a-choice':
      return problem.what === 'rule_set'
        ? `rule_set is ${problem.found.text || 'no number'}, expected 1, the only format this version reads`
        : problemSentence(problem)
    // said of a layout otherwise
    case 'too-deep':
      return `more than ${problem.limit} levels inside each other, expected a rule set`
    case 'several-documents':
      return 'another document begins here, expected one rule set in a file'
    case 'empty-file':
      return 'the file is empty, expected a rule set that begins with rule_set: 1'
    case 'internal':
      return `the file could not be read (${problem.detail}), expected a rule set`
    default:
      return problemSentence(problem)
  }
}

/** `file:line:column: what is wrong, what was expected`, the source line, and a caret. */
export const ruleProblemText = (problem: RuleProblem, file: string, source: string): string =>
  placedText(ruleProblemSentence(problem), problem.place, file, source)
