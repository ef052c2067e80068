/** The trade's own rules of thumb. */
export const commonPracticeText = `rule_set: 1
id: common-practice
title: Common practice of the trade
edition: as passed on in shops
source: common practice, no published source
mark: practice
note: >-
  What counts as a high potential difference is not said in the trade: 3 kV rms across a full thumb, less in
  proportion to the gap, is this program's own figure.
rules:
  - clause: thumb
    advice: about a thumb (25 mm) of air between glass and whatever is at a very different potential
    between: [tube]
    and: [tube, metal]
    by: {condition: lit, value: rms}
    table_kv_mm: [[0, 0], [3, 25]]
    beyond: last
  - clause: output leads apart
    advice: keep the two output leads of an electronic supply 25 mm apart
    between: [feed]
    when: {supply: electronic, circuits: same}
    distance_mm: 25
  - clause: no metal conduit
    advice: never an electronic supply's lead in metal conduit
    when: {supply: electronic, conduit: [metal]}
    limit: {quantity: lead-m, at_most: 0}
  - clause: footage
    advice: load a transformer to 80–90 % of the maker's tube-length chart, an electrode pair counts as about 0.3 m
    when: {supply: core-and-coil}
    limit: {quantity: chart-share, at_most: 0.9, verdict: watch}
  - clause: output leads short
    advice: output leads not extended, not coiled, as short as they go, off the metal (25 mm of spacer helps much)
  - clause: long runs
    advice: electronic supplies are not for long border runs on a building
  - clause: lower voltage
    advice: lower voltage is better, two 6 kV supplies rather than one 12 kV
  - clause: frequency
    advice: electronic supplies run at 20–30 kHz
`
