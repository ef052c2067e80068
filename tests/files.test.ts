import {
  chmodSync,
  lstatSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, test } from 'vitest'
import { type LayoutFile, readLayoutFile, saveSign } from '../src/files.js'
import type { Sign } from '../src/wiring/edit.js'
import { turnTube } from '../src/wiring/edits.js'
import { withTubeHeight } from '../src/wiring/figure-edits.js'
import { kiosk } from './layout/kiosk.js'

let folder = ''
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'tubewright-files-'))
})
afterEach(() => rmSync(folder, { recursive: true, force: true }))

function written(text: string | Uint8Array, name = 'sign.yaml'): string {
  const path = join(folder, name)
  writeFileSync(path, text)
  return path
}
function opened(path: string): LayoutFile {
  const read = readLayoutFile(path)
  if (!read.ok) throw new Error(read.complaint)
  return read.file
}
const signOf = ({ layout }: LayoutFile): Sign => ({ layout, wiring: layout.wiring })
function turned(sign: Sign): Sign {
  const edit = turnTube(sign.wiring, 'K')
  if (!edit.ok) throw new Error('refused')
  return { ...sign, wiring: edit.value }
}
/** turns K and saves */
function save(path: string, force = false, file = opened(path)) {
  return saveSign(path, file.source, signOf(file), turned(signOf(file)), force)
}
const turnedText = kiosk.replace('string: [K, I, -O, S]', 'string: [-K, I, -O, S]')
const complaint = (path: string): string => {
  const read = readLayoutFile(path)
  return read.ok ? 'read' : read.complaint.replaceAll(`${folder}/`, '')
}

describe('reading', () => {
  test('a file that cannot be used says why, in one sentence with its name', () => {
    expect(complaint(join(folder, 'none.yaml'))).toBe('none.yaml: cannot be read: there is no such file')
    expect(complaint(join(folder, 'none', 'x.yaml'))).toBe(
      'none/x.yaml: cannot be read: there is no such file',
    )
    mkdirSync(join(folder, 'sub'))
    expect(complaint(join(folder, 'sub'))).toBe('sub: cannot be read: it is a folder')
    symlinkSync('loop', join(folder, 'loop'))
    expect(complaint(join(folder, 'loop'))).toBe('loop: cannot be read: its links go round in a circle')
    expect(complaint(written(`# ${'x'.repeat(5_000_000)}\n`))).toBe(
      'sign.yaml: 5.0 MB is too large for a layout; at most 5 MB are read',
    )
  })

  test('bytes that are no UTF-8 are refused: saving could not give them back', () => {
    const latin = Buffer.from(kiosk.replace('format number', 'Türe'), 'latin1')
    expect(complaint(written(latin))).toBe(
      'sign.yaml: is not UTF-8 text, expected a layout in YAML; save it as UTF-8',
    )
    expect(complaint(written(Buffer.from(`\ufeff${kiosk}`, 'utf16le')))).toContain('is not UTF-8 text')
  })

  test('problems come all at once, each with its place, and a count', () => {
    const text = complaint(
      written(kiosk.replace('fill: argon-mercury', 'fill: noen').replace('wall: 1,', 'wall: -1,')),
    )
    expect(text).toContain('sign.yaml:7:30: wall is -1 mm')
    expect(text).toContain('fill is the text "noen", did you mean "neon"?')
    expect(text.split('\n').at(-1)).toBe('sign.yaml: 2 problems; the layout is not used')
  })

  test('a name cannot act on the terminal', () => {
    expect(complaint(join(folder, '\x1b[2Jx.yaml'))).toBe(
      '\\x1b[2Jx.yaml: cannot be read: there is no such file',
    )
  })
})

