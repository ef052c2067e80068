/** National Electrical Code (USA), article 600: the points that bear on gaps, leads and supplies. */
export const nec600Text = `rule_set: 1
id: nec-600
title: National Electrical Code, Article 600 Electric Signs and Outline Lighting
edition: 2017 and 2020, identical on these points
source: NFPA 70, Article 600
mark: R
note: >-
  The code has no figure for tube to tube. Its 6 mm for glass is less than the clearance of bare parts above about
  3.6 kV rms, so electrodes are judged by California's rule instead.
rules:
  - clause: 600.32(E)
    advice: high-voltage conductors 38 mm from each other and from everything except insulators and tubing, at any voltage
    between: [lead]
    and: [lead, metal]
    when: {conduit: [none, nonmetallic]}
    distance_mm: 38
  - clause: 600.32(A)(4)
    advice: nonmetallic conduit 38 mm from grounded parts up to 100 Hz
    between: [lead]
    and: [grounded]
    when: {conduit: [nonmetallic], frequency_hz: {up_to: 100}}
    from: conduit
    distance_mm: 38
  - clause: 600.32(A)(4)
    advice: nonmetallic conduit 45 mm from grounded parts above 100 Hz
    between: [lead]
    and: [grounded]
    when: {conduit: [nonmetallic], frequency_hz: {above: 100}}
    from: conduit
    distance_mm: 45
  - clause: 600.41(C)
    advice: tubing 6 mm from the nearest surface other than its support
    between: [glass]
    and: [metal]
    distance_mm: 6
  - clause: California Title 8 §2973(b)
    source: California Code of Regulations, Title 8, section 2973(b)
    advice: 38 mm between live terminals and grounded metal; used at electrodes, where 6 mm would be too little
    between: [electrode]
    and: [grounded]
    distance_mm: 38
  - clause: 600.7(B)(5)
    advice: tubing 19 mm from small metal parts (up to 50 mm) that are not bonded
    between: [tube]
    and: [floating]
    when: {metal_mm: {up_to: 50}}
    distance_mm: 19
  - clause: 600.23(C)
    advice: no more than 15 kV nominal between the terminals
    limit: {quantity: no-load-kv, at_most: 15}
  - clause: 600.23(C)
    advice: no terminal more than 7.5 kV to ground
    limit: {quantity: terminal-kv, at_most: 7.5}
  - clause: 600.23(D)
    advice: no more than 300 mA
    limit: {quantity: short-circuit-ma, at_most: 300}
  - clause: 600.23(B)
    advice: secondary-circuit ground-fault protection, except integral glass or porcelain housings
    when: {grounding: [midpoint, one-end]}
    requires: ground-fault-protection
  - clause: 600.23(B)
    advice: secondary-circuit ground-fault protection, except isolated secondaries up to 7.5 kV
    when: {grounding: [none], no_load_kv: {above: 7.5}}
    requires: ground-fault-protection
  - clause: 600.32(J)(1)
    advice: from terminal to first electrode no more than 6 m in metal conduit
    when: {conduit: [metal]}
    limit: {quantity: output-lead-m, at_most: 6}
  - clause: 600.32(J)(1)
    advice: from terminal to first electrode no more than 15 m in nonmetallic conduit
    when: {conduit: [nonmetallic]}
    limit: {quantity: output-lead-m, at_most: 15}
  - clause: 600.21(B)
    advice: supply as near the tubing as practicable, secondary conductors as short as possible
  - clause: 600.23(E)
    advice: secondaries not in series and not in parallel
  - clause: 600.32(G)
    advice: insulation reaches 65 mm or more beyond metal conduit
  - clause: 600.41(B), 600.42(D)
    advice: tubing supported within 150 mm of the electrode connection
`
