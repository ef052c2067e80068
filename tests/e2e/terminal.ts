/**
 * A real terminal for tests: the program runs behind a pseudo terminal, an emulator draws what it sends.
 *
 *   const program = await built('src/cli.tsx')     // bundled as `npm run build` does it: starts four times as fast
 *   afterEach(closeTerminals)
 *   test('…', async () => {
 *     const terminal = openScript(program, ['layouts/…'], { columns: 60, rows: 10 })
 *     await terminal.sees('ready')          // waits, fails with the screen in its message
 *     await terminal.keys('j', keys.down)   // sends keys one by one, waits for the screen to rest after each
 *     terminal.dump()                       // the screen as text, lines without trailing blanks
 *     terminal.cell(3, 0)                   // {glyph, width, foreground: '#1289e7' | 32 | undefined, bold, …}
 *     terminal.bytes()                      // sent by the program since the last countBytes()
 *   })
 *
 * `underShell` runs a command line under /bin/sh, so the terminal outlives the program: `ending()` waits for its
 * exit status and says whether the terminal's settings are what they were. The environment of the test run that
 * programs react to (CI, NO_COLOR, …) is taken away, NODE_ENV is 'production' (react reads it while it loads);
 * `env` adds to it. Paths are from the project's root.
 */
import { Buffer } from 'node:buffer'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import * as pty from '@lydell/node-pty'
import xterm from '@xterm/headless'
import { build } from 'esbuild'
import { afterAll } from 'vitest'
import { type CellLook, cellLook, screenLines } from './emulator.js'

export interface TerminalOptions {
  readonly columns?: number
  readonly rows?: number
  readonly env?: Readonly<Record<string, string>>
  /** what the emulator answers when asked for its ground's colour, as 'ffff/ffff/ffff'; nothing if left out */
  readonly ground?: string
}

export interface Terminal {
  readonly pid: number
  /** writes to the program at once */
  send(text: string): void
  /** sends keys one by one, each after the screen has come to rest */
  keys(...sequences: string[]): Promise<void>
  resize(columns: number, rows: number): void
  kill(signal: string): void
  /** waits until the program has sent nothing for `quietMs` and all is drawn */
  stable(quietMs?: number): Promise<void>
  /** waits until the screen holds the text, or any of this to be true */
  sees(wanted: string | RegExp): Promise<void>
  until(holds: () => boolean, what?: string): Promise<void>
  lines(): string[]
  dump(): string
  cell(x: number, y: number): CellLook
  /** the screen's rows of cells */
  cells(): CellLook[][]
  alternate(): boolean
  cursorVisible(): boolean
  bracketedPaste(): boolean
  /** everything the program has sent */
  sent(): string
  bytes(): number
  countBytes(): void
  close(): void
}

/** Key sequences as xterm sends them. */
export const keys = {
  up: '\x1b[A',
  down: '\x1b[B',
  right: '\x1b[C',
  left: '\x1b[D',
  home: '\x1b[H',
  end: '\x1b[F',
  pageUp: '\x1b[5~',
  pageDown: '\x1b[6~',
  enter: '\r',
  escape: '\x1b',
  tab: '\t',
  shiftTab: '\x1b[Z',
  backspace: '\x7f',
  delete: '\x1b[3~',
  ctrlC: '\x03',
  ctrlZ: '\x1a',
} as const

const limitMs = 10_000
const takenAway = [
  ...['CI', 'CONTINUOUS_INTEGRATION', 'GITHUB_ACTIONS', 'NO_COLOR', 'FORCE_COLOR', 'TMUX', 'COLORFGBG'],
  ...['NODE_ENV', 'NODE_OPTIONS', 'VITEST', 'INK_SCREEN_READER', 'WT_SESSION'],
]
const opened = new Set<Terminal>()

/** Ends every program that a test opened. */
export function closeTerminals(): void {
  for (const terminal of opened) terminal.close()
  opened.clear()
}

/** Bundles a TypeScript program like `npm run build`, into a directory that goes with the test file. */
export async function built(entry: string): Promise<string> {
  const directory = mkdtempSync(join(tmpdir(), 'tubewright-e2e-'))
  afterAll(() => rmSync(directory, { recursive: true, force: true }))
  await build({
    entryPoints: [entry],
    outdir: directory,
    entryNames: 'program',
    outExtension: { '.js': '.mjs' },
    bundle: true,
    splitting: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    external: ['react-devtools-core'],
    define: { 'process.env.NODE_ENV': '"production"' },
    banner: { js: "import{createRequire}from'node:module';const require=createRequire(import.meta.url);" },
    logLevel: 'error',
  })
  return join(directory, 'program.mjs')
}

/** Runs a built program. */
export const openScript = (
  file: string,
  args: readonly string[] = [],
  options: TerminalOptions = {},
): Terminal => openTerminal(process.execPath, [file, ...args], options)

