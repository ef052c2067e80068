/**
 * The trade's own rules of thumb as figures. Mark of every one: common practice, no published source.
 * What the trade does not put in figures ("a high potential difference") is ours and said to be so.
 */
export const commonPractice = {
  id: 'common-practice',
  title: 'Common practice of the trade',
  mark: 'common practice, no published source',
  thumb: {
    clause: 'thumb',
    /** m: about a thumb between tubes, and between a tube and metal, that differ by a high potential */
    gap: 0.025,
    /** V rms that a full thumb may have; less in proportion to the gap (ours) */
    voltage: 3000,
    advice: 'keep a thumb (25 mm) of air to what differs much in potential',
  },
  outputLeads: {
    clause: 'output leads apart',
    /** m between the two output leads of an electronic supply */
    gap: 0.025,
    advice: 'keep the two output leads of an electronic supply 25 mm apart',
  },
  offMetal: {
    /** m: spacer between an output lead and metal */
    gap: 0.025,
    advice: 'lift output leads off the metal: 25 mm of spacer helps much',
  },
  /** share of the maker's chart: load a core-and-coil transformer to 80–90 %, never over it */
  chart: { watch: 0.9, fix: 1 },
  /** m of chart that an electrode pair counts as */
  electrodePair: 0.3,
} as const

/** Cautions that hold for every sign and are always in view. */
export const standingCaution =
  'HIGH VOLTAGE KILLS AND STARTS FIRES. Off, locked out and discharged before touching; licensed person and local code decide.'

export const generalCautions: readonly string[] = [
  'The voltages here kill. Switch off, lock out and discharge before touching glass, leads or metal; one slip is enough.',
  'Sparks and creeping discharges start fires: keep combustible material away from leads and electrodes.',
  'Bond and ground all metal of the sign, frames and boxes included.',
  'Do not measure kilovolts with ordinary meters or probes; measure only what an instrument rated for it can take.',
  'The figures are a model of clean, dry, new glass; they do not replace an inspection. A licensed person and the local code decide.',
]
