/** The inspector on a real terminal: store, worker, keys and screen put together. */
import { render } from 'ink'
import { type LayoutFile, saveSign } from '../files.js'
import { frameOf, tooSmall } from './frame.js'
import { Inspector, promptRows, type Store } from './inspector.js'
import { mapPane } from './map-pane.js'
import { type Event, reduce } from './reduce.js'
import type { Solving } from './solving.js'
import { initialState, type StartOptions } from './start.js'
import { type Effect, sheetOf } from './state.js'
import { frameSink } from './terminal/frame-sink.js'
import { keyPump } from './terminal/key-pump.js'
import { openScreen } from './terminal/open-screen.js'

export interface RunOptions extends StartOptions {
  /** prints bytes and times of the run when it is over */
  readonly measure: boolean
}

export function runInspector(file: LayoutFile, options: RunOptions, worker: Solving): void {
  const out = process.stdout
  let state = initialState(file, options, out.columns || 80, out.rows || 24)
  let glass = 0
  const listeners = new Set<() => void>()

  const screen = openScreen({ onResume: () => sink.repaint() })
  const sink = frameSink(out)
  const map = mapPane(options.theme)
  const pump = keyPump(process.stdin, { onKey, onPaste: () => state.dialog?.kind !== 'prompt' })

  const store: Store = {
    subscribe(listener) {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    state: () => state,
    dispatch,
  }

  function dispatch(event: Event): void {
    const before = state
    const next = reduce(state, event)
    state = next.state
    if (state.prepared.runs !== before.prepared.runs) glass++
    showMap()
    for (const listener of listeners) listener()
    for (const effect of next.effects) perform(effect)
  }

  /** The map lies over the frame, except where a dialog is open in front of it. */
  function showMap(): void {
    const { dialog } = state
    if (tooSmall(state) || sheetOf(dialog)) {
      sink.setOverlay('map', undefined)
      return
    }
    const box = frameOf(state).map
    const grid = map.grid(state, box)
    const height =
      dialog?.kind === 'prompt'
        ? Math.min(box.height, 1 + promptRows(dialog.text, box.width))
        : dialog?.kind === 'pick'
          ? Math.min(box.height, dialog.choices.length + 1)
          : 0
    sink.setOverlay('map', height > 0 ? { ...grid, holes: [{ ...box, height }] } : grid)
  }

  function perform(effect: Effect): void {
    switch (effect.do) {
      case 'solve':
        worker.request({ revision: state.revision, glass, ...state.present.sign })
        return
      case 'lay-leads':
        worker.request({ revision: state.revision, glass, leads: true, ...state.present.sign })
        return
      case 'save':
        save(effect.force, effect.thenQuit)
        return
      case 'quit':
        end()
        return
      case 'suspend':
        screen.suspend()
    }
  }

  function save(force: boolean, thenQuit: boolean): void {
    const { path, name, source, sign } = state.opened
    const saved = saveSign(path, source, sign, state.present.sign, force)
    if (saved.ok) {
      const opened = { path, name, source: saved.source, sign: state.present.sign }
      dispatch({ type: 'saved', opened, thenQuit })
    } else {
      const { why, changedOnDisk } = saved
      dispatch({ type: 'not-saved', why, changedOnDisk, thenQuit })
    }
  }

  function end(): void {
    const { frames, updates, bytes } = sink.counts()
    sink.close()
    worker.close()
    screen.leave()
    if (options.measure) process.stderr.write(`frames ${frames}, updates ${updates}, bytes ${bytes}\n`)
    process.exit(0)
  }

  /** Typed text and choices go on to Ink; everything else is the reducer's. */
  function onKey(name: string): boolean {
    sink.hurry()
    if (name === 'ctrl-c') screen.end('SIGINT')
    const typing = state.dialog?.kind === 'prompt' || state.dialog?.kind === 'pick'
    if (typing && name !== 'escape' && name !== 'ctrl-z') return false
    dispatch({ type: 'key', key: name })
    return true
  }

  worker.onAnswer(({ revision, solved, savings }) =>
    dispatch({ type: 'solved', revision, solved, ...(savings && { savings }) }),
  )
  perform({ do: 'solve' })
  showMap()
  const app = render(<Inspector store={store} theme={options.theme} />, {
    stdout: sink.stream,
    stdin: pump.stream,
    debug: true,
    patchConsole: false,
    exitOnCtrlC: false,
  })
  // a throw while drawing ends the program like any other bug: as an unhandled rejection
  void app.waitUntilExit()
  sink.stream.on('resize', () =>
    dispatch({ type: 'resized', columns: out.columns || 80, rows: out.rows || 24 }),
  )
  pump.start()
}
