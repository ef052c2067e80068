/** Names in a layout's `rules` or on the command line → rule sets, shipped or from files beside the layout. */
import { nearest } from '../layout/nearest.js'
import { printable } from '../layout/printable.js'
import { parseRuleSet } from './parse-rules.js'
import type { MissingRules, RuleSet } from './rule-set.js'
import { caTitle8Text } from './sets/ca-title8-2973.js'
import { commonPracticeText } from './sets/common-practice.js'
import { en50107Text } from './sets/en-50107-1.js'
import { gb50303Text } from './sets/gb-50303.js'
import { iec60664Text } from './sets/iec-60664-1.js'
import { japan186Text } from './sets/japan-186.js'
import { nec600Text } from './sets/nec-600.js'

const shippedTexts: ReadonlyMap<string, string> = new Map([
  ['common-practice', commonPracticeText],
  ['nec-600', nec600Text],
  ['ca-title8-2973', caTitle8Text],
  ['iec-60664-1', iec60664Text],
  ['en-50107-1', en50107Text],
  ['japan-186', japan186Text],
  ['gb-50303', gb50303Text],
])
export const shippedNames: readonly string[] = [...shippedTexts.keys()]

/** read when first asked for: a launch pays only for the sets that its layout names */
const read = new Map<string, RuleSet>()

/** A shipped set by its name. */
export function shippedSet(name: string): RuleSet | undefined {
  const known = read.get(name)
  const text = shippedTexts.get(name)
  if (known || text === undefined) return known
  const { set, texts } = parseRuleSet(text, name)
  if (!set) throw new Error(`the shipped rule set cannot be read:\n${texts.join('\n')}`)
  read.set(name, set)
  return set
}

export interface ResolvedRules {
  /** in the order asked for */
  readonly sets: readonly RuleSet[]
  readonly missing: readonly MissingRules[]
}

/** For work that judges nothing. */
export const noRules: ResolvedRules = { sets: [], missing: [] }

/**
 * The sets behind `names`. What is no shipped name goes to `readFile`, which gives the text of a file beside the
 * layout, or nothing. A set that cannot be used is missing with the reason; the others still judge.
 */
export function resolveRules(
  names: readonly string[],
  readFile: (path: string) => string | undefined = () => undefined,
): ResolvedRules {
  const sets: RuleSet[] = []
  const missing: MissingRules[] = []
  for (const name of new Set(names)) {
    const found = shippedSet(name) ?? fromFile(name, readFile)
    if (typeof found === 'string') missing.push({ name, complaint: found })
    else if (sets.some(({ id }) => id === found.id))
      missing.push({
        name,
        complaint: `${printable(name)}: its id ${found.id} is already that of another set of this sign`,
      })
    else sets.push(found)
  }
  return { sets, missing }
}

/** The set in a file, or why there is none. */
function fromFile(name: string, readFile: (path: string) => string | undefined): RuleSet | string {
  const text = readFile(name)
  if (text === undefined) {
    const meant = nearest(name, shippedNames)
    const hint = meant
      ? `did you mean ${meant}?`
      : `expected a rule file or one of ${shippedNames.join(', ')}`
    return `${printable(name)}: there is no such rule set and no such file beside the layout, ${hint}`
  }
  const { set, texts } = parseRuleSet(text, name)
  if (!set) return texts.join('\n\n')
  return shippedTexts.has(set.id)
    ? `${printable(name)}: its id ${set.id} is that of a shipped set, expected another`
    : set
}
