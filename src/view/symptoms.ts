/**
 * From what is heard, smelt or seen to the figures of this sign that bear on it, and to what no figure here can show.
 * Facts of the trade stand under their own title: common practice, no published source.
 */
import type { LeadSaving } from '../rules/lead-savings.js'
import type { Explanation, ExplanationPart } from './explanation.js'
import {
  airLines,
  currentLines,
  darkLines,
  floatingLines,
  leadsOf,
  loadLines,
  neighbourLines,
  soundLines,
  strayLines,
  tripLines,
  weakestLines,
} from './symptom-figures.js'
import type { WhySign } from './why-walk.js'

export type Symptom =
  | 'hum'
  | 'ozone'
  | 'dark-spot'
  | 'dim-far-tube'
  | 'dark-tube'
  | 'tripping'
  | 'radio-noise'

interface SymptomKind {
  readonly name: string
  readonly figures: (sign: WhySign, savings: readonly LeadSaving[] | undefined) => readonly ExplanationPart[]
  readonly practice: readonly string[]
  readonly unseen: readonly string[]
}

const off = 'Off, locked out and discharged before anything is touched.'

const kinds: Record<Symptom, SymptomKind> = {
  hum: {
    name: 'hum',
    figures: (sign) => [
      { title: 'What can sound', lines: soundLines(sign) },
      { title: 'Gaps nearest to a discharge', lines: airLines(sign) },
      { title: 'Load', lines: loadLines(sign) },
    ],
    practice: [
      'Hum at twice the mains frequency comes from iron: loose laminations, a cover or a mounting that rings.',
      'A hiss or a fry that comes and goes with damp is a discharge: look where glass, lead and metal nearly touch.',
      off,
    ],
    unseen: [
      'loose iron, covers and tube supports',
      'dirt and damp on glass and leads, along which discharges creep',
      'cracked boots and chafed insulation',
    ],
  },
  ozone: {
    name: 'ozone',
    figures: (sign) => [
      { title: 'Gaps nearest to a discharge', lines: airLines(sign) },
      { title: 'Metal that is not grounded', lines: floatingLines(sign) },
    ],
    practice: [
      'Ozone is air under discharge: the place shows as a faint glow in full darkness, or as a white or chalky trace on insulation.',
      'About a thumb of air, or the lead lifted off the metal, ends most of it.',
      off,
    ],
    unseen: [
      'dirt, salt and damp, which let a discharge start far below the figures of clean, dry glass',
      'cracked boots, pinholes in insulation, sharp ends of wire',
      'parts that have moved since the drawing',
    ],
  },
  'dark-spot': {
    name: 'dark spot',
    figures: (sign) => [
      { title: 'Where other parts pull hardest at the glass', lines: neighbourLines(sign) },
      { title: 'Least current along each tube', lines: weakestLines(sign) },
      { title: 'Gaps nearest to a discharge', lines: airLines(sign) },
    ],
    practice: [
      'A spot that stays where another part passes close by is pulled there; a spot that wanders is gas or mercury.',
      'Blackened glass at an end is a worn electrode.',
      off,
    ],
    unseen: [
      'mercury that has migrated to one end or lies cold',
      'contaminated glass or gas, stains in the coating',
      'electrodes that have failed or sputtered',
    ],
  },
  'dim-far-tube': {
    name: 'dim far tube',
    figures: (sign, savings) => [
      { title: 'Current along the string', lines: currentLines(sign) },
      { title: 'Where the current goes', lines: strayLines(sign) },
      { title: 'Output leads', lines: leadsOf(sign, savings) },
      { title: 'Load', lines: loadLines(sign) },
    ],
    practice: [
      'Output leads as short as they go and off the metal; electronic supplies are not for long runs on metal.',
      'Put the dimmest tube next to a terminal: if it stays dim there, it is the tube.',
      off,
    ],
    unseen: [
      'mercury that has migrated, and cold: mercury tubes are dim until warm',
      'aged or contaminated tubes, failed electrodes',
      'what the supply really gives: its milliamps are taken from the nameplate',
    ],
  },
  'dark-tube': {
    name: 'dark tube',
    figures: (sign) => [
      { title: 'Does the string light?', lines: darkLines(sign) },
      { title: 'Load', lines: loadLines(sign) },
      { title: 'Current along the string', lines: currentLines(sign) },
    ],
    practice: [
      'One dark tube in a string that burns is bridged by a discharge or has lost its gas; a whole string dark is an open circuit or a supply that has shut down.',
      off,
    ],
    unseen: [
      'failed electrodes, cracked glass, lost gas',
      'a broken joint or lead, a cracked boot that bridges a tube to metal',
      'a supply that is defective or has shut itself down',
    ],
  },
  tripping: {
    name: 'tripping',
    figures: (sign, savings) => [
      { title: 'Current back through ground', lines: tripLines(sign) },
      { title: 'Leads', lines: leadsOf(sign, savings) },
      { title: 'Load', lines: loadLines(sign) },
      { title: 'Gaps nearest to a discharge', lines: airLines(sign) },
    ],
    practice: [
      'Supplies trip on current to ground, on an open circuit and on too much load: find out which by the order in which it happens.',
      'Equal halves on both sides of a grounded midpoint balance each other.',
      off,
    ],
    unseen: [
      'wet or dirty insulation, cracked boots, a lead chafed through: leakage that is not capacitance',
      'a device on the mains side that trips, and what else hangs on it',
      'failed electrodes that open the circuit when warm',
    ],
  },
  'radio-noise': {
    name: 'radio noise',
    figures: (sign) => [
      { title: 'Gaps nearest to a discharge', lines: airLines(sign) },
      { title: 'Metal that is not grounded', lines: floatingLines(sign) },
      { title: 'What sends', lines: soundLines(sign) },
      { title: 'Where the current goes', lines: strayLines(sign) },
    ],
    practice: [
      'A discharge sends over the whole band; a bad joint that sparks does the same. Metal that is not bonded charges and sparks to its neighbour.',
      'Leads kept short and away from other wiring send least.',
      off,
    ],
    unseen: [
      'loose joints, arcing switches, a supply without its filter',
      'cracked boots and damp, where discharges start early',
      'what the mains wiring carries out of the sign',
    ],
  },
}

/** The symptoms with their words, in the order in which they are listed. */
export const symptoms: readonly { readonly symptom: Symptom; readonly name: string }[] = (
  ['hum', 'ozone', 'dark-spot', 'dim-far-tube', 'dark-tube', 'tripping', 'radio-noise'] as const
).map((symptom) => ({ symptom, name: kinds[symptom].name }))

/** By its name, with blanks or hyphens. */
export const symptomNamed = (text: string): Symptom | undefined =>
  symptoms.find(
    ({ symptom }) =>
      symptom ===
      text
        .trim()
        .toLowerCase()
        .replaceAll(/[\s_-]+/g, '-'),
  )?.symptom

/** Do the sheets of this symptom tell what laying the output leads otherwise gives back? */
export const aboutLeads = (symptom: Symptom): boolean => symptom === 'tripping' || symptom === 'dim-far-tube'

/** `savings`: what laying the output leads otherwise gives back, where it was computed. */
export function symptomSheet(sign: WhySign, symptom: Symptom, savings?: readonly LeadSaving[]): Explanation {
  const { name, figures, practice, unseen } = kinds[symptom]
  return {
    head: `Symptom: ${name}. The figures of this sign to look at`,
    parts: [
      ...figures(sign, savings),
      { title: 'Common practice, no published source', lines: practice },
      { title: 'What this program cannot see', lines: unseen },
    ],
  }
}
