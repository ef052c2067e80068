/** A layout with every key the format has; invented. */
export const kiosk = `layout: 1                         # format number, required
title: Harbour Kiosk, window sign
units: mm                         # mm | in
altitude_m: 0
face: {size: [900, 400], metal: grounded}
defaults:
  tube: {diameter: 12, wall: 1, glass: soda-lime, fill: neon, height: 40}
  lead: {conductor: 1.2, diameter: 7, insulation: silicone, height: 20}
tubes:
  - id: K
    path: [[60, 60], [60, 300], [160, 60]]
  - id: I
    path: "M 220 60 V 200 A 40 40 0 0 0 300 200"
    height: 35
    fill: argon-mercury
    glass: lead
    boots: true
  - id: O
    path: "M 480 180 A 70 70 0 1 1 479 180"
    diameter: 15
    wall: 1.1
  - id: S
    path: [[640, 80, 40], [560, 80, 40], [560, 180, 52], [640, 180, 40]]
supplies:
  - id: S1
    type: electronic
    no_load_kv: 8
    no_load_peak_kv: 12
    short_circuit_ma: 30
    frequency_hz: 24000
    grounding: midpoint
    rated_va: 150
    open_circuit_protection: true
    ground_fault_trip_ma: 15
    max_lead_mm: 900
    chart_m: {neon-12: 6.5, neon-15: 8}
    terminals: [[400, 380, 30], [440, 380, 30]]
circuits:
  - supply: S1
    string: [K, I, -O, S]
    leads:
      - {between: [S1.1, K.a], path: [[400, 380], [60, 380], [60, 60]], height: 8}
      - {between: [I.b, O.b], conduit: metal, bore: 16}
    midpoint_return: I.b
    measured: {primary_w: 96, ma: {K.a: 28}}
metal:
  - {id: frame, path: [[0, 0], [900, 0], [900, 400], [0, 400], [0, 0]], diameter: 20, height: 10, grounded: true}
  - {id: backplate, plate: [[300, 100], [600, 300]], height: 0, grounded: false}
  - {id: return, wall: [[50, 40], [210, 40], [210, 320]], from: 0, to: 90, grounded: true}
rules: [common-practice, nec-600]
variants:
  - name: feed behind the O
    circuits: [{supply: S1, string: [-O, S, K, I]}]
`
