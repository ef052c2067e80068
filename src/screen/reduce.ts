/** Every event of the inspector: keys, answers of dialogs, solutions, saves. A pure function from state to state. */
import { inspection, type Solved } from '../inspection.js'
import type { LeadSaving } from '../rules/lead-savings.js'
import { aimByKey, inView, marked } from './aim.js'
import { editChange } from './change.js'
import { breakStepped, otherCondition } from './conditions.js'
import { closed, dialogByKey, picked, submitted } from './dialogs.js'
import { asFiled, editByKey, filedKept, redo, undo } from './editing.js'
import { tooSmall } from './frame.js'
import { type Action, actionOf } from './keys.js'
import { lastScroll } from './panes/sheets.js'
import { type Next, type Opened, type SheetDialog, type State, say, stay, unsaved } from './state.js'

export type Event =
  | { readonly type: 'key'; readonly key: string }
  | { readonly type: 'resized'; readonly columns: number; readonly rows: number }
  | {
      readonly type: 'solved'
      readonly revision: number
      readonly solved: Solved
      readonly savings?: readonly LeadSaving[]
    }
  | { readonly type: 'typed'; readonly text: string }
  | { readonly type: 'submitted'; readonly text: string }
  | { readonly type: 'picked'; readonly value: string }
  | { readonly type: 'saved'; readonly opened: Opened; readonly thenQuit: boolean }
  | {
      readonly type: 'not-saved'
      readonly why: string
      readonly changedOnDisk: boolean
      readonly thenQuit: boolean
    }

export function reduce(state: State, event: Event): Next {
  switch (event.type) {
    case 'key':
      return key(state, event.key)
    case 'resized':
      return stay(resized(state, event.columns, event.rows))
    case 'solved':
      return solved(state, event.revision, event.solved, event.savings)
    case 'typed':
      return stay(
        state.dialog?.kind === 'prompt'
          ? { ...state, dialog: { ...state.dialog, text: event.text.slice(0, longestText) } }
          : state,
      )
    case 'submitted':
      return state.dialog?.kind === 'prompt' ? submitted(state, state.dialog.prompt, event.text) : stay(state)
    case 'picked':
      return state.dialog?.kind === 'pick' ? picked(state, state.dialog.pick, event.value) : stay(state)
    case 'saved':
      return saved(state, event.opened, event.thenQuit)
    case 'not-saved':
      return event.changedOnDisk
        ? stay({ ...state, dialog: { kind: 'overwrite', thenQuit: event.thenQuit } })
        : say(state, event.why, 'bad')
  }
}

/** An edit that came in while the file was written keeps the program open. */
function saved(state: State, opened: Opened, thenQuit: boolean): Next {
  const next = say({ ...state, opened }, `Saved ${opened.name}.`, 'good')
  return thenQuit && !unsaved(next.state) ? { ...next, effects: [{ do: 'quit' }] } : next
}

/** of a typed text, characters: more than any name or figure takes, little enough to draw */
const longestText = 200

/** A window too small to show a dialog closes it, but not a question about unsaved work. */
function resized(state: State, columns: number, rows: number): State {
  const sized = inView({ ...state, columns, rows })
  const { kind } = state.dialog ?? {}
  return tooSmall(sized) && kind !== 'quit' && kind !== 'overwrite' ? closed(sized) : sized
}

/** The lit solution of the sign on screen: its findings, and what the edit did. Answers for older signs are dropped. */
function solved(
  state: State,
  revision: number,
  answer: Solved,
  savings: readonly LeadSaving[] | undefined,
): Next {
  if (revision !== state.revision) return stay(state)
  const found = inspection(state.prepared, state.present.sign.wiring, answer, state.condition)
  const { pending, ...rest } = state
  const next: State = {
    ...rest,
    inspection: found,
    solved: answer,
    solving: false,
    ...(savings && { savings: { revision, list: savings } }),
  }
  return pending ? stay({ ...next, message: editChange(pending.said, pending.before, found) }) : stay(next)
}

