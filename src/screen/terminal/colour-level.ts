/** How many colours to use, decided from the flag and the environment alone. */

/** none, 16, 256 or 24-bit colours; bits per colour */
export type ColourLevel = 0 | 4 | 8 | 24
export type ColourFlag = 'auto' | 'always' | 'never' | '16' | '256' | '24bit'
type Environment = Readonly<Record<string, string | undefined>>

/**
 * The first of these that says something: the flag, FORCE_COLOR (0–3), NO_COLOR (not empty), no terminal at
 * the other end, TERM=dumb, COLORTERM, the name in TERM.
 */
export function colourLevel(
  env: Environment,
  flag: ColourFlag,
  stream: { readonly isTTY?: boolean },
): ColourLevel {
  if (flag !== 'auto' && flag !== 'always') return flagged[flag]
  if (flag === 'always') return atLeast16(env)
  const forced = env.FORCE_COLOR
  if (forced !== undefined) return forcedLevel(forced, env)
  if (env.NO_COLOR || !stream.isTTY) return 0
  return ofTerminal(env)
}

/** The level in chalk's own count, for `chalk.level`. */
export const chalkLevel = (level: ColourLevel): 0 | 1 | 2 | 3 => inChalk[level]
const inChalk = { 0: 0, 4: 1, 8: 2, 24: 3 } as const

const flagged = { never: 0, '16': 4, '256': 8, '24bit': 24 } as const
const forcedLevels: Readonly<Record<string, ColourLevel>> = { '0': 0, false: 0, '1': 4, '2': 8, '3': 24 }

const forcedLevel = (forced: string, env: Environment): ColourLevel => forcedLevels[forced] ?? atLeast16(env)
const atLeast16 = (env: Environment): ColourLevel => ofTerminal(env) || 4

function ofTerminal(env: Environment): ColourLevel {
  const term = env.TERM ?? ''
  if (term === 'dumb') return 0
  if (/^(?:truecolor|24bit)$/i.test(env.COLORTERM ?? '') || /-direct$/.test(term) || env.WT_SESSION) return 24
  if (/-256(?:color)?$/i.test(term)) return 8
  return /^(?:xterm|screen|tmux|rxvt|linux|vt220|ansi|cygwin|konsole)|color/i.test(term) ? 4 : 0
}
