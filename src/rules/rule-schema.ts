/** The form of a rule file as zod schemas. The `error` of each is the name of a form (layout/problem-text.ts). */
import { z } from 'zod'
import { fills } from '../layout/schema.js'
import { marks, type PartWord, partBits, type Quantity, quantities } from './rule-set.js'

/** Keys of a table as a list that zod can take for an enumeration. */
function wordsOf<T extends string>(table: Readonly<Record<T, number>>): T[] {
  const words: T[] = []
  for (const word in table) words.push(word)
  return words
}

const number = z.number({ error: 'number' })
const text = z.union([z.string(), z.number()], { error: 'text' })
const choice = <const T extends readonly string[]>(words: T) => z.enum(words, { error: 'choice' })
const choices = <const T extends readonly string[]>(words: T) =>
  z.array(choice(words), { error: 'words' }).min(1)
const rows = z.array(z.tuple([number, number], { error: 'row' }), { error: 'rows' }).min(1)
const range = z.strictObject({ above: number.optional(), up_to: number.optional() }, { error: 'range' })

const partWords: readonly PartWord[] = wordsOf(partBits)
const quantityWords: readonly Quantity[] = wordsOf(quantities)
const parts = z.array(choice(partWords), { error: 'parts' }).min(1)

const when = z.strictObject(
  {
    supply: choice(['electronic', 'core-and-coil']).optional(),
    grounding: choices(['midpoint', 'one-end', 'none']).optional(),
    frequency_hz: range.optional(),
    no_load_kv: range.optional(),
    terminal_kv: range.optional(),
    conduit: choices(['none', 'nonmetallic', 'metal']).optional(),
    fill: choices(fills).optional(),
    circuits: choice(['same', 'different']).optional(),
    open_circuit_protection: z.boolean({ error: 'yes-no' }).optional(),
    kv: range.optional(),
    metal_mm: range.optional(),
  },
  { error: 'mapping' },
)

const by = z.strictObject(
  {
    condition: choice(['lit', 'nameplate', 'broken']).optional(),
    value: choice(['rms', 'peak']).optional(),
    of: choice(['difference', 'to-ground', 'no-load']).optional(),
    times: number.optional(),
  },
  { error: 'mapping' },
)

const limit = z.strictObject(
  {
    quantity: choice(quantityWords),
    at_most: number.optional(),
    by_terminal_kv: rows.optional(),
    verdict: choice(['fix', 'watch']).optional(),
  },
  { error: 'mapping' },
)

const rule = z.strictObject(
  {
    clause: text,
    advice: text.optional(),
    mark: choice(marks).optional(),
    source: text.optional(),
    when: when.optional(),
    between: parts.optional(),
    and: parts.optional(),
    by: by.optional(),
    distance_mm: number.optional(),
    table_kv_mm: rows.optional(),
    interpolation: choice(['linear', 'step']).optional(),
    beyond: choice(['last', 'slope']).optional(),
    altitude_factor: rows.optional(),
    from: choice(['surface', 'conduit']).optional(),
    limit: limit.optional(),
    requires: choice(['ground-fault-protection', 'open-circuit-protection']).optional(),
  },
  { error: 'mapping' },
)

export const ruleFileShape = z.strictObject(
  {
    rule_set: z.literal(1, { error: 'number' }),
    id: text,
    title: text,
    edition: text,
    source: text,
    mark: choice(marks),
    note: text.optional(),
    rules: z.array(rule, { error: 'list-of-rules' }).min(1),
  },
  { error: 'rule-set' },
)

/** The keys of each mapping, by the key that holds it. */
export const knownRuleKeys: Readonly<Record<string, readonly string[]>> = {
  '': Object.keys(ruleFileShape.shape),
  rules: Object.keys(rule.shape),
  when: Object.keys(when.shape),
  by: Object.keys(by.shape),
  limit: Object.keys(limit.shape),
  ...Object.fromEntries(
    ['frequency_hz', 'no_load_kv', 'terminal_kv', 'kv', 'metal_mm'].map((key) => [key, ['above', 'up_to']]),
  ),
}

export type RuleFileValue = z.infer<typeof ruleFileShape>
export type RuleValue = z.infer<typeof rule>
export type RangeValue = z.infer<typeof range>
