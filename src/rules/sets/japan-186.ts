/** Japan, interpretation of the technical standards for electrical equipment, article 186. */
export const japan186Text = `rule_set: 1
id: japan-186
title: Technical standards for electrical equipment, neon discharge lamps
edition: interpretation, article 186
source: Interpretation of the technical standards for electrical equipment (Japan), article 186, quoted by others
mark: S
note: The face is taken as the building surface, and the supply's no-load voltage as the voltage of the wire.
rules:
  - clause: wire to building surface
    advice: 20 mm up to 6 kV, 30 mm from 6 to 9 kV, 40 mm above 9 kV
    between: [lead]
    and: [face]
    by: {condition: nameplate, value: rms, of: no-load}
    table_kv_mm: [[0, 20], [6, 30], [9, 40]]
    interpolation: step
  - clause: wire to wire
    advice: 60 mm between wires
    between: [lead]
    distance_mm: 60
`
