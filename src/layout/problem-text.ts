/** Problems of a layout file in English, with the source line and a caret. */
import { excerpt, printable, shortened } from './printable.js'
import type { Facts, Form, Found, IdFault, Place, Problem } from './problems.js'

/** The forms that a value can be expected to have. */
export const formWords = {
  layout: 'keys and values (layout, tubes, supplies, circuits, …)',
  number: 'a number, without quotes or unit',
  text: 'text',
  id: 'a short name, as K or S1',
  end: 'an end, as K.a or S1.1',
  'yes-no': 'true or false',
  version: 'layout: 1',
  path: 'a list of points [[x, y], …] or SVG path data',
  point: 'a point [x, y] or [x, y, z]',
  'flat-point': 'a point [x, y]',
  size: 'a width and a height, as [900, 400]',
  corners: 'two opposite corners, as [[300, 100], [600, 300]]',
  terminals: 'the places of terminals 1 and 2, as [[400, 380, 30], [440, 380, 30]]',
  between: 'the two ends it joins, as [S1.1, K.a]',
  glass: 'lead, soda-lime, borosilicate or a number (permittivity)',
  insulation: 'silicone, polyethylene or a number (permittivity)',
  'list-of-tubes': 'a list of tubes',
  'list-of-supplies': 'a list of supplies',
  'list-of-circuits': 'a list of circuits',
  'list-of-routes': 'a list of lead routes',
  'list-of-metal': 'a list of metal parts',
  'list-of-variants': 'a list of variants',
  string: 'a list of tubes, as [K, I, -O, S]',
  rules: 'a list of rule sets, as [common-practice, nec-600]',
  choice: 'one of the known words',
  'rule-set': 'keys and values (rule_set, id, title, rules, …)',
  'list-of-rules': 'a list of rules',
  parts: 'a list of parts, as [tube, metal]',
  range: 'above, up_to or both, as {above: 100}',
  rows: 'rows of two numbers, as [[2, 2.2], [4, 7.1]]',
  row: 'two numbers, as [2, 2.2]',
  words: 'a list of the known words',
  mapping: 'keys and values',
} as const

export const isForm = (word: string): word is Form => Object.hasOwn(formWords, word)

const foundWords = ({ kind, text }: Found): string => {
  switch (kind) {
    case 'number':
      return text
    case 'not-finite':
      return `${text}, which is no finite number`
    case 'text':
      return `the text "${text}"`
    case 'yes-no':
      return text
    case 'nothing':
      return 'empty'
    case 'list':
      return 'a list'
    case 'mapping':
      return 'a set of keys'
    case 'other':
      return 'something else'
  }
}

const quoted = (word: string): string => `"${shortened(word, 40)}"`
const listed = (words: readonly string[], most = 24): string =>
  words.length > most ? `${words.slice(0, most).join(', ')}, …` : words.join(', ')
const figure = (value: number): string => String(Number(value.toPrecision(6)))
const measure = (value: number, unit: string): string => (unit ? `${figure(value)} ${unit}` : figure(value))
const meant = (word: string | undefined): string | undefined =>
  word === undefined ? undefined : `did you mean ${quoted(word)}?`

const idWords: Record<IdFault, string> = {
  empty: 'it is empty, expected a short name, as K or S1',
  'too-long': 'it is longer than 40 characters, expected a short name',
  characters: 'it holds control or invisible characters, expected letters, digits and signs',
  minus: 'it begins with -, which means "entered at end b" in a string, expected a name without it',
  dash: 'it holds –, which joins the two ends of a lead, expected another character',
  reserved: 'this name means the sheet at z = 0, expected another name',
  spaces: 'it begins or ends with a space, expected a name without it',
}
const nameWords = {
  empty: 'is empty, expected a name',
  'too-long': 'is longer than 200 characters, expected a shorter one',
  characters: 'holds control or invisible characters, expected printable text',
} as const

