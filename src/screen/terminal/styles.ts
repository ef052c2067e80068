/**
 * Styles of cells as small numbers. A style is what SGR codes leave switched on; 0 is the terminal's default.
 * Known limit: numbers are never given back, which is fine for the few hundred styles of a screen.
 */
export interface StyleTable {
  /** the style that SGR `parameters` ("1;38;5;32") make of style `from` */
  after(from: number, parameters: string): number
  /** the escape code that takes the pen from one style to another, '' if they are the same */
  change(from: number, to: number): string
}

// what each slot of a style holds: the code that is on, or ''
const bold = 0
const dim = 1
const italic = 2
const underline = 3
const inverse = 4
const strike = 5
const foreground = 6
const background = 7
const plain: readonly string[] = ['', '', '', '', '', '', '', '']

// code → [slots it touches, what it leaves in them]
const switches = new Map<number, readonly [slots: readonly number[], left: string]>([
  [1, [[bold], '1']],
  [2, [[dim], '2']],
  [3, [[italic], '3']],
  [4, [[underline], '4']],
  [7, [[inverse], '7']],
  [9, [[strike], '9']],
  [21, [[underline], '4']],
  [22, [[bold, dim], '']],
  [23, [[italic], '']],
  [24, [[underline], '']],
  [27, [[inverse], '']],
  [29, [[strike], '']],
  [39, [[foreground], '']],
  [49, [[background], '']],
])

export function styleTable(): StyleTable {
  const styles = [plain]
  const numbers = new Map([[plain.join(), 0]])
  // both caches are indexed by the style one comes from
  const afters: Map<string, number>[] = [new Map()]
  const changes: Map<number, string>[] = [new Map()]

  function numberOf(style: readonly string[]): number {
    const key = style.join()
    const known = numbers.get(key)
    if (known !== undefined) return known
    numbers.set(key, styles.length)
    afters.push(new Map())
    changes.push(new Map())
    return styles.push(style) - 1
  }
  return {
    after: (from, parameters) =>
      remembered(afters[from]!, parameters, () => numberOf(restyled(styles[from]!, parameters))),
    change: (from, to) => remembered(changes[from]!, to, () => penChange(styles[from]!, styles[to]!)),
  }
}

function remembered<Key, Value>(cache: Map<Key, Value>, key: Key, make: () => Value): Value {
  const known = cache.get(key)
  if (known !== undefined) return known
  const made = make()
  cache.set(key, made)
  return made
}

function restyled(style: readonly string[], parameters: string): readonly string[] {
  const slots = [...style]
  const codes = parameters.split(';')
  for (let i = 0; i < codes.length; ) {
    const length = codeLength(codes, i)
    apply(slots, codes.slice(i, i + length).join(';'))
    i += length
  }
  return slots
}

// 38, 48 and 58 bring their colour along: 38;5;n or 38;2;r;g;b
function codeLength(codes: readonly string[], i: number): number {
  if (!/^[345]8$/.test(codes[i]!)) return 1
  return codes[i + 1] === '2' ? 5 : 3
}

function apply(slots: string[], code: string): void {
  const first = Number.parseInt(code, 10) || 0
  const change = switches.get(first)
  if (first === 0) slots.fill('')
  else if (change) for (const slot of change[0]) slots[slot] = change[1]
  else if ((first >= 30 && first <= 38) || (first >= 90 && first <= 97)) slots[foreground] = code
  else if ((first >= 40 && first <= 48) || (first >= 100 && first <= 107)) slots[background] = code
}

function penChange(from: readonly string[], to: readonly string[]): string {
  // what must go off needs a reset, and after a reset everything is said again
  const reset = from.some((code, slot) => code !== '' && to[slot] === '')
  const codes = to.filter((code, slot) => code !== '' && (reset || code !== from[slot]))
  if (!reset && codes.length === 0) return ''
  return `\x1b[${reset && codes.length > 0 ? '0;' : ''}${codes.join(';')}m`
}
