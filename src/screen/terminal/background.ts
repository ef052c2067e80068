/** Is the terminal's ground dark or light? Asked of the terminal, else guessed from COLORFGBG. */
import { Buffer } from 'node:buffer'

export type Background = 'dark' | 'light'

/** Keyboard and screen, already in raw mode. */
export interface QueryInput {
  on(event: 'data', listener: (chunk: Uint8Array | string) => void): unknown
  off(event: 'data', listener: (chunk: Uint8Array | string) => void): unknown
  resume(): unknown
  pause(): unknown
  unshift(chunk: Buffer): void
}
export interface QueryOutput {
  write(text: string): boolean
}

// every terminal answers the second question, so its answer says that none will come to the first
const question = '\x1b]11;?\x07\x1b[c'
const colourReply = /\x1b\]11;(?:rgba?:)?([^\x07\x1b]*)(?:\x07|\x1b\\)/
const attributesReply = /\x1b\[\?[\d;]*c/

/**
 * Asks for the ground's colour (OSC 11, fenced by DA1) and waits `limitMs` at most. Keys typed meanwhile are
 * put back for the next reader; a later answer is dropped by the key pump, which must not run yet.
 */
export function backgroundOf(
  input: QueryInput,
  output: QueryOutput,
  env: Readonly<Record<string, string | undefined>>,
  limitMs = 150,
): Promise<Background | undefined> {
  return new Promise((resolve) => {
    // bytes as Latin-1, so that half a UTF-8 character is put back as it was
    let received = ''
    const receive = (chunk: Uint8Array | string) => {
      received += Buffer.from(chunk).toString('latin1')
      if (attributesReply.test(received)) finish()
    }
    const finish = () => {
      clearTimeout(timer)
      input.off('data', receive)
      input.pause()
      const typed = received.replace(colourReply, '').replace(attributesReply, '')
      if (typed !== '') input.unshift(Buffer.from(typed, 'latin1'))
      resolve(groundOfColour(colourReply.exec(received)?.[1] ?? '') ?? groundFromEnvironment(env.COLORFGBG))
    }
    const timer = setTimeout(finish, limitMs)
    input.on('data', receive)
    input.resume()
    output.write(question)
  })
}

/** 'ffff/8080/0000' or '#ff8000': light where black reads better on it than white (WCAG 2.2 relative luminance). */
export function groundOfColour(colour: string): Background | undefined {
  const parts = colour.startsWith('#') ? hexParts(colour.slice(1)) : colour.split('/')
  const [red, green, blue] = parts.map((part) => Number.parseInt(part, 16) / (16 ** part.length - 1))
  const luminance = 0.2126 * linear(red) + 0.7152 * linear(green) + 0.0722 * linear(blue)
  if (Number.isNaN(luminance)) return undefined
  // (L + 0.05)² = 1.05 · 0.05 is where the contrasts with white and with black are equal
  return luminance > Math.sqrt(1.05 * 0.05) - 0.05 ? 'light' : 'dark'
}

const hexParts = (digits: string): string[] =>
  [0, 1, 2].map((i) => digits.slice((i * digits.length) / 3, ((i + 1) * digits.length) / 3))

const linear = (part = Number.NaN): number =>
  part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4

/** COLORFGBG is 'foreground;background' in numbers of the 16 colours, as rxvt and Konsole set it. */
function groundFromEnvironment(colours: string | undefined): Background | undefined {
  const ground = /;(\d+)$/.exec(colours ?? '')?.[1]
  if (ground === undefined || Number(ground) > 15) return undefined
  return ground === '7' || Number(ground) > 8 ? 'light' : 'dark'
}