/** A problem in one sentence: what is wrong, what was expected. */
export function problemSentence(problem: Facts): string {
  switch (problem.code) {
    case 'file-too-big':
      return `the file has ${figure(problem.bytes / 1e6)} MB, expected at most ${figure(problem.limit / 1e6)} MB`
    case 'unreadable-character':
      return `the character with code ${problem.character} cannot be read, expected a text file in UTF-8`
    case 'too-deep':
      return `more than ${problem.limit} levels inside each other, expected a layout`
    case 'yaml':
      return yamlWords(problem.rule, problem.detail)
    case 'several-documents':
      return 'another document begins here, expected one layout in a file'
    case 'yaml-version':
      return `this file asks for YAML ${problem.version}, expected YAML 1.2`
    case 'empty-file':
      return 'the file is empty, expected a layout that begins with layout: 1'
    case 'duplicate-key':
      return `the key ${quoted(problem.key)} is already given on line ${problem.firstLine}, expected it once`
    case 'unknown-alias':
      return `*${problem.name} refers to nothing above, expected an anchor &${problem.name} before it`
    case 'alias-in-itself':
      return `*${problem.name} stands inside what it refers to, expected a value that ends`
    case 'too-many-aliases':
      return `the aliases of this file stand for too much, expected at most ${problem.limit} values in all`
    case 'format-version':
      return `layout is ${foundWords(problem.found)}, expected 1, the only format this version reads`
    case 'missing-key':
      return `${problem.of} has no ${problem.key}, expected ${problem.choices.length > 0 ? `one of ${problem.choices.join(', ')}` : formWords[problem.form]}`
    case 'unknown-key':
      return `unknown key ${quoted(problem.key)}, ${meant(problem.nearest) ?? `expected one of ${listed(problem.known)}`}`
    case 'wrong-form':
      return `${problem.what} is ${foundWords(problem.found)}, expected ${formWords[problem.form]}`
    case 'not-a-choice':
      return (
        `${problem.what} is ${foundWords(problem.found)}, ` +
        (meant(problem.nearest) ??
          `expected one of ${problem.choices.join(', ')}${problem.orNumber ? ' or a number' : ''}`)
      )
    case 'empty-list':
      return `${problem.what} is an empty list, expected at least one entry`
    case 'too-many-tubes':
      return `the file has ${problem.count} tubes, expected at most ${problem.limit}`
    case 'too-many-points':
      return `with this path the paths of the file have more than ${problem.limit} points, expected fewer or simpler paths`
    case 'out-of-range':
      return (
        `${problem.what} is ${measure(problem.value, problem.unit)}, ` +
        `expected ${figure(problem.low)} to ${measure(problem.high, problem.unit)}`
      )
    case 'not-below':
      return (
        `${problem.what} is ${measure(problem.value, problem.unit)}, ` +
        `expected less than the ${problem.limitName}, ${measure(problem.limit, problem.unit)}`
      )
    case 'short-path':
      return `the path has ${problem.points === 1 ? 'one point' : 'no points'}, expected two or more`
    case 'no-length':
      return 'all points of the path lie in one place, expected a path with a length'
    case 'tube-too-long':
      return `the path is ${measure(problem.length, problem.unit)} long, expected at most ${measure(problem.limit, problem.unit)} for one piece of glass`
    case 'path-data':
      return `the path data cannot be read here (${problem.detail}), expected SVG path data such as "M 0 0 L 10 20"`
    case 'path-data-too-long':
      return `the path data is longer than ${problem.limit} characters, expected less`
    case 'path-data-not-finite':
      return 'a number of the path data is too large, expected finite numbers'
    case 'several-subpaths':
      return `the path data draws ${problem.count} separate pieces, expected one continuous path`
    case 'metal-kind':
      return `this metal has ${problem.given.length === 0 ? 'no shape' : listed(problem.given)}, expected one of path (a bar), plate or wall`
    case 'no-area':
      return 'the two corners leave no area, expected opposite corners of a sheet'
    case 'same-place':
      return 'both terminals are in one place, expected two places'
    case 'bad-id':
      return `the id ${quoted(problem.id)} cannot be used: ${idWords[problem.why]}`
    case 'bad-name':
      return `${problem.what} ${nameWords[problem.why]}`
    case 'duplicate-id':
      return `the id ${quoted(problem.id)} is already used on line ${problem.firstLine}, expected another`
    case 'duplicate-name':
      return `a variant named ${quoted(problem.name)} is already on line ${problem.firstLine}, expected another name`
    case 'unknown-id':
      return unknownIdWords(problem)
    case 'bad-end':
      return badEndWords(problem)
    case 'tube-used-twice':
      return `tube ${quoted(problem.tube)} is already in ${problem.wiring} on line ${problem.firstLine}, expected every tube once`
    case 'tube-unused':
      return `tube ${quoted(problem.tube)} is in no string of ${problem.wiring}, expected every tube once`
    case 'supply-used-twice':
      return `supply ${quoted(problem.supply)} already feeds a circuit of ${problem.wiring} on line ${problem.firstLine}, expected one circuit for each supply`
    case 'never-joined':
      return `no lead can join ${problem.ends[0]} and ${problem.ends[1]}, expected ends of two tubes, or of a tube and a supply`
    case 'duplicate-route':
      return `a route between ${problem.ends[0]} and ${problem.ends[1]} is already on line ${problem.firstLine}, expected one`
    case 'not-in-circuit':
      return `${problem.end} is not in the circuit of ${problem.supply}, expected an end of this circuit`
    case 'no-joint':
      return `${problem.end} is joined to a terminal, expected the joint between two tubes`
    case 'no-midpoint':
      return `supply ${quoted(problem.supply)} has no midpoint to return to, expected grounding: midpoint`
    case 'bad-chart-key':
      return `the chart entry ${quoted(problem.key)} is not known, expected a fill and a diameter in mm, as neon-12`
    case 'internal':
      return `the file could not be read (${problem.detail}), expected a layout`
  }
}

function yamlWords(rule: string, detail: string): string {
  if (rule === 'TAB_AS_INDENT') return 'a tab is used to indent, expected spaces'
  return `${detail.slice(0, 1).toLowerCase()}${detail.slice(1)}, expected YAML 1.2`
}

type Of<Code extends Facts['code']> = Extract<Facts, { code: Code }>

function unknownIdWords({ id, wanted, is, nearest, known }: Of<'unknown-id'>): string {
  if (is) return `${quoted(id)} is a ${is}, expected a ${wanted}`
  const expected = known.length === 0 ? `a ${wanted} of this file` : `one of ${listed(known)}`
  return `there is no ${wanted} ${quoted(id)}, ${meant(nearest) ?? `expected ${expected}`}`
}

function badEndWords({ end, part, nearest }: Of<'bad-end'>): string {
  const expected =
    part === 'tube'
      ? 'end a or b of this tube'
      : part === 'supply'
        ? 'terminal 1 or 2 of this supply'
        : 'an end such as K.a (a tube) or S1.1 (a supply)'
  return `there is no end ${quoted(end)}, ${meant(nearest) ?? `expected ${expected}`}`
}

/**
 * `file:line:column: what is wrong, what was expected`, the source line, and a caret. Nothing of the file reaches the
 * output as a control character.
 */
export const problemText = (problem: Problem, file: string, source: string): string =>
  placedText(problemSentence(problem), problem.place, file, source)

/** The same for a sentence about any kind of file. */
export function placedText(sentence: string, place: Place, file: string, source: string): string {
  const { line, column, offset } = place
  return `${printable(`${file}:${line}:${column}: ${sentence}`)}\n${excerpt(source, offset)}`
}
