/** The terminal layer under a real terminal: every way out, bursts of keys, suspending, resizing. */
import { afterEach, expect, test } from 'vitest'
import {
  built,
  closeTerminals,
  keys,
  openScript,
  openTerminal,
  scriptCommand,
  underShell,
} from './terminal.js'

const program = await built('tests/e2e/fixtures/program.tsx')
const size = { columns: 60, rows: 14 }

afterEach(closeTerminals)

async function startedUnderShell() {
  const terminal = underShell(scriptCommand(program), size)
  await terminal.sees('keys 0')
  return terminal
}

async function started(env = {}) {
  const terminal = openScript(program, [], { ...size, env })
  await terminal.sees('keys 0')
  return terminal
}

const pidOf = (screen: string): number => Number(/pid (\d+)/.exec(screen)?.[1])

test('takes the alternate screen, hides the cursor and asks for bracketed paste', async () => {
  const terminal = await started()
  expect(terminal.alternate()).toBe(true)
  expect(terminal.cursorVisible()).toBe(false)
  expect(terminal.bracketedPaste()).toBe(true)
})

test.each([
  ['q', 'q', 0, 'left by 0'],
  ['a status of its own', '3', 3, 'left by 3'],
  ['Ctrl-C', keys.ctrlC, 130, 'left by SIGINT'],
  ['process.exit', 'x', 5, 'left by 5'],
  ['a throw in a timer', 't', 70, 'internal error: Error: in a timer'],
  ['a throw in render', 'r', 70, 'internal error: Error: in render'],
  ['a lost rejection', 'p', 70, 'internal error: Error: in a promise'],
  ['SIGTERM', 'SIGTERM', 143, 'left by SIGTERM'],
  ['SIGHUP', 'SIGHUP', 129, 'left by SIGHUP'],
])('%s leaves the screen and ends with its status', async (_way, cause, status, says) => {
  const terminal = await startedUnderShell()
  if (cause === 'SIGTERM' || cause === 'SIGHUP') process.kill(pidOf(terminal.dump()), cause)
  else terminal.send(cause)
  expect(await terminal.ending()).toEqual({ status, settingsRestored: true })
  // said on the normal screen
  expect(terminal.sent().split('\x1b[?1049l')[1]).toContain(says)
  expect(terminal.dump()).not.toContain('keys 0')
  expect(terminal.alternate()).toBe(false)
  expect(terminal.cursorVisible()).toBe(true)
  expect(terminal.bracketedPaste()).toBe(false)
})

test('messages and warnings are kept off the screen and printed after it', async () => {
  const terminal = await startedUnderShell()
  await terminal.keys('w')
  expect(terminal.dump()).not.toContain('stray')
  await terminal.keys('q')
  await terminal.ending()
  expect(terminal.lines().slice(0, 3)).toEqual(['stray 42', 'Warning: careful', 'left by 0'])
})

test('Ctrl-Z gives the terminal back to the shell, and fg draws everything anew', async () => {
  const script = `set -m; ${scriptCommand(program)}; echo "stopped=$?"; read go; fg; echo "ended=$?"; read rest`
  const terminal = openTerminal('/bin/sh', ['-c', script], size)
  await terminal.sees('keys 0')
  await terminal.keys('j')
  terminal.send(keys.ctrlZ)
  // 128 + SIGTSTP (20 on Linux), as the shell counts a stopped job
  await terminal.sees('stopped=148')
  expect(terminal.alternate()).toBe(false)
  expect(terminal.cursorVisible()).toBe(true)
  terminal.send('\r')
  await terminal.sees('keys 1')
  expect(terminal.alternate()).toBe(true)
  await terminal.keys('j')
  await terminal.sees('keys 2')
  terminal.send('q')
  await terminal.sees('ended=0')
})

test('Ctrl-Z where no shell could continue the program comes back by itself', async () => {
  const terminal = await started()
  terminal.send(keys.ctrlZ)
  await terminal.until(() => terminal.sent().split('\x1b[?1049h').length === 3)
  await terminal.keys('j')
  await terminal.sees('keys 1')
  expect(terminal.alternate()).toBe(true)
})

test('a key that changes one cell sends one cell', async () => {
  const terminal = await started()
  await terminal.stable()
  terminal.countBytes()
  await terminal.keys('j')
  expect(terminal.sent().endsWith('\x1b[?2026h\x1b[1;6H1\x1b[?2026l')).toBe(true)
  // begin 8, place 6, digit 1, end 8
  expect(terminal.bytes()).toBe(23)
})

test('a grid lies over the frame with its own colours', async () => {
  const terminal = await started()
  await terminal.keys('o')
  expect(terminal.lines()[3]).toBe('  +-+')
  expect(terminal.cell(2, 3)).toMatchObject({ glyph: '+', foreground: 32, bold: false })
  expect(terminal.cell(4, 3)).toMatchObject({ glyph: '+', foreground: '#e06d00', bold: true })
})

test('after updates larger than the stream takes at once the next ones still come', async () => {
  const terminal = openScript(program, [], { columns: 120, rows: 40 })
  await terminal.sees('keys 0')
  await terminal.keys('b', 'b', 'b', 'j')
  await terminal.sees('keys 1')
  // cell 0 of the third grid: (0 + 3) % 256, 0, 0
  expect(terminal.cell(0, 2)).toMatchObject({ glyph: '#', foreground: '#030000' })
  expect(terminal.bytes()).toBeGreaterThan(3 * 38 * 120)
})

test('a program that was stopped from outside draws everything anew when it goes on', async () => {
  const terminal = await started()
  const pid = pidOf(terminal.dump())
  process.kill(pid, 'SIGSTOP')
  terminal.send('j')
  process.kill(pid, 'SIGCONT')
  await terminal.sees('keys 1')
  await terminal.until(() => terminal.sent().split('\x1b[2J').length === 3)
})

test('a new size is drawn whole', async () => {
  const terminal = await started()
  await terminal.keys('o')
  terminal.resize(50, 8)
  await terminal.sees('50x8')
  await terminal.stable()
  expect(terminal.lines().slice(1)).toEqual(['said []', '', '  +-+', '', '', '', ''])
})

test('bursts in one write reach the text prompt and the pick list whole', async () => {
  const terminal = await started({ CI: '1' })
  terminal.send('/hello\r')
  await terminal.sees('said [hello]')
  terminal.send(`s${keys.down.repeat(3)}\r`)
  await terminal.sees('said [four]')
  terminal.send('/ or\x1b[200~ two\rlines\x1b[201~\r')
  await terminal.sees('said [hello or two lines]')
  terminal.send('j'.repeat(200))
  await terminal.sees('keys 200')
})

test('the ground is asked of the terminal, and a key typed meanwhile is not lost', async () => {
  const terminal = openScript(program, [], { ...size, ground: 'ffff/ffff/ffff' })
  terminal.send('j')
  await terminal.sees('ground light')
  await terminal.sees('keys 1')
})
