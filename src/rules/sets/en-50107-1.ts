/** EN 50107-1: what could be sourced. Its table of clearances and creepage distances could not. */
export const en50107Text = `rule_set: 1
id: en-50107-1
title: Signs and luminous-discharge-tube installations, no-load voltage above 1 kV up to 10 kV
edition: 2002 with A1:2004
source: EN 50107-1, quoted by others
mark: S
note: >-
  Its table of clearances and creepage distances could not be sourced and is not here: a shop that owns the standard
  enters it in a rule file of its own.
rules:
  - clause: scope
    mark: R
    advice: the standard is for no-load voltages of 1 to 10 kV
  - clause: voltage in total
    advice: no more than 10 kV between the terminals
    limit: {quantity: no-load-kv, at_most: 10}
  - clause: voltage to earth
    advice: no terminal more than 5 kV to earth
    limit: {quantity: terminal-kv, at_most: 5}
  - clause: unscreened cable, mercury
    advice: longest run of unscreened cable by nominal kV to earth, for 50 Hz
    when:
      fill: [argon-mercury, neon-mercury]
      frequency_hz: {up_to: 100}
      terminal_kv: {up_to: 4}
      conduit: [none, nonmetallic]
    limit: {quantity: lead-m, by_terminal_kv: [[0, 40], [1, 30], [2, 20], [3, 15]]}
  - clause: unscreened cable, neon
    advice: longest run of unscreened cable by nominal kV to earth, for 50 Hz
    when:
      fill: [neon]
      frequency_hz: {up_to: 100}
      terminal_kv: {up_to: 4}
      conduit: [none, nonmetallic]
    limit: {quantity: lead-m, by_terminal_kv: [[0, 20], [1, 15], [2, 10], [3, 7.5]]}
  - clause: open-circuit device
    advice: switches off within 3–5 s if the tubes never lit, within 200 ms if the circuit opens while lit
    requires: open-circuit-protection
`
