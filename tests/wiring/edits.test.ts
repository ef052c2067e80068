import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { enteringEnd, leavingEnd } from '../../src/layout/ends.js'
import type { Wiring } from '../../src/layout/layout.js'
import type { Edit } from '../../src/wiring/edit.js'
import {
  feedFromOtherEnd,
  joinEnds,
  moveFeed,
  sameWiring,
  shiftTube,
  swapTerminals,
  turnTube,
  wiringChange,
} from '../../src/wiring/edits.js'

/** `K I -O` as a wiring of one circuit on supply S1 */
const wired = (text: string): Wiring => ({
  circuits: [
    {
      supply: 'S1',
      string: text.split(' ').map((t) => ({ tube: t.replace('-', ''), reversed: t.startsWith('-') })),
    },
  ],
})
const shown = (wiring: Wiring): string =>
  wiring.circuits[0]!.string.map((e) => `${e.reversed ? '-' : ''}${e.tube}`).join(' ')
const made = (edit: Edit<Wiring>): Wiring => {
  if (!edit.ok) throw new Error(`refused: ${edit.why.code}`)
  return edit.value
}

/** all joined ends of the loop, the supply's terminals among them, as sorted names */
function joints(wiring: Wiring): string[] {
  const { string } = wiring.circuits[0]!
  const ends = ['S1.1', ...string.flatMap((e) => [enteringEnd(e), leavingEnd(e)]), 'S1.2']
  return Array.from({ length: ends.length / 2 }, (_, i) =>
    [ends[2 * i]!, ends[2 * i + 1]!].sort().join(' '),
  ).sort()
}

const anyWiring = fc
  .tuple(fc.integer({ min: 2, max: 8 }), fc.infiniteStream(fc.boolean()), fc.infiniteStream(fc.nat()))
  .map(([n, flips, picks]) => {
    const left = Array.from({ length: n }, (_, i) => `T${i}`)
    const order: string[] = []
    while (left.length > 0) {
      const [tube] = left.splice((picks.next().value ?? 0) % left.length, 1)
      order.push(`${flips.next().value ? '-' : ''}${tube}`)
    }
    return wired(order.join(' '))
  })

describe('moving the feed', () => {
  it('turns one jumper into the feed and the old feed into a jumper, and nothing else', () => {
    const before = wired('K I -O S')
    const after = made(moveFeed(before, 0, 2))
    expect(shown(after)).toBe('-O S K I')
    expect(wiringChange(before, after)).toEqual({
      off: [
        ['S1.1', 'K.a'],
        ['I.b', 'O.b'],
        ['S.b', 'S1.2'],
      ],
      on: [
        ['S1.1', 'O.b'],
        ['S.b', 'K.a'],
        ['I.b', 'S1.2'],
      ],
    })
  })

  it('feeds a tube at the feed from its other end', () => {
    expect(shown(made(feedFromOtherEnd(wired('K I O'), 'K')))).toBe('I O K')
    expect(shown(made(feedFromOtherEnd(wired('K I O'), 'O')))).toBe('O K I')
  })

  it('feeds a tube inside the string from the end it is left at', () => {
    expect(shown(made(feedFromOtherEnd(wired('K I O S'), 'I')))).toBe('O S K I')
  })

  it('comes back when the same tube is fed from its other end again', () => {
    fc.assert(
      fc.property(anyWiring, fc.nat(), (wiring, pick) => {
        const { string } = wiring.circuits[0]!
        // a tube at the feed: there the two presses undo each other
        const tube = string[pick % 2 === 0 ? 0 : string.length - 1]!.tube
        expect(shown(made(feedFromOtherEnd(made(feedFromOtherEnd(wiring, tube)), tube)))).toBe(shown(wiring))
      }),
    )
  })

  it('refuses where there is one tube only', () => {
    expect(feedFromOtherEnd(wired('K'), 'K')).toEqual({ ok: false, why: { code: 'only-tube', supply: 'S1' } })
  })
})

