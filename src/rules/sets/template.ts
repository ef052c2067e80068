/** What `tubewright rules --template` writes: a rule file for a shop's own, with every key explained. */
export const ruleTemplate = `# A shop's own rule set. Save it beside the layout, change it, and name it there:
#   rules: [common-practice, our-shop.yaml]
# The local code and a licensed person decide; this file only holds what they ask for.
rule_set: 1                       # format number, required
id: our-shop                      # shown with every verdict; lower-case letters, digits and dashes
title: Rules of our shop
edition: "2026"
source: our own practice          # where the figures come from
mark: own                         # R read in the text, S second-hand, S2 two codings agree, M from memory, practice, own
note: What must be said with the set as a whole.

rules:
  # A fixed distance between two kinds of parts. It changes the verdict only.
  # Words for parts: tube (glass: away from its ends, electrode: its ends, bare: ends without boots),
  # lead (feed: to the supply, jumper: between tubes), metal (grounded, floating, face), any.
  # Without "and", both sides are of the kinds in "between".
  - clause: glass off the metal
    advice: keep glass 10 mm off metal       # printed with the verdict
    between: [glass]
    and: [metal]
    distance_mm: 10

  # A distance by voltage, straight between the rows. It gives the severity, too.
  - clause: bare parts
    advice: more room for bare parts, or boots on them
    between: [bare]
    and: [bare, metal]
    by: {condition: nameplate, value: peak, of: difference, times: 1}
    # condition lit, nameplate or broken (a tube open); value rms or peak; of difference, to-ground (the higher one) or no-load (the supply's);
    # times: the voltage is multiplied with this first
    table_kv_mm: [[1, 1], [5, 10], [10, 25]]
    interpolation: linear                    # linear or step
    beyond: slope                            # above the last row: slope (goes on) or last (stays)
    altitude_factor: [[2000, 1], [4000, 1.29]]

  # Steps: 20 mm above 0 kV, 30 mm above 6 kV.
  - clause: leads off the face
    between: [lead]
    and: [face]
    by: {of: no-load}
    table_kv_mm: [[0, 20], [6, 30]]
    interpolation: step

  # When a rule applies: all that is given must hold.
  - clause: leads in plastic conduit
    between: [lead]
    and: [grounded]
    from: conduit                            # the distance counts from the conduit, not from the lead
    when:
      supply: electronic                     # or core-and-coil
      grounding: [midpoint, one-end, none]
      frequency_hz: {above: 100}             # above (not included), up_to (included), or both
      no_load_kv: {up_to: 15}                # between the terminals of the supply
      terminal_kv: {up_to: 7.5}              # a terminal to ground
      conduit: [nonmetallic]                 # none, nonmetallic, metal
      kv: {above: 0}                         # the voltage the rule goes by
    distance_mm: 45

  # Only between leads of one supply (or of two: different).
  - clause: two output leads
    between: [feed]
    when: {circuits: same}
    distance_mm: 25

  # With one tube broken (open), where the supply would not switch off.
  - clause: one tube broken
    between: [tube]
    and: [tube, metal]
    when: {open_circuit_protection: false}   # true or false: what the layout says of the supply
    by: {condition: broken}
    table_kv_mm: [[0, 0], [9, 30]]

  # Small loose metal near glass.
  - clause: loose clips
    between: [tube]
    and: [floating]
    when: {metal_mm: {up_to: 50}}            # length of the metal
    distance_mm: 19

  # A limit on a quantity of the circuit: no-load-kv, terminal-kv, needed-kv, short-circuit-ma, terminal-ma, residual-ma,
  # rated-va, mains-va, load (needed over no-load voltage), chart-share (of the maker's chart), tube-m,
  # lead-m (each lead), output-lead-m (each lead to the supply), all-leads-m (together).
  - clause: load
    advice: leave the supply some room
    limit: {quantity: load, at_most: 0.7, verdict: watch}     # verdict fix or watch; fix unless said

  # A limit by the no-load voltage of a terminal to ground: 20 m above 0 kV, 10 m above 2 kV.
  - clause: long leads
    when: {fill: [neon]}                     # neon, argon-mercury, neon-mercury
    limit: {quantity: lead-m, by_terminal_kv: [[0, 20], [2, 10]]}

  # Something the supply must have and the layout must say: ground-fault-protection or open-circuit-protection.
  - clause: protection
    requires: ground-fault-protection

  # EN 50107-1 has a table of clearances that could not be shipped. A shop that owns the standard enters it here,
  # with its own figures in place of the dots:
  # - clause: clearances
  #   source: EN 50107-1:2002, table …
  #   mark: R
  #   between: [bare]
  #   and: [bare, metal]
  #   by: {condition: nameplate, value: rms, of: to-ground}
  #   table_kv_mm: [[…, …], […, …]]
  #   interpolation: step

  # What a layout cannot show: listed with the set, not judged.
  - clause: by eye
    advice: look for cracked boots and dirty glass
`
