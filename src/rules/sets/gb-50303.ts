/** China, GB 50303. */
export const gb50303Text = `rule_set: 1
id: gb-50303
title: Code of acceptance of construction quality of electrical installation in building
edition: "2002"
source: GB 50303-2002, clause 21.1.2
mark: R
note: The face is taken as the building surface.
rules:
  - clause: 21.1.2
    advice: tubes and secondary wires 20 mm or more from the building surface
    between: [tube, lead]
    and: [face]
    distance_mm: 20
`
