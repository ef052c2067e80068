/** Text → Layout, or everything that is wrong with the text. */
import { checkBounds } from './bounds.js'
import { buildLayout } from './build.js'
import { readDocument } from './document.js'
import type { Layout } from './layout.js'
import { flatPaths } from './paths.js'
import { type Facts, foundIn, type Problem } from './problems.js'
import { isKeyed, type Reading } from './reading.js'
import { checkReferences } from './references.js'
import { shapedFile } from './shape.js'

const mostTubes = 2000

export interface Parsed {
  /** absent when there are problems */
  readonly layout?: Layout
  /** in file order */
  readonly problems: readonly Problem[]
}

/** The layout in `text`. Never throws: what is wrong comes back as problems, all of them at once. */
export function parseLayout(text: string, file: string): Parsed {
  try {
    return parsed(text, file)
  } catch (fault) {
    const detail = fault instanceof Error ? fault.message : String(fault)
    return { problems: [{ code: 'internal', detail, place: { offset: 0, line: 1, column: 1 } }] }
  }
}

function parsed(text: string, file: string): Parsed {
  const { value, places, problems: faults } = readDocument(text)
  const problems: Problem[] = [...faults]
  const report = (offset: number, facts: Facts) => problems.push({ ...facts, place: places.place(offset) })
  if (value === undefined) return { problems: inFileOrder(problems) }
  if (!isKeyed(value)) {
    const facts = { what: 'the file', form: 'layout', found: foundIn(value) } as const
    report(places.value([]), { code: 'wrong-form', ...facts })
    return { problems: inFileOrder(problems) }
  }
  const reading: Reading = { value, places, report }
  const paths = refusal(reading) ? undefined : flatPaths(reading)
  if (!paths) return { problems: inFileOrder(problems) }

  const shaped = shapedFile(reading)
  checkBounds(reading)
  checkReferences(reading)
  if (problems.length > 0 || !shaped) return { problems: inFileOrder(problems) }
  return { layout: buildLayout(shaped, paths, file), problems }
}

/** Files that are not read any further: of another format, or too large. */
function refusal({ value, places, report }: Reading): boolean {
  const { layout: format, tubes } = value
  if (typeof format === 'number' && format !== 1) {
    report(places.value(['layout']), { code: 'format-version', found: foundIn(format) })
    return true
  }
  if (!Array.isArray(tubes) || tubes.length <= mostTubes) return false
  const facts = { count: tubes.length, limit: mostTubes }
  report(places.value(['tubes']), { code: 'too-many-tubes', ...facts })
  return true
}

/** By place; what an alias makes appear twice is said once. */
function inFileOrder(problems: readonly Problem[]): Problem[] {
  const seen = new Set<string>()
  return [...problems]
    .sort((a, b) => a.place.offset - b.place.offset)
    .filter((problem) => {
      const key = JSON.stringify(problem)
      if (seen.has(key)) return false
      seen.add(key)
      return true
    })
}
