/** The one table of keys: the reducer looks actions up here, the footer, the help and the README are printed from it. */

export type Action =
  | 'next-pair'
  | 'previous-pair'
  | 'next-page'
  | 'previous-page'
  | 'worst-pair'
  | 'other-side'
  | 'left'
  | 'right'
  | 'up'
  | 'down'
  | 'far-left'
  | 'far-right'
  | 'far-up'
  | 'far-down'
  | 'mark'
  | 'condition'
  | 'next-break'
  | 'previous-break'
  | 'instant-on'
  | 'instant-back'
  | 'zoom-in'
  | 'zoom-out'
  | 'fit'
  | 'from-behind'
  | 'glyphs'
  | 'names'
  | 'filter'
  | 'why'
  | 'symptoms'
  | 'feed-other-end'
  | 'feed-here'
  | 'supply-here'
  | 'swap-terminals'
  | 'turn-tube'
  | 'join-ends'
  | 'earlier'
  | 'later'
  | 'move-tube'
  | 'midpoint-return'
  | 'supply-figures'
  | 'tube-height'
  | 'tube-fill'
  | 'undo'
  | 'redo'
  | 'as-filed'
  | 'variants'
  | 'keep-variant'
  | 'save'
  | 'cautions'
  | 'help'
  | 'quit'

export type KeyGroup = 'find' | 'map' | 'wiring' | 'file'

export interface KeyEntry {
  readonly keys: readonly string[]
  readonly action: Action
  readonly group: KeyGroup
  /** for the help and the README */
  readonly does: string
  /** for the footer, where it stands there; the lower the number, the longer it stays on a narrow screen */
  readonly footer?: { readonly label: string; readonly rank: number }
}