describe('turning, swapping and shifting', () => {
  it('is undone by doing it again', () => {
    fc.assert(
      fc.property(anyWiring, (wiring) => {
        const tube = wiring.circuits[0]!.string[0]!.tube
        expect(sameWiring(made(turnTube(made(turnTube(wiring, tube)), tube)), wiring)).toBe(true)
        expect(sameWiring(made(swapTerminals(made(swapTerminals(wiring, 0)), 0)), wiring)).toBe(true)
        expect(sameWiring(made(shiftTube(made(shiftTube(wiring, tube, 1)), tube, -1)), wiring)).toBe(true)
      }),
    )
  })

  it('swapping the terminals leaves every jumper where it is', () => {
    const { off, on } = wiringChange(wired('K -I O'), made(swapTerminals(wired('K -I O'), 0)))
    expect({ off, on }).toEqual({
      off: [
        ['S1.1', 'K.a'],
        ['O.b', 'S1.2'],
      ],
      on: [
        ['S1.1', 'O.b'],
        ['K.a', 'S1.2'],
      ],
    })
  })
})

describe('joining two ends', () => {
  it('runs the stretch between two leaving ends backwards', () => {
    expect(shown(made(joinEnds(wired('A B C D'), 'A.b', 'C.b')))).toBe('A -C -B D')
  })

  it('puts a stretch that would be cut out of the loop behind the second tube', () => {
    expect(shown(made(joinEnds(wired('A B C D'), 'A.b', 'C.a')))).toBe('A C B D')
  })

  it('moves a feed lead as well as a jumper', () => {
    expect(shown(made(joinEnds(wired('A B C'), 'S1.1', 'B.b')))).toBe('-B -A C')
  })

  it('always joins those two ends and leaves one loop through every tube', () => {
    fc.assert(
      fc.property(anyWiring, fc.nat(), fc.nat(), (wiring, first, second) => {
        const ends = [
          'S1.1',
          'S1.2',
          ...wiring.circuits[0]!.string.flatMap((e) => [`${e.tube}.a`, `${e.tube}.b`]),
        ]
        const [x, y] = [ends[first % ends.length]!, ends[second % ends.length]!]
        const edit = joinEnds(wiring, x, y)
        const already = joints(wiring).includes([x, y].sort().join(' '))
        if (x.split('.')[0] === y.split('.')[0] || already) {
          expect(edit.ok).toBe(false)
          return
        }
        const after = made(edit)
        expect(joints(after)).toContain([x, y].sort().join(' '))
        const tubes = (w: Wiring) => w.circuits[0]!.string.map((e) => e.tube).sort()
        expect(tubes(after)).toEqual(tubes(wiring))
        // two joints change when a stretch is turned, three when one is moved
        expect(wiringChange(wiring, after).on.length).toBeLessThanOrEqual(3)
      }),
    )
  })

  it('refuses to short a tube or the supply onto itself', () => {
    expect(joinEnds(wired('A B'), 'A.a', 'A.b')).toMatchObject({ ok: false, why: { code: 'same-tube' } })
    expect(joinEnds(wired('A B'), 'S1.1', 'S1.2')).toMatchObject({
      ok: false,
      why: { code: 'both-terminals' },
    })
  })
})

describe('the way back to the midpoint', () => {
  const returned = (text: string, midpointReturn: string): Wiring => ({
    circuits: wired(text).circuits.map((c) => ({ ...c, midpointReturn })),
  })

  it('stays at its tube end while that is inside the string', () => {
    const after = made(shiftTube(returned('A B C D', 'B.b'), 'D', -1))
    expect(after.circuits[0]?.midpointReturn).toBe('B.b')
  })

  it('goes where its end comes to the feed: there it would short half the supply', () => {
    const after = made(moveFeed(returned('A B C D', 'B.b'), 0, 2))
    expect(after.circuits[0]).toEqual({ supply: 'S1', string: wired('C D A B').circuits[0]?.string })
  })
})
