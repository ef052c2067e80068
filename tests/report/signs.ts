/** Small invented signs for reports and commands. */

/** Two bars on a bonded rail, 60 Hz: next to no stray current, so every figure follows from the column law alone. */
export const twoBars = ({ gap = 60, noLoadKv = 6, id = 'K' } = {}): string => `layout: 1
title: Two bars
units: mm
altitude_m: 0
face: {size: [1000, 400], metal: none}
defaults:
  tube: {diameter: 12, wall: 1, glass: soda-lime, fill: neon, height: 60, boots: true}
  lead: {conductor: 1.2, diameter: 7, insulation: silicone, height: 60}
tubes:
  - {id: ${id}, path: [[100, 100], [900, 100]]}
  - {id: I, path: [[900, ${112 + gap}], [100, ${112 + gap}]]}
supplies:
  - id: S1
    type: core-and-coil
    no_load_kv: ${noLoadKv}
    short_circuit_ma: 30
    frequency_hz: 60
    grounding: midpoint
    rated_va: 180
    open_circuit_protection: true
    ground_fault_trip_ma: 15
    terminals: [[20, 60], [20, 240]]
circuits:
  - supply: S1
    string: [${id}, I]
    leads:
      - {between: [S1.1, ${id}.a], path: [[20, 60], [100, 100]], conduit: none}
      - {between: [${id}.b, I.a], path: [[900, 100], [960, ${106 + gap / 2}], [900, ${112 + gap}]], conduit: none}
      - {between: [I.b, S1.2], path: [[100, ${112 + gap}], [20, 240]], conduit: none}
metal:
  - {id: rail, path: [[0, 380], [1000, 380]], diameter: 20, height: 10, grounded: true}
rules: [common-practice]
`
