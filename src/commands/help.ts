/** Help texts of the commands. */
import { standingWarning } from '../view/caution-text.js'

export const usage = {
  tubewright: 'tubewright LAYOUT [--color WHEN] [--ground dark|light] [--ascii] [--air clean|cautious]',
  check:
    'tubewright check LAYOUT… [--json] [--condition lit|nameplate|broken] [--rules NAME,NAME] [--air clean|cautious] [--all]',
  why: 'tubewright check LAYOUT --why N | --symptom NAME',
  rewire: 'tubewright rewire LAYOUT [--json] [--keep A.b–C.a …] [--seed N] [--time S] [--take K --out FILE]',
  netlist: 'tubewright netlist LAYOUT [--supply ID]',
  rules: 'tubewright rules [NAME…] [--template]',
} as const

export const helpText = `tubewright – potentials, stray current and gaps of neon signs

  ${usage.tubewright}
      opens the inspector, full screen. Without LAYOUT: an example sign.
  ${usage.check}
      the findings as text or JSON
  ${usage.why}
      the number of pair N derived step by step; or what to look at when the sign hums, smells, trips …
  ${usage.rewire}
      looks for better wiring of the same glass: proposals with the steps to get there
  ${usage.netlist}
      the solved network as a SPICE deck (R, C, sources)
  ${usage.rules}
      the rule sets with clauses and sources; NAME may be a rule file, which is checked

Options
  --color auto|always|never|16|256|24bit   colours (NO_COLOR and FORCE_COLOR are respected)
  --ground dark|light                      the ground of the terminal, where it does not tell
  --ascii                                  nothing but ASCII on the screen
  --json                                   findings as JSON, one object a file
  --condition lit|nameplate|broken         what verdicts go by; lit unless said
  --rules NAME,NAME                        rule sets instead of those of the file
  --air clean|cautious                     starts of discharges: the likeliest reading of the evidence for clean
                                           air and smooth parts, or the cautious one; cautious unless said
  --supply ID                              the supply that feeds the deck of netlist; the first unless said
  --all                                    list every pair
  --why N                                  derive the verdict on pair N of the list, from the terminal on
  --symptom NAME                           hum, ozone, dark-spot, dim-far-tube, dark-tube, tripping, radio-noise;
                                           "list" lists them
  --keep A.b–C.a                           a joint of the wiring that must stay; again for more of them
  --seed N                                 of the search where there are too many wirings to try them all
  --time S                                 ends the search after S seconds, or goes on that long
  --take K --out FILE                      writes proposal K into FILE: a new one, or the layout itself
  --template                               a commented rule file for a shop's own, to stdout
  --help, --version

Keys of the inspector: ? shows them. In short: Tab walks the worst list, arrows probe freely, f feeds the
tube under the cursor from its other end, t turns it, j jumpers two ends, u undoes, s saves, q quits.

Exit status: 0 nothing to fix, 1 something to fix, 2 wrong usage or no terminal, 3 the layout cannot be
used, 70 internal error, 128+n signal n.

${standingWarning()}
`
