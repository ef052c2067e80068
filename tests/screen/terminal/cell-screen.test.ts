/** Updates as literal text, and agreement with a terminal emulator on random ones. */
import xterm from '@xterm/headless'
import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { cellScreen } from '../../../src/screen/terminal/cell-screen.js'

const clear = '\x1b[m\x1b[2J'

/** A screen of 10 × 3 that shows this frame already. */
function showing(frame: string) {
  const screen = cellScreen()
  screen.update(frame, 10, 3)
  return { ...screen, next: (text: string) => screen.update(text, 10, 3) }
}

describe('an update', () => {
  test('is the whole screen at first, blanks left out', () => {
    expect(cellScreen().update('ab\n\n c', 10, 3)).toBe(`${clear}\x1b[1;1Hab\x1b[3;2Hc`)
  })

  test('is empty when nothing changed', () => {
    expect(showing('ab\ncd').next('ab\ncd')).toBe('')
  })

  test('of one changed cell is that cell', () => {
    expect(showing('ab\ncd').next('ab\ncX')).toBe('\x1b[2;2HX')
  })

  test('joins neighbours to runs, repeats up to three unchanged cells and moves over more', () => {
    expect(showing('abcdefghij').next('ABcdeFghij')).toBe('\x1b[1;1HABcdeF')
    expect(showing('abcdefghij').next('AbcdeFghij')).toBe('\x1b[1;1HA\x1b[4CF')
  })

  test('blanks what is gone', () => {
    expect(showing('abc').next('a')).toBe('\x1b[1;2H  ')
  })

  test('changes the pen once per run and only by what differs', () => {
    const red = '\x1b[31mab\x1b[39m'
    expect(showing('').next(red)).toBe('\x1b[1;1H\x1b[31mab\x1b[m')
    expect(showing('').next('\x1b[31ma\x1b[1mb\x1b[22mc')).toBe('\x1b[1;1H\x1b[31ma\x1b[1mb\x1b[0;31mc\x1b[m')
  })

  test('sees that only the style changed', () => {
    expect(showing('ab').next('a\x1b[38;5;32mb')).toBe('\x1b[1;2H\x1b[38;5;32mb\x1b[m')
    expect(showing('a\x1b[48;2;1;2;3mb').next('a\x1b[48;2;1;2;3mb')).toBe('')
  })

  test('is whole again for another size and after being told to forget', () => {
    const screen = showing('ab')
    expect(screen.update('ab', 9, 3)).toBe(`${clear}\x1b[1;1Hab`)
    screen.forget()
    expect(screen.update('ab', 9, 3)).toBe(`${clear}\x1b[1;1Hab`)
  })

  test('cuts lines and rows that do not fit', () => {
    expect(cellScreen().update('abcdef\ng\nh', 4, 2)).toBe(`${clear}\x1b[1;1Habcd\x1b[2;1Hg`)
  })

  test('lets no command but colours through', () => {
    expect(cellScreen().update('a\x1b[2Jb\x1b]0;title\x07c\x9b3Jd\x07\x1b[5;5He\x1bcf', 20, 1)).toBe(
      `${clear}\x1b[1;1Habc3Jdef`,
    )
  })
})

describe('wide characters', () => {
  test('take two cells, and the place after one is said anew', () => {
    expect(cellScreen().update('a界b', 10, 1)).toBe(`${clear}\x1b[1;1Ha界\x1b[1;4Hb`)
  })

  test('are left out where only half would fit', () => {
    expect(cellScreen().update('abc界', 4, 1)).toBe(`${clear}\x1b[1;1Habc`)
  })

  test('are written over whole', () => {
    expect(showing('a界b').next('axyb')).toBe('\x1b[1;2Hxy')
    expect(showing('axyb').next('a界b')).toBe('\x1b[1;2H界')
  })

  test('combining marks stay with their letter', () => {
    expect(showing('').next('e\u0301x')).toBe('\x1b[1;1He\u0301\x1b[1;2Hx')
  })
})

