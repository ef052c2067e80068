/** The steps of a proposal in the words of the shop. */
import type { RewireStep } from '../rewire/steps.js'

export function rewireStepText(step: RewireStep): string {
  switch (step.kind) {
    case 'leave':
      return 'leave the wiring as it is'
    case 'power-off':
      return 'power off, locked out and discharged; check that it is dead'
    case 'take-off':
      return `take off the ${lead[step.what]} ${step.joint.join('–')}`
    case 'put-on':
      return `put on the ${lead[step.what]} ${step.joint.join('–')}`
    case 'feed':
      return `the feed of ${step.supply} now goes to ${step.ends[0]} (terminal 1) and ${step.ends[1]} (terminal 2)`
    case 'check':
      return 'check spacing and supports of every lead that was touched, boots and insulation on'
    case 'power-up':
      return 'power up, look for even light and listen for hissing; do not touch'
  }
}

const lead = { jumper: 'jumper', feed: 'feed lead' } as const
