/** When updates go out: together, not too often, at once after a key, and never faster than they are taken. */
import { setTimeout as sleep } from 'node:timers/promises'
import { Box, render, Text } from 'ink'
import { createElement } from 'react'
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest'
import { frameSink } from '../../../src/screen/terminal/frame-sink.js'
import { fakeOutput } from './fake-streams.js'

const update = (changes: string) => `\x1b[?2026h${changes}\x1b[?2026l`
const clear = '\x1b[m\x1b[2J'

describe('with the clock in hand', () => {
  beforeEach(() => void vi.useFakeTimers())
  afterEach(() => void vi.useRealTimers())

  function started() {
    const output = fakeOutput()
    const sink = frameSink(output.stream)
    sink.stream.write('0')
    vi.advanceTimersByTime(100)
    output.written.length = 0
    return { output, sink }
  }

  test('the first frame is the whole screen, what changes in the same turn goes with it', () => {
    const output = fakeOutput()
    const sink = frameSink(output.stream)
    sink.stream.write('a')
    sink.stream.write('b')
    sink.setOverlay('map', { x: 0, y: 1, width: 1, height: 1, glyphs: ['#'], styles: [''] })
    vi.advanceTimersByTime(0)
    expect(output.written).toEqual([update(`${clear}\x1b[1;1Hb\x1b[2;1H#`)])
    expect(sink.counts()).toEqual({ frames: 2, updates: 1, bytes: output.written[0]!.length })
  })

  test('frames come no more often than 60 times a second, the newest is never lost', () => {
    const { output, sink } = started()
    for (let ms = 0; ms < 1000; ms++) {
      sink.stream.write(String(ms))
      vi.advanceTimersByTime(1)
    }
    vi.advanceTimersByTime(20)
    expect(output.written.length).toBeGreaterThan(50)
    expect(output.written.length).toBeLessThanOrEqual(61)
    expect(output.written.at(-1)).toContain('9')
  })

  test('the first frame after a key goes out at once', () => {
    const { output, sink } = started()
    sink.stream.write('1')
    vi.advanceTimersByTime(1)
    sink.hurry()
    sink.stream.write('2')
    vi.advanceTimersByTime(1)
    expect(output.written).toEqual([update('\x1b[1;1H1'), update('\x1b[1;1H2')])
  })

  test('held keys do not outrun the limit', () => {
    const { output, sink } = started()
    for (let key = 0; key < 200; key++) {
      sink.hurry()
      sink.stream.write(String(key))
      vi.advanceTimersByTime(1)
    }
    expect(output.written.length).toBeLessThanOrEqual(14)
  })

  test('a terminal that does not read gets nothing until it does, then the newest frame only', () => {
    const { output, sink } = started()
    output.state.takes = false
    for (const frame of ['1', '2', '3', '4']) {
      sink.hurry()
      sink.stream.write(frame)
      vi.advanceTimersByTime(100)
    }
    expect(output.written).toEqual([update('\x1b[1;1H1')])
    output.state.takes = true
    output.drain()
    vi.advanceTimersByTime(100)
    expect(output.written).toEqual([update('\x1b[1;1H1'), update('\x1b[1;1H4')])
  })

  test('a frame like the last sends nothing', () => {
    const { output, sink } = started()
    sink.stream.write('0')
    vi.advanceTimersByTime(100)
    expect(output.written).toEqual([])
  })

  test('a repaint and a new size draw everything', () => {
    const { output, sink } = started()
    sink.repaint()
    vi.advanceTimersByTime(100)
    const sizes: string[] = []
    sink.stream.on('resize', () => sizes.push(`${sink.stream.columns}x${sink.stream.rows}`))
    output.resize(30, 8)
    vi.advanceTimersByTime(100)
    const whole = update(`${clear}\x1b[1;1H0`)
    expect(output.written).toEqual([whole, whole])
    expect(sizes).toEqual(['30x8'])
  })

  test('cursor commands, line ends and empty writes are no frames', () => {
    const { output, sink } = started()
    for (const text of ['\x1b[?25l', '\x1b[?25h', '\n', '']) sink.stream.write(text)
    vi.advanceTimersByTime(100)
    expect(output.written).toEqual([])
  })

  test('a closed sink sends nothing more', () => {
    const { output, sink } = started()
    sink.stream.write('1')
    sink.close()
    sink.stream.write('2')
    output.resize(30, 8)
    vi.advanceTimersByTime(100)
    expect(output.written).toEqual([])
  })
})

test('Ink draws through it', async () => {
  const output = fakeOutput(12, 3)
  const sink = frameSink(output.stream)
  const screen = (mark: string) =>
    createElement(Box, { borderStyle: 'single' }, createElement(Text, { color: 'red' }, mark))
  const app = render(screen('a'), { stdout: sink.stream, debug: true, patchConsole: false })
  await sleep(30)
  app.rerender(screen('b'))
  await sleep(30)
  app.unmount()
  expect(output.written[0]).toContain('\x1b[1;1H┌──────────┐')
  expect(output.written[1]?.replace(/\x1b\[(?:31)?m/g, '')).toBe(update('\x1b[2;2Hb'))
})
