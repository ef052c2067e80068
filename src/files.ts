/** Layout files on disk: read with everything that is wrong with them, saved whole or not at all. */
import {
  closeSync,
  fchmodSync,
  fsyncSync,
  openSync,
  readFileSync,
  realpathSync,
  renameSync,
  statSync,
  unlinkSync,
  writeSync,
} from 'node:fs'
import { basename, dirname, join } from 'node:path'
import type { Layout } from './layout/layout.js'
import { parseLayout } from './layout/parse.js'
import { problemText } from './layout/problem-text.js'
import { type Sign, sameWiring } from './wiring/edits.js'
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

/** larger files are refused before they are read (interface: 5 MB) */
const largest = 5_000_000

export function readLayoutFile(path: string): Read {
  let source: string
  try {
    const { size } = statSync(path)
    if (size > largest)
      return refusal(
        `${path}: ${(size / 1e6).toFixed(1)} MB is too large for a layout; at most 5 MB are read`,
      )
    source = readFileSync(path, 'utf8')
  } catch (fault) {
    return refusal(`${path}: cannot be read: ${reason(fault)}`)
  }
  const { layout, problems } = parseLayout(source, path)
  if (layout && problems.length === 0)
    return { ok: true, file: { path, name: basename(path), source, layout } }
  const texts = problems.map((p) => problemText(p, path, source))
  const count = problems.length === 1 ? '1 problem' : `${problems.length} problems`
  return refusal(`${texts.join('\n\n')}\n\n${path}: ${count}; the layout is not used`)
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
  if (!readsBackAs(text, path, to))
    return failed(
      'This edit cannot be written into the file as it stands (does it use anchors or aliases?). Nothing was written.',
    )
  try {
    const target = realpathSync(path)
    if (!force && readFileSync(target, 'utf8') !== source)
      return failed('The file changed on disk since it was read.', true)
    replaceFile(target, text)
    return { ok: true, source: text }
  } catch (fault) {
    return failed(`Not saved: ${reason(fault)}. Your work is still here.`)
  }
}

/** the safety net of every save: what will be in the file is what is on the screen */
function readsBackAs(text: string, path: string, { layout, wiring }: Sign): boolean {
  const back = parseLayout(text, path)
  if (!back.layout || back.problems.length > 0) return false
  const close = (a: number | undefined, b: number | undefined) =>
    a === b || (a !== undefined && b !== undefined && Math.abs(a - b) <= 1e-7 * Math.max(1, Math.abs(a)))
  return (
    sameWiring(back.layout.wiring, wiring) &&
    back.layout.variants.length === layout.variants.length &&
    back.layout.variants.every(
      (v, i) => v.name === layout.variants[i]?.name && sameWiring(v, layout.variants[i]),
    ) &&
    back.layout.tubes.every(
      (t, i) => close(t.height, layout.tubes[i]?.height) && t.fill === layout.tubes[i]?.fill,
    ) &&
    back.layout.supplies.every((s, i) => {
      const wanted = layout.supplies[i]
      return (
        close(s.noLoadVoltage, wanted?.noLoadVoltage) &&
        close(s.shortCircuitCurrent, wanted?.shortCircuitCurrent) &&
        close(s.frequency, wanted?.frequency) &&
        s.type === wanted?.type &&
        s.grounding === wanted.grounding
      )
    })
  )
}

/** A new file beside the old one takes its place in one step; the mode stays. */
function replaceFile(target: string, text: string): void {
  const { mode } = statSync(target)
  const beside = join(dirname(target), `.${basename(target)}.${process.pid}.new`)
  const handle = openSync(beside, 'wx', mode)
  try {
    fchmodSync(handle, mode & 0o7777)
    writeSync(handle, text)
    fsyncSync(handle)
    closeSync(handle)
    renameSync(beside, target)
  } catch (fault) {
    unlinkSync(beside)
    throw fault
  }
}
