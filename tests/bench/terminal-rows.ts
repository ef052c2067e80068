/** The built program behind a pseudo terminal of 120 × 40 cells: launch, bytes of a key, memory. */
import { readFileSync } from 'node:fs'
import { keys, openScript, type Terminal } from '../e2e/terminal.js'
import type { BenchSign } from './sign.js'
import { row, timeRow } from './table.js'
import { median, most, timing } from './timing.js'

const size = { columns: 120, rows: 40, ground: '0000/0000/0000', env: { COLORTERM: '' } }
const arrows = [keys.right, keys.down, keys.right, keys.down, keys.left, keys.up, keys.left, keys.up]

const opened = (program: string, { path }: BenchSign, options: readonly string[] = []): Terminal =>
  openScript(program, [path, ...options], size)
const solving = (terminal: Terminal): boolean => terminal.dump().includes('SOLVING')

async function settled(terminal: Terminal): Promise<void> {
  await terminal.until(() => !solving(terminal), 'still solving')
  await terminal.stable()
}

async function ready(program: string, sign: BenchSign, options: readonly string[] = []): Promise<Terminal> {
  const terminal = opened(program, sign, options)
  await terminal.sees(sign.layout.title)
  await settled(terminal)
  return terminal
}

/** From the start of the process to the first frame, and to the lit solution. The first launch warms the disk. */
export async function launchRows(program: string, sign: BenchSign): Promise<void> {
  const frames: number[] = []
  const lit: number[] = []
  for (let run = 0; run < 6; run++) {
    const start = performance.now()
    const terminal = opened(program, sign)
    await terminal.sees(sign.layout.title)
    const shown = performance.now() - start
    await terminal.until(() => !solving(terminal))
    if (run > 0) frames.push(shown)
    if (run > 0) lit.push(performance.now() - start)
    terminal.close()
  }
  timeRow('launch → first frame, on paper', timing(frames), 600)
  timeRow('launch → lit solution in place', timing(lit), 1500)
}

/** Bytes that each of these keys makes the program send, pressed one by one. */
async function bytesOf(terminal: Terminal, sequences: readonly string[]): Promise<number[]> {
  const bytes: number[] = []
  for (const sequence of sequences) {
    terminal.countBytes()
    terminal.send(sequence)
    await terminal.stable(40)
    bytes.push(terminal.bytes())
  }
  return bytes
}

function bytesRow(name: string, bytes: readonly number[], mostBytes?: number): void {
  const of = timing(bytes)
  const shown = `${String(median(of)).padStart(5)} B   max ${String(most(of)).padStart(5)} B   of ${bytes.length}`
  row(name, shown, median(of), mostBytes === undefined ? undefined : { most: mostBytes, unit: 'B' })
}

export async function bytesRows(program: string, sign: BenchSign): Promise<void> {
  const terminal = await ready(program, sign)
  terminal.send(keys.right)
  await terminal.stable()
  const repeated = (times: number, of: readonly string[]) => Array.from({ length: times }, () => of).flat()
  bytesRow('bytes: cursor step', await bytesOf(terminal, repeated(5, arrows)), 1500)
  terminal.send(keys.escape)
  await terminal.stable()
  bytesRow('bytes: Tab step', await bytesOf(terminal, repeated(20, [keys.tab])))
  bytesRow('bytes: instant step', await bytesOf(terminal, repeated(24, ['i'])))
  await editBytes(terminal)
  terminal.close()
}

/** Turns and feeds from the other end, from key to rest. A key refused (no tube at the cursor) does not count. */
async function editBytes(terminal: Terminal): Promise<void> {
  const bytes: number[] = []
  const times: number[] = []
  for (let k = 0; k < 16 && bytes.length < 12; k++) {
    // another place of the list each time
    terminal.send(keys.home + keys.tab.repeat(k))
    await terminal.stable()
    const edited = await timedEdit(terminal, k % 2 === 0 ? 't' : 'f')
    if (!terminal.dump().includes('(not saved)')) continue
    bytes.push(edited.bytes)
    times.push(edited.ms)
    await timedEdit(terminal, 'u')
  }
  bytesRow('bytes: wiring edit until settled', bytes, 6000)
  timeRow('key → lit result of an edit on the screen', timing(times))
}

/** an edit answers at once that it is being solved */
const answerMs = 300

async function timedEdit(terminal: Terminal, key: string): Promise<{ bytes: number; ms: number }> {
  terminal.countBytes()
  const start = performance.now()
  terminal.send(key)
  // a key refused twice for the same reason changes nothing on the screen
  await terminal.until(() => terminal.bytes() > 0 || performance.now() - start > answerMs)
  await terminal.until(() => !solving(terminal))
  const ms = performance.now() - start
  await terminal.stable()
  return { bytes: terminal.bytes(), ms }
}

const presses = 10_000
const cyclePresses = 100
const firstReading = 2000

/** Cursor, Tab, instant, and an edit taken back and made again, `cyclePresses` keys. */
async function pressCycle(terminal: Terminal, cycle: number): Promise<void> {
  const walk = Array.from({ length: 60 }, (_, k) => arrows[k % arrows.length]!)
  const tabs = Array.from({ length: 24 }, () => keys.tab)
  const instants = Array.from({ length: 12 }, () => 'i')
  for (const burst of [walk, tabs, instants]) {
    terminal.send(burst.join(''))
    await terminal.stable(25)
  }
  await timedEdit(terminal, cycle % 2 === 0 ? 't' : 'f')
  terminal.send('ur')
  await timedEdit(terminal, 'u')
}

/** Resident memory, MB. */
const resident = ({ pid }: Terminal): number =>
  Number(/VmRSS:\s+(\d+) kB/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))?.[1]) / 1024

export async function memoryRows(program: string, sign: BenchSign): Promise<void> {
  const terminal = await ready(program, sign, ['--measure'])
  const readings: number[] = [resident(terminal)]
  for (let cycle = 0; cycle < presses / cyclePresses; cycle++) {
    await pressCycle(terminal, cycle)
    if (((cycle + 1) * cyclePresses) % firstReading === 0) readings.push(resident(terminal))
  }
  // nothing is unsaved; the program says on leaving how many frames there were: as many as keys and solutions
  terminal.send('q')
  await terminal.sees(/frames \d+/)
  const frames = /frames (\d+)/.exec(terminal.dump())?.[1]
  terminal.close()
  const early = readings[1]!
  const late = readings.at(-1)!
  const growth = (100 * (late - early)) / early
  row('memory after each 2000 keys, from 0 on', `${readings.map((mb) => mb.toFixed(0)).join(' ')} MB`)
  row(
    `memory, growth from ${firstReading} to ${presses} keys`,
    `${growth.toFixed(1)} %   ${frames} frames drawn`,
    growth,
    { most: 10, unit: '%' },
  )
}
