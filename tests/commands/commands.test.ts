/** Arguments, exit statuses and streams of the commands, on the program as it is bundled. */
import { type SpawnSyncReturns, spawnSync } from 'node:child_process'
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest'
import { built } from '../e2e/terminal.js'
import { twoBars } from '../report/signs.js'

// a machine that does other things at the same time is slow
vi.setConfig({ testTimeout: 30_000 })

const folder = mkdtempSync(join(tmpdir(), 'tubewright-commands-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))
let program = ''
beforeAll(async () => {
  program = await built('src/cli.ts')
  const files: Record<string, string> = {
    'good.yaml': twoBars(),
    'close.yaml': twoBars({ gap: 3 }),
    'dark.yaml': twoBars({ noLoadKv: 1 }),
    'bad.yaml': twoBars().replace('fill: neon', 'fill: noen'),
    '--json': twoBars(),
  }
  mkdirSync(join(folder, 'sub'))
  for (const [name, text] of Object.entries(files)) writeFileSync(join(folder, name), text)
}, 30_000)

const run = (...args: string[]): SpawnSyncReturns<string> =>
  spawnSync(process.execPath, [program, ...args], {
    cwd: folder,
    encoding: 'utf8',
    maxBuffer: 1e8,
    timeout: 20_000,
  })

describe('check', () => {
  test('0 where there is nothing to fix: the findings on stdout, nothing on stderr, no colours in a pipe', () => {
    const { status, stdout, stderr } = run('check', 'good.yaml')
    expect({ status, stderr }).toEqual({ status: 0, stderr: '' })
    expect(stdout.startsWith('Two bars (good.yaml)\n')).toBe(true)
    expect(stdout).not.toContain('\x1b')
    expect(stdout).not.toContain('SUMMARY')
  })

  test.each(['close.yaml', 'dark.yaml'])('1 where there is something to fix: %s', (name) => {
    const { status, stdout, stderr } = run('check', name)
    expect({ status, stderr }).toEqual({ status: 1, stderr: '' })
    expect(stdout).toMatch(/^PAIRS {2}\d/m)
  })

  test('--air says which reading starts of discharges go by', () => {
    expect(run('check', 'good.yaml').stdout).toContain('Air: cautious reading.')
    expect(run('check', 'good.yaml', '--air', 'clean').stdout).toContain('Air: likeliest')
    expect(run('check', 'good.yaml', '--air', 'clean', '--why', '1').stdout).toContain('(the likeliest')
    expect(JSON.parse(run('check', 'good.yaml', '--air', 'clean', '--json').stdout)).toMatchObject({
      air: 'clean',
    })
  })

  test('1 with a rule set that is missing', () => {
    expect(run('check', 'good.yaml', '--rules', 'common-practice,no-such-set').status).toBe(1)
  })

  test.each([
    [['check'], 'check needs a layout file'],
    [['check', 'good.yaml', '--condition', 'wet'], '--condition wet: expected lit, nameplate, broken'],
    [['check', 'good.yaml', '--jsonn'], "Unknown option '--jsonn'"],
    [['check', 'good.yaml', '--air', 'foul'], '--air foul: expected clean, cautious'],
    [['good.yaml', '--air', 'foul'], '--air foul: expected clean, cautious'],
    [['check', 'good.yaml', '--condition'], "Option '--condition <value>' argument missing"],
    [['check', 'good.yaml', '--why', '0'], '--why "0" is not a number of the list of pairs, from 1 on'],
    [['check', 'good.yaml', '--why', '1.5'], '--why "1.5" is not a number of the list of pairs, from 1 on'],
    [['check', 'good.yaml', '--why', '999'], '--why 999: the pairs of good.yaml are numbered 1 to '],
    [['check', 'good.yaml', '--why', '1', '--json'], '--why does not go with --json'],
    [['check', 'good.yaml', '--why', '1', '--symptom', 'hum'], '--why does not go with --symptom'],
    [['check', 'good.yaml', 'close.yaml', '--why', '1'], '--why takes one layout; 2 were named'],
    [
      ['check', 'good.yaml', '--symptom', 'smoke'],
      'there is no symptom "smoke"; expected hum, ozone, dark-spot, dim-far-tube, dark-tube, tripping, radio-noise or list',
    ],
    [['--colour'], "Unknown option '--colour'"],
    [['good.yaml', 'close.yaml'], 'one layout at a time; 2 were named'],
    [['netlist'], 'netlist needs a layout file'],
    [['netlist', 'good.yaml', 'close.yaml'], 'netlist takes one layout; 2 were named'],
    [['netlist', 'good.yaml', '--supply', 'S2'], 'no circuit has the supply "S2"; expected S1'],
  ])('2 for %j, with a word on what is wrong', (args, words) => {
    const { status, stdout, stderr } = run(...args)
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' })
    expect(stderr).toContain(`tubewright: ${words}`)
    expect(stderr).toContain('Try: tubewright --help')
    expect(stderr).not.toContain('    at ')
  })

  test('2 where the inspector has no terminal', () => {
    const { status, stdout, stderr } = run('good.yaml')
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' })
    expect(stderr).toContain('The inspector needs a terminal')
  })

  test.each([
    ['none.yaml', 'none.yaml: cannot be read: there is no such file\n'],
    ['sub', 'sub: cannot be read: it is a folder\n'],
  ])('3 for %s', (name, words) => {
    const { status, stdout, stderr } = run('check', name)
    expect({ status, stdout, stderr }).toEqual({ status: 3, stdout: '', stderr: words })
  })

  test('3 for a file with problems: all of them on stderr, with place and caret', () => {
    const { status, stdout, stderr } = run('check', 'bad.yaml')
    expect({ status, stdout }).toEqual({ status: 3, stdout: '' })
    expect(stderr).toBe(
      `bad.yaml:7:57: fill is the text "noen", did you mean "neon"?
  tube: {diameter: 12, wall: 1, glass: soda-lime, fill: noen, height: 60, boots: true}
                                                        ^

bad.yaml: 1 problem; the layout is not used
`,
    )
  })

  test('--why derives the pair of that number, and ends as check does', () => {
    const { status, stdout, stderr } = run('check', 'close.yaml', '--why', '1')
    expect({ status, stderr }).toEqual({ status: 1, stderr: '' })
    expect(stdout).toMatch(/^Two bars \(close\.yaml\)\n/)
    expect(stdout).toContain('\nWhy K at 0.0 mm to I at 800 mm: gap 3.0 mm\n')
    expect(stdout).toContain('\nVerdict\n  - FIX')
    expect(run('check', 'good.yaml', '--why', '1').status).toBe(0)
    const second = run('check', 'close.yaml')
      .stdout.split('\n')
      .find((line) => /^ +2 {2}/.test(line))
    const [, from] = /^ +2 {2}\w+\?? +(\S+) @/.exec(second ?? '') ?? []
    expect(from).toBeDefined()
    expect(run('check', 'close.yaml', '--why', '2').stdout).toMatch(new RegExp(`\\nWhy (lead )?${from} at`))
  })

  test('--symptom says what to look at; list lists the names', () => {
    const { status, stdout, stderr } = run('check', 'close.yaml', '--symptom', 'dim far tube')
    expect({ status, stderr }).toEqual({ status: 1, stderr: '' })
    expect(stdout).toContain('\nSymptom: dim far tube.')
    expect(stdout).toContain('\nWhat this program cannot see\n')
    const { status: fine, stdout: names } = run('check', '--symptom', 'list')
    expect(fine).toBe(0)
    expect(names.split('\n').map((line) => line.split(' ')[0])).toEqual([
      'hum',
      'ozone',
      'dark-spot',
      'dim-far-tube',
      'dark-tube',
      'tripping',
      'radio-noise',
      '',
    ])
  })

  test('several files: each is checked, one line for each at the end, the worst status', () => {
    const { status, stdout, stderr } = run('check', 'good.yaml', 'bad.yaml', 'close.yaml')
    expect(status).toBe(3)
    expect(stderr).toContain('bad.yaml: 1 problem; the layout is not used')
    expect(stdout).toContain('Two bars (good.yaml)')
    expect(stdout).toContain('\n\nTwo bars (close.yaml)')
    expect(stdout.slice(stdout.indexOf('SUMMARY'))).toBe(
      [
        'SUMMARY',
        '  within    good.yaml   0 pairs to fix, 0 to watch  S1 load 26 %',
        '  unusable  bad.yaml',
        '  fix       close.yaml  1 pair to fix, 0 to watch   S1 load 26 %',
        '',
      ].join('\n'),
    )
    expect(run('check', 'good.yaml', 'close.yaml').status).toBe(1)
    expect(run('check', 'good.yaml', 'good.yaml').status).toBe(0)
  })

  test('--json: one object a line for each file that can be used, and nothing else', () => {
    const { status, stdout } = run('check', '--json', 'good.yaml', 'none.yaml', 'close.yaml')
    expect(status).toBe(3)
    const objects = stdout
      .trimEnd()
      .split('\n')
      .map((line) => JSON.parse(line))
    expect(objects.map((o) => [o.result, o.file])).toEqual([
      [1, 'good.yaml'],
      [1, 'close.yaml'],
    ])
  })

  test('behind "--" everything is a file, even what looks like an option', () => {
    const { status, stdout } = run('check', '--', '--json')
    expect(status).toBe(0)
    expect(stdout.startsWith('Two bars (--json)\n')).toBe(true)
    expect(run('check', '--', '--help').stderr).toBe('--help: cannot be read: there is no such file\n')
  })
})

describe('netlist', () => {
  test('0: the deck on stdout', () => {
    const { status, stdout, stderr } = run('netlist', 'good.yaml')
    expect({ status, stderr }).toEqual({ status: 0, stderr: '' })
    expect(stdout.startsWith('* Two bars (good.yaml), lit, fed by S1: ')).toBe(true)
    expect(stdout.endsWith('.end\n')).toBe(true)
    expect(run('netlist', 'good.yaml', '--supply', 'S1').stdout).toBe(stdout)
  })

  test('1 and nothing on stdout where the circuit is not lit', () => {
    const { status, stdout, stderr } = run('netlist', 'dark.yaml')
    expect({ status, stdout }).toEqual({ status: 1, stdout: '' })
    expect(stderr).toBe('S1: not lit, dark: K, I.\nS1: no lit solution, so there is no deck to write.\n')
  })

  test('3 for a layout that cannot be used', () => {
    expect(run('netlist', 'bad.yaml').status).toBe(3)
    expect(run('netlist', 'none.yaml').status).toBe(3)
  })
})

describe('a reader that closes early', () => {
  test.each(['check --all', 'netlist'])('is no fault of %s', (command) => {
    const line = `{ '${process.execPath}' '${program}' ${command} close.yaml; echo "status $?" >&2; } | head -c 20`
    const { stderr } = spawnSync('/bin/sh', ['-c', line], { cwd: folder, encoding: 'utf8', timeout: 20_000 })
    expect(stderr).toMatch(/^status [01]\n$/)
  })
})

test('--help and --version, wherever they stand', () => {
  const help = run('--help')
  expect({ status: help.status, stderr: help.stderr }).toEqual({ status: 0, stderr: '' })
  expect(help.stdout).toContain('tubewright netlist LAYOUT [--supply ID]')
  expect(run('check', 'good.yaml', '--help').stdout).toBe(help.stdout)
})
