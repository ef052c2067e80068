/** The checked values of a file → Layout in SI units, with every assumption. Runs only on files without problems. */
import { type Ledger, ledger } from './assumptions.js'
import { buildRoutes, buildSupplies, buildWiring } from './build-circuits.js'
import { buildMetal } from './build-metal.js'
import { glassOf, glassValue, insulationValue, usual, wireOf } from './defaults.js'
import type { Face, Layout, LeadDefaults, Tube, Variant } from './layout.js'
import type { Paths } from './paths.js'
import { cleaned } from './printable.js'
import { metresPerUnit, nameText } from './reading.js'
import type { FileValue, TubeValue } from './schema.js'
import type { Shaped } from './shape.js'

/** What building a part needs of the file around it. */
export interface Workshop {
  readonly file: FileValue
  readonly paths: Paths
  /** metres in a length of the file */
  readonly unit: number
  readonly ledger: Ledger
  /** a length (m) in the file's unit, with its name */
  readonly lengthText: (metres: number) => string
}

export function buildLayout({ file, metal }: Shaped, paths: Paths, name: string): Layout {
  const units = file.units ?? 'mm'
  const unit = metresPerUnit(units)
  const lengthText = (metres: number) => `${Number((metres / unit).toPrecision(3))} ${units}`
  const ids = file.tubes.map(({ id }) => nameText(id) ?? '')
  const shop: Workshop = { file, paths, unit, ledger: ledger(ids), lengthText }
  const { assume } = shop.ledger
  if (file.units === undefined) assume('lengths', 'taken as millimetres')
  if (file.altitude_m === undefined) assume('altitude', 'taken as sea level')

  const face = buildFace(shop)
  const tubes = file.tubes.map((tube, i) => buildTube(shop, tube, `tubes.${i}.path`))
  const lead = buildLead(shop)
  const supplies = buildSupplies(shop, tubes, face)
  const routes = buildRoutes(shop)
  const built = metal.map((part, i) => buildMetal(shop, part, `metal.${i}`))
  if (file.rules === undefined) assume('rules', 'common-practice alone')
  return {
    title: cleaned(nameText(file.title) ?? '') || baseName(name),
    units,
    altitude: file.altitude_m ?? 0,
    face,
    tubes,
    lead,
    supplies,
    metal: built,
    wiring: { circuits: file.circuits.map(buildWiring) },
    routes,
    variants: (file.variants ?? []).map(buildVariant),
    rules: file.rules?.map((rule) => rule.trim()) ?? usual.rules,
    assumed: shop.ledger.assumptions(),
  }
}

/** The file's name without folders and ending, where the layout has no title. */
const baseName = (file: string): string =>
  cleaned((file.split(/[\\/]/).at(-1) ?? '').replace(/\.ya?ml$/i, '')) || 'untitled'

const buildVariant = ({ name, circuits }: NonNullable<FileValue['variants']>[number]): Variant => ({
  name: cleaned(nameText(name) ?? ''),
  circuits: circuits.map(buildWiring),
})

function buildFace({ file, unit, ledger: { assume } }: Workshop): Face {
  if (!file.face) {
    assume('face', 'no metal sheet at z = 0')
    return { metal: 'none' }
  }
  const { metal, size } = file.face
  if (size) return { metal, size: [size[0] * unit, size[1] * unit] }
  if (metal !== 'none') assume('face', 'reaches under the whole sign (its size is not stated)')
  return { metal }
}

function buildTube(shop: Workshop, tube: TubeValue, at: string): Tube {
  const { file, unit, paths, lengthText } = shop
  const id = nameText(tube.id) ?? ''
  const defaults = file.defaults?.tube ?? {}
  const assume = (text: string) => shop.ledger.assume(id, text)
  const states = (key: keyof TubeValue & keyof typeof defaults) =>
    tube[key] !== undefined || defaults[key] !== undefined

  const { diameter, wall } = glassOf(file, tube, unit)
  const path = paths.get(at) ?? []
  const stated = tube.height ?? defaults.height
  const height = stated === undefined ? usual.tube.height : stated * unit
  const glass = tube.glass ?? defaults.glass ?? usual.tube.glass
  const fill = tube.fill ?? defaults.fill ?? usual.tube.fill
  if (!states('diameter')) assume(`outer diameter ${lengthText(diameter)}`)
  if (!states('wall')) assume(`glass wall ${lengthText(wall)}, usual for ${lengthText(diameter)} tube`)
  if (!states('glass')) assume(`${glass} glass`)
  if (!states('fill')) assume(`${fill} filling`)
  if (stated === undefined && path.some(({ z }) => z === undefined))
    assume(`centre-line ${lengthText(height)} in front of the face`)
  if (!states('boots')) assume('no insulating boots on the electrode connections')
  const boots = tube.boots ?? defaults.boots ?? false
  return { id, path, height, diameter, wall, permittivity: glassValue(glass), fill, boots }
}

function buildLead({ file, unit, ledger: { assume }, lengthText }: Workshop): LeadDefaults {
  const stated = file.defaults?.lead ?? {}
  const { conductor, diameter } = wireOf(file, {}, unit)
  const insulation = stated.insulation ?? usual.lead.insulation
  const height = stated.height === undefined ? usual.lead.height : stated.height * unit
  if (stated.conductor === undefined) assume('leads', `wire ${lengthText(conductor)} thick`)
  if (stated.diameter === undefined) assume('leads', `outer diameter ${lengthText(diameter)}`)
  if (stated.insulation === undefined) assume('leads', `${insulation} insulation`)
  if (stated.height === undefined) assume('leads', `run ${lengthText(height)} in front of the face`)
  return { conductor, diameter, permittivity: insulationValue(insulation), height }
}
