/** The program as it is shipped, and what the tests of the inspector wait for. */
import { execFileSync } from 'node:child_process'
import { cpSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { delimiter, join } from 'node:path'
import { afterAll } from 'vitest'
import { openScript, type Terminal, type TerminalOptions } from './terminal.js'

/** A directory that goes with the test file. */
export function temporary(): string {
  const directory = mkdtempSync(join(tmpdir(), 'tubewright-inspector-'))
  afterAll(() => rmSync(directory, { recursive: true, force: true }))
  return directory
}

/** Builds by the very command of package.json, into a directory of its own. */
export function shippedProgram(): string {
  const directory = temporary()
  const { scripts } = JSON.parse(readFileSync('package.json', 'utf8'))
  const command = String(scripts.build).replace('--outdir=dist', `--outdir=${directory}`)
  if (!command.includes(directory)) throw new Error('the build command has changed')
  const PATH = ['node_modules/.bin', process.env.PATH].join(delimiter)
  execFileSync('/bin/sh', ['-c', command], { env: { ...process.env, PATH } })
  // modules, as in the package
  cpSync('package.json', join(directory, 'package.json'))
  return join(directory, 'tubewright.js')
}

/** Opens a layout and waits until its solution is on the screen. */
export async function solvedScreen(
  program: string,
  layout: string,
  options: TerminalOptions = {},
  ...flags: string[]
): Promise<Terminal> {
  const terminal = openScript(program, [layout, ...flags], options)
  await settled(terminal)
  return terminal
}

/** title and loading tell when nothing is awaited any more */
export async function settled(terminal: Terminal): Promise<void> {
  await terminal.until(
    () => !/SOLVING|solving/.test(terminal.dump()) && /TO FIX|to fix/.test(terminal.lines()[0] ?? ''),
    'never solved',
  )
  await terminal.stable(40)
}

/** the fourth row from below */
export const messageRow = (terminal: Terminal): string => terminal.lines().at(-4) ?? ''

/** Sends what makes an edit, waits for what it did to be told, and answers with that. Needs a wide screen. */
export async function edit(terminal: Terminal, sequence: string, said: string): Promise<string> {
  terminal.send(sequence)
  await terminal.until(() => messageRow(terminal).includes(said), `never said ${said}`)
  await settled(terminal)
  return messageRow(terminal)
}

/** The screen without trailing blanks, which are written or erased as it comes. */
export const seen = (terminal: Terminal): string =>
  terminal
    .lines()
    .map((line) => line.trimEnd())
    .join('\n')
