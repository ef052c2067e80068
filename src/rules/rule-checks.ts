/** Do the figures of a rule file make sense? Checked on the values as read, whatever their form. */
import type { KeyPath, Places } from '../layout/document.js'
import { hasActing } from '../layout/printable.js'
import { isKeyed, type Keyed, keyedOf } from '../layout/reading.js'
import type { RuleFacts } from './rule-problems.js'

export interface RuleReading {
  readonly value: Keyed
  readonly places: Places
  readonly report: (offset: number, facts: RuleFacts) => void
}

const longest = 200
const limitKeys = ['distance_mm', 'table_kv_mm', 'limit', 'requires']
/** keys of a rule that need one of others */
const needs: Readonly<Record<string, readonly string[]>> = {
  distance_mm: ['between'],
  table_kv_mm: ['between'],
  between: ['distance_mm', 'table_kv_mm'],
  and: ['between'],
  by: ['distance_mm', 'table_kv_mm'],
  interpolation: ['table_kv_mm'],
  beyond: ['table_kv_mm'],
  altitude_factor: ['distance_mm', 'table_kv_mm'],
  from: ['distance_mm', 'table_kv_mm'],
}
/** conditions of a pair that a circuit does not have */
const pairConditions = ['kv', 'circuits', 'metal_mm']

export function checkRuleFile(reading: RuleReading): void {
  const { value, places, report } = reading
  const { id } = value
  if (typeof id === 'string' && !/^[a-z0-9]+(-[a-z0-9]+)*$/.test(id.slice(0, longest)))
    report(places.value(['id']), { code: 'set-id', id })
  checkTexts(reading, value, [], ['title', 'edition', 'source', 'note'])
  for (const { entry, path } of keyedOf(value.rules, ['rules'])) checkRule(reading, entry, path)
}

function checkRule(reading: RuleReading, rule: Keyed, path: KeyPath): void {
  const { places, report } = reading
  const has = (key: string) => Object.hasOwn(rule, key)
  checkTexts(reading, rule, path, ['clause', 'advice', 'source'])
  const given = limitKeys.filter(has)
  if (given.length > 1) report(places.key([...path, given[1] ?? '']), { code: 'several-limits', given })
  for (const [key, wanted] of Object.entries(needs))
    if (has(key) && !wanted.some(has))
      report(places.key([...path, key]), { code: 'key-needs', key, needs: wanted })
  if (isKeyed(rule.when)) checkConditions(reading, rule.when, [...path, 'when'], has('between'))
  inRange(reading, [...path, 'distance_mm'], rule.distance_mm, [0, 10_000], 'mm')
  if (isKeyed(rule.by)) inRange(reading, [...path, 'by', 'times'], rule.by.times, [0.1, 10], '')
  checkRows(reading, [...path, 'table_kv_mm'], rule.table_kv_mm, 'no less')
  checkRows(reading, [...path, 'altitude_factor'], rule.altitude_factor, 'no less')
  if (isKeyed(rule.limit)) checkLimit(reading, rule.limit, [...path, 'limit'])
}

function checkTexts(
  { places, report }: RuleReading,
  held: Keyed,
  path: KeyPath,
  keys: readonly string[],
): void {
  for (const key of keys) {
    const text = held[key]
    if (typeof text !== 'string') continue
    const long = key === 'advice' || key === 'note' ? 5 * longest : 2 * longest
    const why =
      text.trim() === ''
        ? 'empty'
        : text.length > long
          ? 'too-long'
          : hasActing(text.replaceAll('\n', ' '))
            ? 'characters'
            : undefined
    if (why) report(places.value([...path, key]), { code: 'bad-name', what: key, why })
  }
}

function checkConditions(reading: RuleReading, when: Keyed, path: KeyPath, ofPair: boolean): void {
  const { places, report } = reading
  if (!ofPair)
    for (const key of pairConditions)
      if (Object.hasOwn(when, key))
        report(places.key([...path, key]), { code: 'key-needs', key, needs: ['between'] })
  for (const key of ['frequency_hz', 'no_load_kv', 'terminal_kv', 'kv', 'metal_mm']) {
    const range = when[key]
    if (!isKeyed(range)) continue
    const { above, up_to: upTo } = range
    if (above === undefined && upTo === undefined)
      report(places.value([...path, key]), { code: 'empty-range', what: key })
    for (const end of ['above', 'up_to']) inRange(reading, [...path, key, end], range[end], [0, 1e6], '')
    if (typeof above === 'number' && typeof upTo === 'number' && above >= upTo)
      report(places.value([...path, key]), { code: 'range-order', what: key, above, upTo })
  }
}

function checkLimit(reading: RuleReading, limit: Keyed, path: KeyPath): void {
  const { at_most: atMost, by_terminal_kv: rows } = limit
  if ((atMost === undefined) === (rows === undefined))
    reading.report(reading.places.value(path), { code: 'limit-value' })
  inRange(reading, [...path, 'at_most'], atMost, [0, 1e6], '')
  checkRows(reading, [...path, 'by_terminal_kv'], rows, 'no more')
}

/** Rows of two numbers each: the first ones rise, the second ones do not fall (or do not rise). */
function checkRows(reading: RuleReading, path: KeyPath, rows: unknown, second: 'no less' | 'no more'): void {
  if (!Array.isArray(rows)) return
  const what = String(path.at(-1))
  const at = (row: number, column: number): unknown => {
    const entry: unknown = rows[row]
    return Array.isArray(entry) ? entry[column] : undefined
  }
  for (let row = 0; row < rows.length; row++)
    for (const [column, name, expected] of [
      [0, 'first', 'more'],
      [1, 'second', second],
    ] as const) {
      const [value, before] = [at(row, column), at(row - 1, column)]
      const place = [...path, row, column]
      inRange(reading, place, value, [0, 1e6], '')
      if (typeof value !== 'number' || typeof before !== 'number') continue
      const falls = column === 0 ? value <= before : second === 'no less' ? value < before : value > before
      if (falls)
        reading.report(reading.places.value(place), {
          code: 'rows-order',
          what,
          row: row + 1,
          column: name,
          value,
          before,
          expected,
        })
    }
}

function inRange(
  { places, report }: RuleReading,
  path: KeyPath,
  value: unknown,
  [low, high]: readonly [number, number],
  unit: string,
): void {
  if (typeof value !== 'number' || !Number.isFinite(value) || (value >= low && value <= high)) return
  const what = String(path.findLast((key) => typeof key === 'string'))
  report(places.value(path), { code: 'out-of-range', what, value, low, high, unit })
}
