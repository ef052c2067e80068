/** California, Title 8: live terminals and conductors to grounded metal. */
export const caTitle8Text = `rule_set: 1
id: ca-title8-2973
title: California Code of Regulations, Title 8, high-voltage electrical safety orders
edition: section 2973
source: California Code of Regulations, Title 8, section 2973(b)
mark: R
rules:
  - clause: §2973(b)
    advice: 38 mm between live terminals or conductors and grounded metal
    between: [electrode, lead]
    and: [grounded]
    distance_mm: 38
`
