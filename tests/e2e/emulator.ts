/** Reading what the terminal emulator shows. */
import type xterm from '@xterm/headless'

export interface CellLook {
  readonly glyph: string
  /** 2 for a wide character, 0 for the cell to its right */
  readonly width: number
  /** '#rrggbb', a number of the 256, or undefined for the terminal's own */
  readonly foreground: string | number | undefined
  readonly background: string | number | undefined
  readonly bold: boolean
  readonly dim: boolean
  readonly inverse: boolean
  readonly underline: boolean
}

export type Emulator = InstanceType<typeof xterm.Terminal>

/** The screen's lines without trailing blanks. */
export function screenLines(emulator: Emulator): string[] {
  const buffer = emulator.buffer.active
  return Array.from(
    { length: emulator.rows },
    (_, y) => buffer.getLine(buffer.viewportY + y)?.translateToString(true) ?? '',
  )
}

export function cellLook(emulator: Emulator, x: number, y: number): CellLook {
  const buffer = emulator.buffer.active
  const cell = buffer.getLine(buffer.viewportY + y)?.getCell(x)
  if (!cell) throw new Error(`no cell at ${x}, ${y}`)
  return {
    glyph: cell.getChars() || ' ',
    width: cell.getWidth(),
    foreground: colour(cell.isFgRGB(), cell.isFgPalette(), cell.getFgColor()),
    background: colour(cell.isBgRGB(), cell.isBgPalette(), cell.getBgColor()),
    bold: cell.isBold() !== 0,
    dim: cell.isDim() !== 0,
    inverse: cell.isInverse() !== 0,
    underline: cell.isUnderline() !== 0,
  }
}

function colour(direct: boolean, indexed: boolean, value: number): string | number | undefined {
  if (direct) return `#${value.toString(16).padStart(6, '0')}`
  return indexed ? value : undefined
}