describe('saving', () => {
  test('writes the edit, gives back the new text, and leaves nothing else in the folder', () => {
    const path = written(kiosk)
    expect(save(path)).toEqual({ ok: true, source: turnedText })
    expect(readFileSync(path, 'utf8')).toBe(turnedText)
    expect(readdirSync(folder)).toEqual(['sign.yaml'])
  })

  test('again and again, each time from what was written last', () => {
    const path = written(`\ufeff${kiosk.replaceAll('\n', '\r\n')}`)
    const before = readFileSync(path)
    expect(save(path).ok).toBe(true)
    expect(readFileSync(path).equals(before)).toBe(false)
    expect(save(path).ok).toBe(true)
    expect(readFileSync(path).equals(before)).toBe(true)
  })

  test('keeps the mode of the file', () => {
    const path = written(kiosk)
    for (const mode of [0o600, 0o664, 0o640]) {
      chmodSync(path, mode)
      expect(save(path).ok).toBe(true)
      expect(statSync(path).mode & 0o7777).toBe(mode)
    }
  })

  test('a link stays a link, and the file behind it is written', () => {
    mkdirSync(join(folder, 'job'))
    const target = written(kiosk, 'job/real.yaml')
    const link = join(folder, 'link.yaml')
    symlinkSync('job/real.yaml', link)
    expect(save(link).ok).toBe(true)
    expect(lstatSync(link).isSymbolicLink()).toBe(true)
    expect(readFileSync(target, 'utf8')).toBe(turnedText)
    expect(readdirSync(join(folder, 'job'))).toEqual(['real.yaml'])
  })

  test('a name as long as names can be', () => {
    const path = written(kiosk, `${'n'.repeat(250)}.yaml`)
    expect(save(path).ok).toBe(true)
  })

  test('refuses a file that changed on disk, in words, and overwrites it when told to', () => {
    const path = written(kiosk)
    const file = opened(path)
    const theirs = kiosk.replace('Harbour Kiosk', 'Harbour Cafe')
    writeFileSync(path, theirs)
    expect(save(path, false, file)).toEqual({
      ok: false,
      why: 'The file changed on disk since it was read.',
      changedOnDisk: true,
    })
    expect(readFileSync(path, 'utf8')).toBe(theirs)
    expect(save(path, true, file).ok).toBe(true)
    expect(readFileSync(path, 'utf8')).toBe(turnedText)
  })

  test('refuses where the file is gone, and writes it anew when told to', () => {
    const path = written(kiosk)
    const file = opened(path)
    rmSync(path)
    expect(save(path, false, file)).toEqual({
      ok: false,
      why: 'The file is no longer where it was read from.',
      changedOnDisk: true,
    })
    expect(readdirSync(folder)).toEqual([])
    expect(save(path, true, file).ok).toBe(true)
    expect(readFileSync(path, 'utf8')).toBe(turnedText)
  })

  test('what a crash left behind is no obstacle', () => {
    const path = written(kiosk)
    written('half a file', `.tubewright-${process.pid}.new`)
    expect(save(path).ok).toBe(true)
    expect(readdirSync(folder)).toEqual(['sign.yaml'])
  })

  test('an edit behind an alias is refused, and the file stays as it is', () => {
    const text = kiosk
      .replace('height: 35   ', 'height: &h 35')
      .replace('height: 35', 'height: &h 35')
      .replace('boots: true', 'boots: true\n  - {id: X, path: [[0, 350], [90, 350]], height: *h}')
      .replace('[K, I, -O, S]', '[K, I, -O, S, X]')
      .replace('[-O, S, K, I]', '[-O, S, K, I, X]')
    const path = written(text)
    const file = opened(path)
    const sign = signOf(file)
    const lifted = withTubeHeight(sign.layout, 'I', 0.05)
    if (!lifted.ok) throw new Error('refused')
    const saved = saveSign(path, file.source, sign, { ...sign, layout: lifted.value }, false)
    expect(saved).toMatchObject({ ok: false, changedOnDisk: false })
    expect(saved.ok || saved.why).toContain('as it stands (does it use anchors or aliases?)')
    expect(readFileSync(path, 'utf8')).toBe(text)
  })

  test('an edit that would not be read back is refused with the first thing that would be wrong', () => {
    const path = written(kiosk)
    const file = opened(path)
    const sign = signOf(file)
    const tubes = sign.layout.tubes.map((tube) => (tube.id === 'I' ? { ...tube, height: 1e9 } : tube))
    const saved = saveSign(path, file.source, sign, { ...sign, layout: { ...sign.layout, tubes } }, false)
    const line = 1 + kiosk.split('\n').findIndex((row) => row.includes('height: 35'))
    expect(saved.ok || saved.why).toMatch(
      new RegExp(
        `\\(line ${line} would not be read back: height is 1.* mm, .*\\)\\. Nothing was written\\.$`,
      ),
    )
    expect(readFileSync(path, 'utf8')).toBe(kiosk)
  })

  describe('without the right to', () => {
    // the superuser may write anywhere: such a test run steps down to nobody for as long as it saves
    function asNobody<T>(act: () => T): T {
      if (process.geteuid?.() !== 0) return act()
      process.seteuid?.(65534)
      try {
        return act()
      } finally {
        process.seteuid?.(0)
      }
    }

    test('in a folder that is read-only says so and leaves all as it was', () => {
      const path = written(kiosk)
      chmodSync(path, 0o666)
      chmodSync(folder, 0o555)
      try {
        expect(asNobody(() => save(path))).toEqual({
          ok: false,
          why: 'Not saved: no permission. Your work is still here.',
          changedOnDisk: false,
        })
      } finally {
        chmodSync(folder, 0o755)
      }
      expect(readdirSync(folder)).toEqual(['sign.yaml'])
      expect(readFileSync(path, 'utf8')).toBe(kiosk)
    })

    test('a file that is read-only is not replaced by one that can be written', () => {
      const path = written(kiosk)
      chmodSync(path, 0o444)
      chmodSync(folder, 0o777)
      expect(asNobody(() => save(path))).toMatchObject({
        ok: false,
        why: 'Not saved: no permission. Your work is still here.',
      })
      expect(readFileSync(path, 'utf8')).toBe(kiosk)
    })
  })
})
