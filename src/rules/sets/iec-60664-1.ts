/** IEC 60664-1 clearances, carried over to bare live parts of signs. */
export const iec60664Text = `rule_set: 1
id: iec-60664-1
title: Insulation coordination, clearances for steady-state or recurring peak voltage, inhomogeneous field
edition: "2020"
source: IEC 60664-1, tables F.8 and A.2
mark: S2
note: >-
  The standard is for equipment up to 1 kV and 30 kHz: its use on signs is an engineering extrapolation. Applied to
  bare live parts on the nameplate condition; above 1 kHz on 1.25 times the peak, an allowance of this program.
rules:
  - clause: table F.8
    advice: clearance of bare live parts; boots and insulation are the remedy where there is no room
    between: [bare]
    and: [bare, metal]
    when: {frequency_hz: {up_to: 1000}}
    by: {condition: nameplate, value: peak}
    table_kv_mm: &F8
      [[0.5, 0.04], [0.6, 0.06], [0.8, 0.13], [1.0, 0.26], [1.2, 0.42], [1.5, 0.76], [2, 1.27], [2.5, 1.8], [3, 2.4],
       [4, 3.8], [5, 5.7], [6, 7.9], [8, 11.0], [10, 15.2], [12, 19], [15, 25], [20, 34], [25, 44], [30, 55],
       [40, 77], [50, 100]]
    interpolation: linear
    altitude_factor: &A2 [[2000, 1], [3000, 1.14], [4000, 1.29], [5000, 1.48]]
  - clause: table F.8, above 1 kHz
    advice: clearance of bare live parts on 1.25 times the peak; boots and insulation are the remedy where there is no room
    between: [bare]
    and: [bare, metal]
    when: {frequency_hz: {above: 1000}}
    by: {condition: nameplate, value: peak, times: 1.25}
    table_kv_mm: *F8
    interpolation: linear
    altitude_factor: *A2
`