describe('a grid', () => {
  const grid = { x: 1, y: 0, width: 2, height: 2, glyphs: ['+', '-', '|', '#'], styles: ['', '', '', '31'] }

  test('lies over the frame', () => {
    const screen = cellScreen()
    screen.setOverlay('map', grid)
    expect(screen.update('abcd\nefgh', 4, 2)).toBe(`${clear}\x1b[1;1Ha+-d\x1b[2;1He|\x1b[31m#\x1b[mh`)
  })

  test('shows the frame again when it is taken away', () => {
    const screen = showing('abcd\nefgh')
    screen.setOverlay('map', grid)
    screen.next('abcd\nefgh')
    screen.setOverlay('map', undefined)
    expect(screen.next('abcd\nefgh')).toBe('\x1b[1;2Hbc\x1b[2;2Hfg')
  })

  test('leaves its holes to the frame and is cut at the edges', () => {
    const screen = cellScreen()
    screen.setOverlay('map', { ...grid, x: -1, y: 1, holes: [{ x: 0, y: 2, width: 1, height: 1 }] })
    expect(screen.update('ab\ncd\nef', 2, 3)).toBe(`${clear}\x1b[1;1Hab\x1b[2;1H-d\x1b[3;1Hef`)
  })

  test('blanks the other half of a wide character that it covers', () => {
    const screen = cellScreen()
    screen.setOverlay('map', { x: 1, y: 0, width: 2, height: 1, glyphs: ['+', '+'], styles: [] })
    expect(screen.update('界界z', 6, 1)).toBe(`${clear}\x1b[1;2H++ z`)
  })
})

test('after any row of updates an emulator shows what one whole drawing would show', async () => {
  const piece = fc.constantFrom(
    'a',
    'b',
    ' ',
    '界',
    '─',
    'e\u0301',
    '\n',
    '\x1b[31m',
    '\x1b[1;48;5;20m',
    '\x1b[0m',
    '\x1b[22m',
  )
  const frame = fc.array(piece, { maxLength: 40 }).map((pieces) => pieces.join(''))
  const corner = fc.integer({ min: -2, max: 9 })
  const grid = fc.record({
    x: corner,
    y: fc.integer({ min: -1, max: 3 }),
    size: fc.integer({ min: 1, max: 4 }),
  })
  const step = fc.record({ frame, grid: fc.option(grid, { nil: undefined }) })
  await fc.assert(
    fc.asyncProperty(fc.array(step, { minLength: 1, maxLength: 6 }), async (steps) => {
      const screen = cellScreen()
      let updates = ''
      for (const { frame, grid } of steps) {
        screen.setOverlay('grid', grid && squareOf(grid.x, grid.y, grid.size))
        updates += screen.update(frame, 10, 3)
      }
      screen.forget()
      const whole = screen.update(steps.at(-1)!.frame, 10, 3)
      expect(await shown(updates)).toEqual(await shown(whole))
    }),
    { numRuns: 150, seed: 7 },
  )
})

const squareOf = (x: number, y: number, size: number) => ({
  x,
  y,
  width: size,
  height: size,
  glyphs: Array.from({ length: size * size }, (_, i) => '#+'[i % 2]!),
  styles: Array.from({ length: size * size }, (_, i) => ['', '7', '38;5;99'][i % 3]!),
})

/** Glyph and looks of every cell after an emulator of 10 × 3 drew this. */
async function shown(text: string): Promise<string[]> {
  const emulator = new xterm.Terminal({ cols: 10, rows: 3, allowProposedApi: true, logLevel: 'off' })
  await new Promise<void>((resolve) => emulator.write(text, resolve))
  const cells = [0, 1, 2].flatMap((y) =>
    Array.from({ length: 10 }, (_, x) => {
      const cell = emulator.buffer.active.getLine(y)!.getCell(x)!
      const looks = [
        cell.getFgColorMode(),
        cell.getFgColor(),
        cell.getBgColor(),
        cell.isBold(),
        cell.isInverse(),
      ]
      return `${cell.getChars() || (cell.getWidth() > 0 ? ' ' : '')} ${looks.join()}`
    }),
  )
  emulator.dispose()
  return cells
}
