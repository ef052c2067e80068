/** Layout files on disk: read with everything that is wrong with them, saved whole or not at all. */
import {
  closeSync,
  fchmodSync,
  fchownSync,
  fsyncSync,
  openSync,
  readFileSync,
  realpathSync,
  renameSync,
  rmSync,
  type Stats,
  statSync,
  writeFileSync,
} from 'node:fs'
import { basename, dirname, join, resolve } from 'node:path'
import type { Layout } from './layout/layout.js'
import { parseLayout } from './layout/parse.js'
import { printable } from './layout/printable.js'
import { problemSentence, problemText } from './layout/problem-text.js'
import type { Problem } from './layout/problems.js'
import { type ResolvedRules, resolveRules } from './rules/resolve.js'
import type { Sign } from './wiring/edit.js'
import { holdsSign } from './wiring/same-sign.js'
import { editedText } from './wiring/text.js'

export interface LayoutFile {
  readonly path: string
  readonly name: string
  readonly source: string
  readonly layout: Layout
}

export type Read =
  | { readonly ok: true; readonly file: LayoutFile }
  | { readonly ok: false; readonly complaint: string }

/** larger files are refused before they are read */
const largest = 5_000_000

export function readLayoutFile(path: string): Read {
  const shown = printable(path)
  let source: string | undefined
  try {
    const { size } = statSync(path)
    if (size > largest)
      return refusal(
        `${shown}: ${(size / 1e6).toFixed(1)} MB is too large for a layout; at most 5 MB are read`,
      )
    source = textOf(path)
  } catch (fault) {
    return refusal(`${shown}: cannot be read: ${reason(fault)}`)
  }
  if (source === undefined)
    return refusal(`${shown}: is not UTF-8 text, expected a layout in YAML; save it as UTF-8`)
  const { layout, problems } = parseLayout(source, path)
  if (layout && problems.length === 0)
    return { ok: true, file: { path, name: basename(path), source, layout } }
  const texts = problems.map((p) => problemText(p, shown, source))
  const count = problems.length === 1 ? '1 problem' : `${problems.length} problems`
  return refusal(`${texts.join('\n\n')}\n\n${shown}: ${count}; the layout is not used`)
}

/** The bytes as text that gives the same bytes again, byte order mark included; undefined where they are no UTF-8. */
function textOf(path: string): string | undefined {
  const bytes = readFileSync(path)
  const text = bytes.toString('utf8')
  return Buffer.from(text).equals(bytes) ? text : undefined
}

const refusal = (complaint: string): Read => ({ ok: false, complaint })

/** A fault of the file system in words. */
function reason(fault: unknown): string {
  const code = fault instanceof Error && 'code' in fault ? String(fault.code) : ''
  const words: Record<string, string> = {
    ENOENT: 'there is no such file',
    EACCES: 'no permission',
    EPERM: 'no permission',
    EISDIR: 'it is a folder',
    EROFS: 'the disk is read-only',
    ENOSPC: 'the disk is full',
    ENOTDIR: 'there is no such file',
    ELOOP: 'its links go round in a circle',
    ENAMETOOLONG: 'the name is too long',
  }
  return words[code] ?? (fault instanceof Error ? fault.message : String(fault))
}

export type Saved =
  | { readonly ok: true; readonly source: string }
  | { readonly ok: false; readonly why: string; readonly changedOnDisk: boolean }

/**
 * Writes an edited sign into its file: only the bytes of the edit change, and only if the result reads back as the
 * sign. Refuses to overwrite a file that is no longer as it was read, unless forced.
 */
export function saveSign(path: string, source: string, from: Sign, to: Sign, force: boolean): Saved {
  const failed = (why: string, changedOnDisk = false): Saved => ({ ok: false, why, changedOnDisk })
  const text = editedText(source, from, to)
  // the safety net of every save: what will be in the file is what is on the screen
  const { layout: back, problems } = parseLayout(text, path)
  if (!back || problems.length > 0 || !holdsSign(back, to)) return failed(notWritten(problems[0]))
  try {
    const target = existing(path)
    if (target === undefined) {
      if (!force) return failed('The file is no longer where it was read from.', true)
      replaceFile(path, text)
    } else {
      if (!force && !readFileSync(target).equals(Buffer.from(source)))
        return failed('The file changed on disk since it was read.', true)
      // a file that may not be written is not to be replaced either
      closeSync(openSync(target, 'r+'))
      replaceFile(target, text, statSync(target))
    }
    return { ok: true, source: text }
  } catch (fault) {
    return failed(`Not saved: ${reason(fault)}. Your work is still here.`)
  }
}

/** Why an edited text is not written: what would be wrong with it, or that it says something else than the screen. */
function notWritten(problem: Problem | undefined): string {
  const why = problem
    ? `line ${problem.place.line} would not be read back: ${printable(problemSentence(problem))}`
    : 'does it use anchors or aliases?'
  return `This edit cannot be written into the file as it stands (${why}). Nothing was written.`
}

/** Where the bytes of a file really lie, behind links; undefined where there is none. */
function existing(path: string): string | undefined {
  try {
    return realpathSync(path)
  } catch (fault) {
    if (fault instanceof Error && 'code' in fault && fault.code === 'ENOENT') return undefined
    throw fault
  }
}

/** A new file beside the old one takes its place in one step; mode and owner stay. */
function replaceFile(target: string, text: string, old?: Stats): void {
  // short, as the name of the layout may be as long as names can be
  const beside = join(dirname(target), `.tubewright-${process.pid}.new`)
  // what a crash left behind under this number is of no use to anybody
  rmSync(beside, { force: true })
  const handle = openSync(beside, 'wx', old === undefined ? 0o666 : 0o600)
  try {
    try {
      writeFileSync(handle, text)
      if (old) keepRights(handle, old)
      fsyncSync(handle)
    } finally {
      closeSync(handle)
    }
    renameSync(beside, target)
  } catch (fault) {
    rmSync(beside, { force: true })
    throw fault
  }
}

function keepRights(handle: number, { uid, gid, mode }: Stats): void {
  try {
    fchownSync(handle, uid, gid)
  } catch {
    // only the superuser gives files away; then the file is the user's from now on
  }
  fchmodSync(handle, mode & 0o7777)
}

/** rule files larger than this are not read */
const largestRules = 1_000_000

/** Reads rule files named relative to a folder; nothing where there is no such file. */
const ruleFileText =
  (folder: string) =>
  (path: string): string | undefined => {
    try {
      const place = resolve(folder, path)
      const found = statSync(place)
      return found.isFile() && found.size <= largestRules ? readFileSync(place, 'utf8') : undefined
    } catch {
      return undefined
    }
  }

/** The rule sets of these names: shipped ones, and files named relative to a folder. */
export const rulesFrom = (folder: string, names: readonly string[]): ResolvedRules =>
  resolveRules(names, ruleFileText(folder))

/** What the names mean that a layout gives in `rules`: shipped sets, and files beside the layout. */
export const rulesBeside = (layoutPath: string, names: readonly string[]): ResolvedRules =>
  rulesFrom(dirname(layoutPath), names)
