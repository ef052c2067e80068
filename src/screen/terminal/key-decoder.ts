/** Bytes from the keyboard → keys and pastes. Pure but for what it keeps of an unfinished sequence. */
import { StringDecoder } from 'node:string_decoder'
import { keyName } from './key-names.js'

export interface Key {
  readonly kind: 'key'
  /** what the terminal sent for it */
  readonly sequence: string
  /** key-names.ts */
  readonly name: string
}

export interface Paste {
  readonly kind: 'paste'
  readonly text: string
}

export interface KeyDecoder {
  push(chunk: Uint8Array | string): (Key | Paste)[]
  /** ms to wait for more before `release`; undefined when nothing is held back */
  holdMs(): number | undefined
  /** what was held back, taken as complete */
  release(): (Key | Paste)[]
}

const pasteStart = '\x1b[200~'
const pasteEnd = '\x1b[201~'
// an old mouse report, a control sequence, a shifted key, or a reply that ends in BEL or ST
const complete =
  /^\x1b(?:\[M[\s\S]{3}|\[(?!M)\[?[0-?]*[ -/]*[@-Z\\-~]|O[ -~]|[\]P_][^\x07\x1b]*(?:\x07|\x1b\\))/
const unfinished = /^\x1b(?:\[\[?[0-?]*[ -/]*|\[M[\s\S]{0,2}|O|[\]P_][^\x07\x1b]*\x1b?)?$/
// a slow link may split a sequence, but nobody waits longer for the Escape key
const escapeMs = 40
const sequenceMs = 400
const pasteMs = 1000

export function keyDecoder(): KeyDecoder {
  const utf8 = new StringDecoder('utf8')
  let held = ''
  let pasting = false

  function decode(): (Key | Paste)[] {
    const strokes: (Key | Paste)[] = []
    while (held !== '') {
      if (pasting) {
        const end = held.indexOf(pasteEnd)
        if (end < 0) break
        strokes.push({ kind: 'paste', text: held.slice(0, end) })
        held = held.slice(end + pasteEnd.length)
        pasting = false
      } else if (held.startsWith(pasteStart)) {
        held = held.slice(pasteStart.length)
        pasting = true
      } else {
        const length = keyLength(held)
        if (length === 0) break
        strokes.push(...key(held.slice(0, length)))
        held = held.slice(length)
      }
    }
    return strokes
  }

  return {
    push(chunk) {
      held += typeof chunk === 'string' ? chunk : utf8.write(chunk)
      return decode()
    },
    holdMs() {
      if (pasting) return pasteMs
      if (held === '') return undefined
      return held === '\x1b' ? escapeMs : sequenceMs
    },
    release() {
      const rest = held
      held = ''
      // a paste without its end is handed on as it is
      if (pasting) {
        pasting = false
        return [{ kind: 'paste', text: rest }]
      }
      // Escape, alone or with one sign after it, was typed; anything longer is half a sequence and dropped
      return rest.length <= 2 ? [...rest].flatMap(key) : []
    },
  }
}

/** Length of the key that the text begins with, 0 while it may go on. */
function keyLength(text: string): number {
  if (!text.startsWith('\x1b')) return String.fromCodePoint(text.codePointAt(0) ?? 0).length
  const sequence = complete.exec(text)
  if (sequence) return sequence[0].length
  // Escape and another key that came in the same read
  return unfinished.test(text) ? 0 : 1
}

function key(sequence: string): Key[] {
  const name = keyName(sequence)
  return name === undefined ? [] : [{ kind: 'key', sequence, name }]
}