export const keyTable: readonly KeyEntry[] = [
  {
    keys: ['tab'],
    action: 'next-pair',
    group: 'find',
    does: 'next pair of the worst list',
    footer: { label: 'next', rank: 1 },
  },
  { keys: ['shift-tab'], action: 'previous-pair', group: 'find', does: 'previous pair' },
  { keys: ['pagedown'], action: 'next-page', group: 'find', does: 'ten pairs on' },
  { keys: ['pageup'], action: 'previous-page', group: 'find', does: 'ten pairs back' },
  { keys: ['home'], action: 'worst-pair', group: 'find', does: 'the worst pair' },
  {
    keys: ['o'],
    action: 'other-side',
    group: 'find',
    does: 'other place of the pair; other conductor under the cursor',
  },
  { keys: ['left'], action: 'left', group: 'find', does: 'cursor left: probe freely' },
  { keys: ['right'], action: 'right', group: 'find', does: 'cursor right' },
  { keys: ['up'], action: 'up', group: 'find', does: 'cursor up' },
  { keys: ['down'], action: 'down', group: 'find', does: 'cursor down' },
  { keys: ['shift-left', 'H'], action: 'far-left', group: 'find', does: 'cursor ten cells left' },
  { keys: ['shift-right', 'L'], action: 'far-right', group: 'find', does: 'cursor ten cells right' },
  { keys: ['shift-up', 'K'], action: 'far-up', group: 'find', does: 'cursor five rows up' },
  { keys: ['shift-down', 'J'], action: 'far-down', group: 'find', does: 'cursor five rows down' },
  {
    keys: ['m'],
    action: 'mark',
    group: 'find',
    does: 'mark this place: probe from here to the cursor',
    footer: { label: 'mark', rank: 6 },
  },
  {
    keys: ['y'],
    action: 'why',
    group: 'find',
    does: 'why: the figures of this pair derived step by step',
    footer: { label: 'why', rank: 6.5 },
  },
  { keys: ['Y'], action: 'symptoms', group: 'find', does: 'by symptom: which figures to look at' },
  { keys: ['/'], action: 'filter', group: 'find', does: 'show only pairs that name this text' },
  {
    keys: ['c'],
    action: 'condition',
    group: 'map',
    does: 'condition: lit, nameplate or broken (each tube open in turn)',
    footer: { label: 'condition', rank: 7 },
  },
  {
    keys: ['d'],
    action: 'next-break',
    group: 'map',
    does: 'condition broken: the next tube open on the map',
  },
  { keys: ['D'], action: 'previous-break', group: 'map', does: 'condition broken: the tube before' },
  { keys: ['i'], action: 'instant-on', group: 'map', does: 'the instant: 30 degrees on in the cycle' },
  { keys: ['I'], action: 'instant-back', group: 'map', does: 'the instant: 30 degrees back' },
  { keys: ['+', '='], action: 'zoom-in', group: 'map', does: 'zoom in at the cursor' },
  { keys: ['-'], action: 'zoom-out', group: 'map', does: 'zoom out' },
  { keys: ['0'], action: 'fit', group: 'map', does: 'fit the whole sign' },
  { keys: ['b'], action: 'from-behind', group: 'map', does: 'the sign from the back, and from the front' },
  { keys: ['g'], action: 'glyphs', group: 'map', does: 'draw strokes or levels of potential' },
  { keys: ['n'], action: 'names', group: 'map', does: 'names of the tubes on and off' },
  {
    keys: ['f'],
    action: 'feed-other-end',
    group: 'wiring',
    does: 'feed the tube under the cursor from its other end',
    footer: { label: 'feed other end', rank: 2 },
  },
  { keys: ['F'], action: 'feed-here', group: 'wiring', does: 'move the feed to another link of the loop' },
  { keys: ['P'], action: 'supply-here', group: 'wiring', does: 'put the supply at the cursor' },
  { keys: ['x'], action: 'swap-terminals', group: 'wiring', does: 'swap the two terminals' },
  {
    keys: ['t'],
    action: 'turn-tube',
    group: 'wiring',
    does: 'turn the tube under the cursor end for end',
    footer: { label: 'turn', rank: 3 },
  },
  {
    keys: ['j'],
    action: 'join-ends',
    group: 'wiring',
    does: 'jumper the two ends nearest the pair (or mark and cursor)',
    footer: { label: 'jumper', rank: 4 },
  },
  { keys: [','], action: 'earlier', group: 'wiring', does: 'this tube one place earlier in the string' },
  { keys: ['.'], action: 'later', group: 'wiring', does: 'this tube one place later' },
  { keys: ['M'], action: 'move-tube', group: 'wiring', does: 'this tube to another circuit' },
  {
    keys: ['R'],
    action: 'midpoint-return',
    group: 'wiring',
    does: 'midpoint return at the joint under the cursor, or none',
  },
  { keys: ['e'], action: 'supply-figures', group: 'wiring', does: "type the supply's figures" },
  {
    keys: ['h'],
    action: 'tube-height',
    group: 'wiring',
    does: 'type the height of the tube under the cursor',
  },
  { keys: ['l'], action: 'tube-fill', group: 'wiring', does: 'choose the fill of the tube under the cursor' },
  { keys: ['u'], action: 'undo', group: 'wiring', does: 'undo', footer: { label: 'undo', rank: 5 } },
  { keys: ['r'], action: 'redo', group: 'wiring', does: 'redo' },
  { keys: ['U'], action: 'as-filed', group: 'wiring', does: "back to the file's wiring" },
  { keys: ['v'], action: 'variants', group: 'file', does: 'switch to a variant' },
  { keys: ['V'], action: 'keep-variant', group: 'file', does: 'keep this wiring as a variant' },
  {
    keys: ['s'],
    action: 'save',
    group: 'file',
    does: 'save the wiring into the file',
    footer: { label: 'save', rank: 8 },
  },
  {
    keys: ['w'],
    action: 'cautions',
    group: 'file',
    does: 'all cautions and assumptions',
    footer: { label: 'warnings', rank: 9 },
  },
  { keys: ['?'], action: 'help', group: 'file', does: 'this help', footer: { label: 'help', rank: 0 } },
  { keys: ['q'], action: 'quit', group: 'file', does: 'quit', footer: { label: 'quit', rank: 0.5 } },
]

const byKey = new Map(keyTable.flatMap((entry) => entry.keys.map((key) => [key, entry.action] as const)))
export const actionOf = (key: string): Action | undefined => byKey.get(key)

const shownKeys: Record<string, string> = {
  tab: 'Tab',
  'shift-tab': 'Shift-Tab',
  pagedown: 'PgDn',
  pageup: 'PgUp',
  home: 'Home',
  left: 'Left',
  right: 'Right',
  up: 'Up',
  down: 'Down',
  'shift-left': 'Shift-Left',
  'shift-right': 'Shift-Right',
  'shift-up': 'Shift-Up',
  'shift-down': 'Shift-Down',
}
export const keyText = (key: string): string => shownKeys[key] ?? key

export const groupTitles: Record<KeyGroup, string> = {
  find: 'Find and probe',
  map: 'Map',
  wiring: 'Wiring and figures',
  file: 'File',
}

/** One group of the table as rows of plain text: what the README prints. */
const keyRows = (group: KeyGroup): string[] =>
  keyTable
    .filter((entry) => entry.group === group)
    .map(({ keys, does }) => `  ${keys.map(keyText).join(' ').padEnd(14)}${does}`)

/** The whole table as plain text. */
export const keyTableText = (): string =>
  (['find', 'map', 'wiring', 'file'] as const)
    .map((group) => [groupTitles[group], ...keyRows(group)].join('\n'))
    .join('\n\n')
