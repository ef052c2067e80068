/** An independent circuit simulator for tests: ngspice in WebAssembly (npm eecircuit-engine, MIT). */
import { setTimeout as sleep } from 'node:timers/promises'
import { Simulation } from 'eecircuit-engine'

export interface Volts {
  readonly re: number
  readonly im: number
}

let started: Promise<Simulation> | undefined

/** One simulator for all decks of a test file: starting takes longer than a run. */
async function start(): Promise<Simulation> {
  const simulation = new Simulation()
  await simulation.start()
  return simulation
}

/** Runs a deck with one .ac frequency; potentials by node name in small letters. */
export async function simulated(deck: string, limitMs = 20_000): Promise<ReadonlyMap<string, Volts>> {
  started ??= start()
  const simulation = await started
  simulation.setNetList(deck)
  const result = await Promise.race([simulation.runSim(), sleep(limitMs, undefined, { ref: false })])
  const complaints = simulation.getError().join('\n')
  if (result?.dataType !== 'complex') throw new Error(`the simulator gave nothing: ${complaints}`)
  const found = result.data.flatMap(({ name, values }): [string, Volts][] => {
    const value = values[0]
    const node = name.toLowerCase().replace(/^v\((.*)\)$/, '$1')
    return value ? [[node, { re: value.real, im: value.img }]] : []
  })
  return new Map(found)
}