function key(state: State, name: string): Next {
  if (name === 'ctrl-z') return { state, effects: [{ do: 'suspend' }] }
  if (state.dialog) return dialogKey(state, name)
  // what cannot be seen is not changed
  if (tooSmall(state) && actionOf(name) !== 'quit') return stay(state)
  if (name === 'escape') return stepBack(state)
  if (name === 'ctrl-s') return act(state, 'save')
  const action = actionOf(name)
  return action ? act(state, action) : stay(state)
}

/** Esc takes back the last thing that was put on the view: the mark, the free cursor, the filter. */
function stepBack(state: State): Next {
  const { mark, message: _, ...rest } = state
  if (mark) return stay(rest)
  if (state.cursor.on === 'map') return stay({ ...rest, cursor: { on: 'pair', key: undefined, side: 'a' } })
  return stay({ ...rest, filter: '' })
}

function act(state: State, action: Action): Next {
  const aimed = aimByKey(state, action)
  if (aimed) return stay(aimed)
  return (
    dialogByKey(state, action) ??
    editByKey(state, action) ??
    viewByKey(state, action) ??
    fileByKey(state, action)
  )
}

function viewByKey(state: State, action: Action): Next | undefined {
  const { view } = state
  switch (action) {
    case 'mark':
      return marked(state)
    case 'condition':
      return otherCondition(state)
    case 'next-break':
      return breakStepped(state, 1)
    case 'previous-break':
      return breakStepped(state, -1)
    case 'instant-on':
      return stay({ ...state, instant: (state.instant + 1) % 12 })
    case 'instant-back':
      return stay({ ...state, instant: (state.instant + 11) % 12 })
    case 'fit': {
      const { window: _, ...fitted } = view
      return stay({ ...state, view: fitted })
    }
    case 'from-behind': {
      const behind = !view.behind
      return say(
        { ...state, view: { ...view, behind } },
        behind ? 'Seen from the back: left and right are swapped.' : 'Seen from the front.',
      )
    }
    case 'glyphs':
      return stay({ ...state, view: { ...view, glyphs: view.glyphs === 'stroke' ? 'level' : 'stroke' } })
    case 'names':
      return stay({ ...state, view: { ...view, names: !view.names } })
    default:
      return undefined
  }
}

function fileByKey(state: State, action: Action): Next {
  switch (action) {
    case 'undo':
      return undo(state)
    case 'redo':
      return redo(state)
    case 'as-filed':
      return asFiled(state)
    case 'save':
      return unsaved(state)
        ? { state: filedKept(state), effects: [{ do: 'save', force: false, thenQuit: false }] }
        : say(state, 'Nothing to save: the file holds this wiring.')
    case 'quit':
      return unsaved(state)
        ? stay({ ...state, dialog: { kind: 'quit' } })
        : { state, effects: [{ do: 'quit' }] }
    default:
      return stay(state)
  }
}

/** Keys while a dialog is open. Prompts and pick lists get theirs from Ink; only Esc is read here. */
function dialogKey(state: State, name: string): Next {
  const { dialog } = state
  if (name === 'escape') return stay(closed(state))
  switch (dialog?.kind) {
    case 'help':
    case 'cautions':
    case 'why':
    case 'symptom':
      return scrolled(state, dialog, name)
    case 'quit':
      if (name === 's')
        return { state: filedKept(closed(state)), effects: [{ do: 'save', force: false, thenQuit: true }] }
      if (name === 'd') return { state, effects: [{ do: 'quit' }] }
      return stay(state)
    case 'overwrite':
      return name === 'o'
        ? { state: closed(state), effects: [{ do: 'save', force: true, thenQuit: dialog.thenQuit }] }
        : stay(state)
    default:
      return stay(state)
  }
}

const scrollKeys: Record<string, number> = {
  down: 1,
  up: -1,
  pagedown: 10,
  pageup: -10,
  ' ': 10,
  tab: 1,
  'shift-tab': -1,
}

function scrolled(state: State, dialog: SheetDialog, name: string): Next {
  const by = scrollKeys[name]
  if (by === undefined) return stay(closed(state))
  const scroll = Math.min(lastScroll(state), Math.max(0, dialog.scroll + by))
  return stay({ ...state, dialog: { ...dialog, scroll } })
}
