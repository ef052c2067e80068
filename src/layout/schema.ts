/**
 * The form of a layout file as zod schemas: which keys, which kinds of values. Measures and references are checked
 * afterwards (bounds.ts, references.ts). The `error` of each schema is the name of a form (problems.ts), not English.
 */
import { z } from 'zod'

const number = z.number({ error: 'number' })
const text = z.union([z.string(), z.number()], { error: 'text' })
const yesNo = z.boolean({ error: 'yes-no' })
const id = z.union([z.string(), z.int()], { error: 'id' })
const end = z.union([z.string(), z.number()], { error: 'end' })

const point = z.array(number, { error: 'point' }).min(2, { error: 'point' }).max(3, { error: 'point' })
const flatPoint = z.tuple([number, number], { error: 'flat-point' })
const path = z.union([z.string(), z.array(point)], { error: 'path' })

export const fills = ['neon', 'argon-mercury', 'neon-mercury'] as const
const fill = z.enum(fills, { error: 'choice' })
const glass = z.union([z.enum(['lead', 'soda-lime', 'borosilicate']), number], { error: 'glass' })
const insulation = z.union([z.enum(['silicone', 'polyethylene']), number], { error: 'insulation' })

const tubeKeys = {
  diameter: number.optional(),
  wall: number.optional(),
  glass: glass.optional(),
  fill: fill.optional(),
  height: number.optional(),
  boots: yesNo.optional(),
}
const leadKeys = {
  conductor: number.optional(),
  diameter: number.optional(),
  insulation: insulation.optional(),
  height: number.optional(),
}

const tube = z.strictObject({ id, path, ...tubeKeys }, { error: 'mapping' })

const supply = z.strictObject(
  {
    id,
    type: z.enum(['electronic', 'core-and-coil'], { error: 'choice' }),
    no_load_kv: number,
    no_load_peak_kv: number.optional(),
    short_circuit_ma: number,
    frequency_hz: number,
    grounding: z.enum(['midpoint', 'one-end', 'none'], { error: 'choice' }),
    rated_va: number.optional(),
    open_circuit_protection: yesNo.optional(),
    ground_fault_trip_ma: number.optional(),
    max_lead_mm: number.optional(),
    chart_m: z.record(z.string(), number, { error: 'mapping' }).optional(),
    terminals: z.tuple([point, point], { error: 'terminals' }).optional(),
  },
  { error: 'mapping' },
)

const route = z.strictObject(
  {
    between: z.tuple([end, end], { error: 'between' }),
    path: path.optional(),
    conduit: z.enum(['none', 'nonmetallic', 'metal'], { error: 'choice' }).optional(),
    bore: number.optional(),
    ...leadKeys,
  },
  { error: 'mapping' },
)

const measured = z.strictObject(
  { primary_w: number.optional(), ma: z.record(z.string(), number, { error: 'mapping' }).optional() },
  { error: 'mapping' },
)

const wiringKeys = {
  supply: id,
  string: z.array(id, { error: 'string' }).min(1),
  midpoint_return: end.optional(),
  measured: measured.optional(),
}
const circuit = z.strictObject(
  { ...wiringKeys, leads: z.array(route, { error: 'list-of-routes' }).optional() },
  { error: 'mapping' },
)
const variant = z.strictObject(
  {
    name: text,
    circuits: z.array(z.strictObject(wiringKeys, { error: 'mapping' }), { error: 'list-of-circuits' }).min(1),
  },
  { error: 'mapping' },
)

const metalKeys = { id, grounded: yesNo }
const heightKey = { height: number.optional() }
/** The three kinds of metal, by the key that makes the kind. */
export const metalShapes = {
  path: z.strictObject(
    { ...metalKeys, ...heightKey, path, diameter: number.optional() },
    { error: 'mapping' },
  ),
  plate: z.strictObject(
    { ...metalKeys, ...heightKey, plate: z.tuple([flatPoint, flatPoint], { error: 'corners' }) },
    { error: 'mapping' },
  ),
  wall: z.strictObject(
    { ...metalKeys, wall: path, from: number.optional(), to: number },
    { error: 'mapping' },
  ),
} as const
export type MetalKind = keyof typeof metalShapes
export const metalKinds = ['path', 'plate', 'wall'] as const

/** The whole file; the entries of `metal` are left to metalShapes. */
export const fileShape = z.strictObject(
  {
    layout: z.literal(1, { error: 'version' }),
    title: text.optional(),
    units: z.enum(['mm', 'in'], { error: 'choice' }).optional(),
    altitude_m: number.optional(),
    face: z
      .strictObject(
        {
          size: z.tuple([number, number], { error: 'size' }).optional(),
          metal: z.enum(['none', 'grounded', 'floating'], { error: 'choice' }),
        },
        { error: 'mapping' },
      )
      .optional(),
    defaults: z
      .strictObject(
        {
          tube: z.strictObject(tubeKeys, { error: 'mapping' }).optional(),
          lead: z.strictObject(leadKeys, { error: 'mapping' }).optional(),
        },
        { error: 'mapping' },
      )
      .optional(),
    tubes: z.array(tube, { error: 'list-of-tubes' }).min(1),
    supplies: z.array(supply, { error: 'list-of-supplies' }).min(1),
    circuits: z.array(circuit, { error: 'list-of-circuits' }).min(1),
    metal: z.array(z.unknown(), { error: 'list-of-metal' }).optional(),
    rules: z
      .array(z.string({ error: 'text' }), { error: 'rules' })
      .min(1)
      .optional(),
    variants: z.array(variant, { error: 'list-of-variants' }).optional(),
  },
  { error: 'layout' },
)

/** The keys of each mapping, for suggestions; named by the key that holds it. */
export const knownKeys: Readonly<Record<string, readonly string[]>> = {
  '': Object.keys(fileShape.shape),
  face: ['size', 'metal'],
  defaults: ['tube', 'lead'],
  tube: Object.keys(tubeKeys),
  lead: Object.keys(leadKeys),
  tubes: Object.keys(tube.shape),
  supplies: Object.keys(supply.shape),
  circuits: Object.keys(circuit.shape),
  'variants.circuits': Object.keys(wiringKeys),
  leads: Object.keys(route.shape),
  measured: Object.keys(measured.shape),
  variants: Object.keys(variant.shape),
  'metal.path': Object.keys(metalShapes.path.shape),
  'metal.plate': Object.keys(metalShapes.plate.shape),
  'metal.wall': Object.keys(metalShapes.wall.shape),
}

export type FileValue = z.infer<typeof fileShape>
export type TubeValue = z.infer<typeof tube>
export type SupplyValue = z.infer<typeof supply>
export type RouteValue = z.infer<typeof route>
export type WiringValue = Pick<
  FileValue['circuits'][number],
  'supply' | 'string' | 'midpoint_return' | 'measured'
>
type BarValue = z.infer<typeof metalShapes.path>
type PlateValue = z.infer<typeof metalShapes.plate>
type WallValue = z.infer<typeof metalShapes.wall>
export type MetalValue = BarValue | PlateValue | WallValue
