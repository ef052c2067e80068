/** The Ink side of the inspector: panes that draw lines, and the two widgets that take typed text and choices. */
import { Box, Text, Transform } from 'ink'
import SelectInput from 'ink-select-input'
import TextInput from 'ink-text-input'
import { type ReactNode, useSyncExternalStore } from 'react'
import { standingWarning } from '../view/caution-text.js'
import { textWidth } from '../view/text-width.js'
import type { Theme } from '../view/theme.js'
import { frameOf, type Box as Place, sheetBox, smallest, tooSmall } from './frame.js'
import { fitted, type Line, line, lineText } from './lines.js'
import { bannerLines, footerLine, legendLine, messageLine } from './panes/edges.js'
import { loadingLines } from './panes/loading.js'
import { readoutLines } from './panes/readout.js'
import { sheetPage } from './panes/sheets.js'
import { titleLine } from './panes/title.js'
import { asciiOnly } from './panes/words.js'
import { worstLines } from './panes/worst.js'
import type { Event } from './reduce.js'
import { type State, sheetOf } from './state.js'

/** The state outside React: handlers never read a captured one. */
export interface Store {
  subscribe(listener: () => void): () => void
  state(): State
  dispatch(event: Event): void
}

export function Inspector({ store, theme }: { readonly store: Store; readonly theme: Theme }) {
  const state = useSyncExternalStore(store.subscribe, store.state)
  const { columns, rows } = state
  if (tooSmall(state)) return <TooSmall state={state} />
  const boxes = frameOf(state)
  const draw = (place: Place, lines: readonly Line[]) => (
    <Rows place={place} lines={state.ascii ? lines.map(asciiLine) : lines} theme={theme} />
  )
  return (
    <Box flexDirection="column" width={columns} height={rows}>
      {draw(boxes.title, [titleLine(state, columns)])}
      {sheetOf(state.dialog) ? (
        draw(sheetBox(columns, rows), sheetPage(state))
      ) : (
        <Panes state={state} store={store} theme={theme} draw={draw} />
      )}
      {draw(boxes.message, [messageLine(state, columns)])}
      {boxes.footer.height > 0 && draw(boxes.footer, [footerLine(state, columns)])}
      {draw(boxes.banners, bannerLines(state, columns))}
    </Box>
  )
}

interface PanesProps {
  readonly state: State
  readonly store: Store
  readonly theme: Theme
  readonly draw: (place: Place, lines: readonly Line[]) => ReactNode
}

/** Map, worst list and loading – beside each other or stacked – then legend and readout. */
function Panes({ state, store, theme, draw }: PanesProps) {
  const { columns } = state
  const boxes = frameOf(state)
  const worst = draw(boxes.worst, worstLines(state, boxes.worst.width, boxes.worst.height))
  const loading = draw(boxes.loading, loadingLines(state, boxes.loading.width, boxes.loading.height))
  const center = (
    <Box width={boxes.map.width} height={boxes.map.height}>
      <Dialogs state={state} store={store} theme={theme} place={boxes.map} />
    </Box>
  )
  return (
    <>
      {boxes.worst.x > 0 ? (
        <Box>
          {center}
          <Box width={1} height={boxes.map.height} />
          <Box flexDirection="column">
            {worst}
            {loading}
          </Box>
        </Box>
      ) : (
        <Box flexDirection="column">
          {center}
          {worst}
          {loading}
        </Box>
      )}
      {boxes.legend.height > 0 && draw(boxes.legend, [legendLine(state, columns)])}
      {draw(boxes.readout, readoutLines(state, columns, boxes.readout.height))}
    </>
  )
}

const asciiLine = (spans: Line): Line => spans.map((s) => ({ ...s, text: asciiOnly(s.text) }))

function TooSmall({ state }: { readonly state: State }) {
  const { columns, rows, dialog } = state
  return (
    <Box width={columns} height={rows} flexDirection="column">
      <Text wrap="wrap">
        {dialog
          ? messageLine(state, 120)
              .map(({ text }) => text)
              .join('')
              .trim()
          : `tubewright needs ${smallest.columns}x${smallest.rows} cells; this window has ${columns}x${rows}. Make it larger, or q to leave.`}
      </Text>
      <Text wrap="wrap">{standingWarning(0)}</Text>
    </Box>
  )
}

/**
 * Rows of a pane. The text that Ink measures is always the same blank: the coloured row is put in by a transform,
 * because Ink keeps every different text it has ever measured.
 */
function Rows({
  place,
  lines,
  theme,
}: {
  readonly place: Place
  readonly lines: readonly Line[]
  readonly theme: Theme
}) {
  const blank = ' '.repeat(Math.max(1, place.width))
  return (
    <Box flexDirection="column" width={place.width} height={place.height}>
      {rowsOf(place).map((row) => {
        const text = lineText(fitted(lines[row - place.y] ?? line(''), place.width, ''), theme)
        return (
          <Transform key={row} transform={() => text}>
            <Text>{blank}</Text>
          </Transform>
        )
      })}
    </Box>
  )
}

const rowsOf = ({ y, height }: Place): number[] => Array.from({ length: height }, (_, i) => y + i)

/** The pick list in the program's own looks: they must be seen without colour and in pure ASCII too. */
const Pointer = ({ isSelected = false }: { readonly isSelected?: boolean }) => (
  <Text>{isSelected ? '> ' : '  '}</Text>
)
const Choice = ({ isSelected = false, label }: { readonly isSelected?: boolean; readonly label: string }) => (
  <Text inverse={isSelected} wrap="truncate">
    {label}
  </Text>
)

/** Rows that a typed text takes beside its sign, with its cursor; words that wrap may take one more. */
export function promptRows(text: string, width: number): number {
  const rows = Math.ceil((textWidth(text) + 1) / (width - 2))
  return rows > 1 ? rows + 1 : 1
}

/** What is open over the map. Closed: an empty box, over which the sink lays the map. */
function Dialogs({
  state,
  store,
  theme,
  place,
}: {
  readonly state: State
  readonly store: Store
  readonly theme: Theme
  readonly place: Place
}) {
  const { dialog } = state
  switch (dialog?.kind) {
    case 'prompt':
      return (
        <Box flexDirection="column" width={place.width}>
          <Rows place={{ ...place, height: 1 }} lines={[line(dialog.title, 'title')]} theme={theme} />
          <Box>
            <Text>{'> '}</Text>
            <TextInput
              value={dialog.text}
              onChange={(text) => store.dispatch({ type: 'typed', text })}
              onSubmit={(text) => store.dispatch({ type: 'submitted', text })}
            />
          </Box>
        </Box>
      )
    case 'pick':
      return (
        <Box flexDirection="column" width={place.width}>
          <Rows place={{ ...place, height: 1 }} lines={[line(dialog.title, 'title')]} theme={theme} />
          <SelectInput
            items={dialog.choices.map(({ label, value }) => ({
              label: state.ascii ? asciiOnly(label) : label,
              value,
              key: value,
            }))}
            limit={Math.max(1, place.height - 2)}
            indicatorComponent={Pointer}
            itemComponent={Choice}
            onSelect={({ value }) => store.dispatch({ type: 'picked', value })}
          />
        </Box>
      )
    default:
      return <Text> </Text>
  }
}
