/**
 * The converged network against an independent circuit simulator: ngspice in WebAssembly (npm eecircuit-engine, MIT).
 * Only resistances come from the solution; potentials and currents are the simulator's own.
 */
import { Simulation } from 'eecircuit-engine'
import { expect, test } from 'vitest'
import type { Supply } from '../../src/layout/layout.js'
import { solveLit } from '../../src/network/lit.js'
import { stringResistances } from '../../src/network/stray.js'
import { networkOf, sketch, supplyOf, wired } from './signs.js'

const tubes = [
  { id: 'K', length: 0.8 },
  { id: 'I', length: 0.6, fill: 'argon-mercury' as const },
  { id: 'O', length: 0.9, diameter: 0.015 },
]

// floating metal hangs on 1 TΩ in the deck, which disturbs it by 1e-6 at 24 kHz; at 60 Hz it would by more
const signs: [string, Partial<Supply>, boolean[]][] = [
  ['an electronic midpoint-grounded supply', {}, [true, false]],
  [
    'a core-and-coil supply with one end grounded',
    { type: 'core-and-coil', frequency: 60, grounding: 'one-end' },
    [true],
  ],
]

test.each(signs)(
  'ngspice finds the same potentials for %s',
  async (_name, figures, bars) => {
    const parts = sketch(tubes, [supplyOf('S', figures)], [wired('S', 'K -I O')], {
      bars,
      spacing: 0.1,
    })
    const net = networkOf(parts)
    const state = solveLit(net, { factor: 1 })
    const circuit = state.circuits[0]!
    if (!circuit.lit) throw new Error('not lit')
    const { frequency, re, im } = state.fields[0]!
    const { count, matrix } = net.capacitance

    const name = (node: number) => (net.grounded.includes(node) ? '0' : `n${node}`)
    const deck = ['a sign of three tubes']
    for (const { node } of net.floating) deck.push(`RG${node} ${name(node)} 0 1e12`)
    for (const [k, { nodes, ohms }] of stringResistances(net, state).entries())
      deck.push(`R${k} ${name(nodes[0])} ${name(nodes[1])} ${ohms.toPrecision(16)}`)
    for (let i = 0; i < count; i++) {
      let sum = 0
      for (let j = 0; j < count; j++) {
        const c = matrix[i * count + j]!
        sum += c
        if (j > i && c !== 0 && name(i) !== name(j)) deck.push(`C${i}_${j} ${name(i)} ${name(j)} ${-c}`)
      }
      if (name(i) !== '0') deck.push(`C${i} ${name(i)} 0 ${sum}`)
    }
    const [one, two] = [net.circuits[0]!.from, net.circuits[0]!.to].map((place) => name(net.node[place]!))
    if (figures.type === 'core-and-coil') {
      deck.push('V1 emf 0 dc 0 ac 8000', `V2 ${two} 0 dc 0 ac 0`)
      deck.push(`L1 emf ${one} ${(8000 / 0.03 / (2 * Math.PI * 60)).toPrecision(16)}`)
    } else {
      const half = circuit.neededVoltage / 2
      deck.push(`V1 ${one} 0 dc 0 ac ${half.toPrecision(16)}`, `V2 0 ${two} dc 0 ac ${half.toPrecision(16)}`)
    }
    deck.push('.options rshunt=1e15', `.ac lin 1 ${frequency} ${frequency}`, '.end')

    const simulation = new Simulation()
    await simulation.start()
    simulation.setNetList(deck.join('\n'))
    const result = await simulation.runSim()
    if (result.dataType !== 'complex') throw new Error(simulation.getError().join('\n'))
    const found = new Map(result.data.map((column) => [column.name.toLowerCase(), column.values[0]!]))
    let compared = 0
    for (let i = 0; i < count; i++) {
      const volts = found.get(`v(n${i})`) ?? found.get(`n${i}`)
      if (volts === undefined) continue
      compared++
      // of several kV: 1e-7 is the simulator's own precision
      expect(Math.hypot(volts.real - re[i]!, volts.img - im[i]!)).toBeLessThan(1e-3)
    }
    expect(compared).toBe(count - 1)
  },
  20000,
)
