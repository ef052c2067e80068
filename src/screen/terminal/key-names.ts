/**
 * Names of keys: 'up', 'enter', 'shift-tab', 'ctrl-c', 'f1'; a letter, digit or sign is its own name ('j', 'J', ' ').
 * Sequences as xterm, rxvt, the Linux console and PuTTY send them.
 */
const byFinalByte: Readonly<Record<string, string>> = {
  A: 'up',
  B: 'down',
  C: 'right',
  D: 'left',
  F: 'end',
  H: 'home',
  P: 'f1',
  Q: 'f2',
  R: 'f3',
  S: 'f4',
}

const byNumber: Readonly<Record<string, string>> = {
  1: 'home',
  2: 'insert',
  3: 'delete',
  4: 'end',
  5: 'pageup',
  6: 'pagedown',
  7: 'home',
  8: 'end',
  11: 'f1',
  12: 'f2',
  13: 'f3',
  14: 'f4',
  15: 'f5',
  17: 'f6',
  18: 'f7',
  19: 'f8',
  20: 'f9',
  21: 'f10',
  23: 'f11',
  24: 'f12',
}

const byText: Readonly<Record<string, string>> = {
  '\r': 'enter',
  '\n': 'enter',
  '\t': 'tab',
  '\x1b': 'escape',
  '\x7f': 'backspace',
  '\b': 'backspace',
  '\0': 'ctrl-space',
  '\x1b[Z': 'shift-tab',
}

/** The name of one decoded key; undefined for what is no key (replies and reports of the terminal). */
export function keyName(sequence: string): string | undefined {
  const named = byText[sequence]
  if (named) return named
  if (sequence.startsWith('\x1b')) return nameOfSequence(sequence)
  const code = sequence.codePointAt(0) ?? 0
  if (code <= 0x1a) return `ctrl-${String.fromCharCode(code + 0x60)}`
  return code < 0x20 || (code >= 0x7f && code < 0xa0) ? undefined : sequence
}

function nameOfSequence(sequence: string): string | undefined {
  // the Linux console's function keys
  const console = /^\x1b\[\[([A-E])$/.exec(sequence)
  if (console) return `f${console[1]!.charCodeAt(0) - 0x40}`
  // with a row before its R this is a report of the cursor's place, not F3
  const letter = /^\x1b(?:O|\[(?:1;(\d+))?)([A-DFHP-S])$/.exec(sequence)
  if (letter && !(letter[1] && letter[2] === 'R')) return withModifiers(letter[1], byFinalByte[letter[2]!])
  const number = /^\x1b\[(\d+)(?:;(\d+))?~$/.exec(sequence)
  return number ? withModifiers(number[2], byNumber[number[1]!]) : undefined
}

// xterm adds 1 for shift, 2 for alt, 4 for ctrl to a count that starts at 1
function withModifiers(count: string | undefined, name: string | undefined): string | undefined {
  const held = count ? Number(count) - 1 : 0
  if (!name) return undefined
  return `${held & 4 ? 'ctrl-' : ''}${held & 2 ? 'alt-' : ''}${held & 1 ? 'shift-' : ''}${name}`
}