/** The command line that `openScript` would run, for `underShell`. */
export const scriptCommand = (file: string, ...args: string[]): string =>
  [process.execPath, file, ...args].map((word) => `'${word}'`).join(' ')

export interface Ending {
  readonly status: number
  /** the terminal's settings (stty) are the same as before the program ran */
  readonly settingsRestored: boolean
}

/** Runs a command line under /bin/sh; see above. */
export function underShell(
  command: string,
  options: TerminalOptions = {},
): Terminal & { ending(): Promise<Ending> } {
  const script = `before=$(stty -g); ${command}
    status=$?; [ "$before" = "$(stty -g)" ] && settings=same || settings=changed
    echo "status=$status settings=$settings."; read rest`
  const terminal = openTerminal('/bin/sh', ['-c', script], options)
  return {
    ...terminal,
    async ending() {
      const last = /status=(\d+) settings=(\w+)\./
      await terminal.sees(last)
      const [, status, settings] = last.exec(terminal.dump()) ?? []
      return { status: Number(status), settingsRestored: settings === 'same' }
    },
  }
}

export function openTerminal(file: string, args: readonly string[], options: TerminalOptions = {}): Terminal {
  const { columns = 80, rows = 24 } = options
  const emulator = new xterm.Terminal({ cols: columns, rows, allowProposedApi: true, logLevel: 'off' })
  const env = environment(options.env)
  const program = pty.spawn(file, [...args], { name: 'xterm-256color', cols: columns, rows, env })
  let sent = ''
  let countedFrom = 0
  let lastAt = Date.now()
  // chunks that the emulator has not drawn yet
  let undrawn = 0
  let alive = true

  program.onData((text) => {
    sent += text
    lastAt = Date.now()
    undrawn++
    emulator.write(text, () => undrawn--)
  })
  program.onExit(() => {
    alive = false
  })
  const send = (text: string) => {
    if (alive) program.write(text)
  }
  emulator.onData(send)
  emulator.parser.registerOscHandler(11, (asked) => {
    if (options.ground && asked === '?') send(`\x1b]11;rgb:${options.ground}\x1b\\`)
    return true
  })

  async function stable(quietMs = 60): Promise<void> {
    const start = Date.now()
    const quiet = () => undrawn === 0 && Date.now() - Math.max(lastAt, start) >= quietMs
    await until(quiet, 'the screen never came to rest')
  }

  async function until(holds: () => boolean, what = 'waited in vain'): Promise<void> {
    const start = Date.now()
    while (!(undrawn === 0 && holds())) {
      if (Date.now() - start > limitMs) throw new Error(`${what}; the screen:\n${dump()}`)
      await sleep(5)
    }
  }

  const dump = () => screenLines(emulator).join('\n')
  const terminal: Terminal = {
    pid: program.pid,
    send,
    async keys(...sequences) {
      for (const sequence of sequences) {
        send(sequence)
        await stable(40)
      }
    },
    resize(newColumns, newRows) {
      emulator.resize(newColumns, newRows)
      program.resize(newColumns, newRows)
    },
    kill: (signal) => program.kill(signal),
    stable,
    sees: (wanted) =>
      until(
        () => (typeof wanted === 'string' ? dump().includes(wanted) : wanted.test(dump())),
        `never saw ${wanted}`,
      ),
    until,
    lines: () => screenLines(emulator),
    dump,
    cell: (x, y) => cellLook(emulator, x, y),
    cells: () =>
      Array.from({ length: emulator.rows }, (_, y) =>
        Array.from({ length: emulator.cols }, (_, x) => cellLook(emulator, x, y)),
      ),
    alternate: () => emulator.buffer.active.type === 'alternate',
    // the emulator does not tell, so the last command to show or hide it counts
    cursorVisible: () => sent.lastIndexOf('\x1b[?25h') >= sent.lastIndexOf('\x1b[?25l'),
    bracketedPaste: () => emulator.modes.bracketedPasteMode,
    sent: () => sent,
    bytes: () => Buffer.byteLength(sent.slice(countedFrom)),
    countBytes() {
      countedFrom = sent.length
    },
    close() {
      if (alive) program.kill('SIGKILL')
      emulator.dispose()
    },
  }
  opened.add(terminal)
  return terminal
}

function environment(added: Readonly<Record<string, string>> = {}): Record<string, string> {
  const kept = Object.entries(process.env).filter(([name]) => !takenAway.includes(name))
  const defined = kept.flatMap(([name, value = '']) => [[name, value] as const])
  return {
    ...Object.fromEntries(defined),
    TERM: 'xterm-256color',
    COLORTERM: 'truecolor',
    NODE_ENV: 'production',
    ...added,
  }
}
