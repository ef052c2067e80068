/** `check --json`: the findings in a form that stays. kV and mA rms, mm, degrees. Absent is absent, never 0. */
import type { Inspection } from '../inspection.js'
import type { Layout } from '../layout/layout.js'
import { type Complex, degrees, magnitude } from '../math/complex.js'
import type { MeasuredCircuit, MeasuredFigure } from '../network/calibration.js'
import { lawBand } from '../network/lit.js'
import type {
  CircuitFinding,
  EndState,
  LeadFinding,
  PairFinding,
  Spot,
  TubeFinding,
} from '../rules/findings.js'
import { cautionText, generalCautions } from '../view/caution-text.js'

const rounded = (value: number, decimals: number): number => Number(value.toFixed(decimals))
const kv = (volts: number): number => rounded(volts / 1000, 4)
const ma = (amperes: number): number => rounded(amperes * 1000, 3)
const mm = (length: number): number => rounded(length * 1000, 2)

export function checkJson(file: string, layout: Layout, inspection: Inspection): object {
  return {
    result: 1,
    file,
    title: layout.title,
    air: inspection.context.air === 'best' ? 'clean' : 'cautious',
    circuits: inspection.circuits.map(circuitJson),
    pairs: inspection.pairs.map(pairJson),
    floating: inspection.floating.map((f) => ({
      id: f.id,
      kv: kv(f.voltage),
      ...(f.touch !== undefined && { touch_ma: ma(f.touch) }),
    })),
    assumed: layout.assumed.map((a) => `${a.about}: ${a.text}`),
    cautions: [...inspection.cautions.map((c) => cautionText(c, layout.units)), ...generalCautions],
  }
}

function circuitJson(c: CircuitFinding): object {
  // phases are against terminal 1 of the part's own supply
  const reference = c.terminals[0] ? degrees(c.terminals[0].voltage) : 0
  const phase = (z: Complex): number => rounded(wrapped(degrees(z) - reference), 2)
  return {
    supply: c.supply,
    lit: c.lit,
    dark: c.dark,
    ...(c.why && { why: c.why }),
    ...(c.neededVoltage !== undefined && { needed_kv: kv(c.neededVoltage) }),
    no_load_kv: kv(c.noLoadVoltage),
    ...(c.load !== undefined && { load: rounded(c.load, 4) }),
    ...(c.power !== undefined && { power_w: rounded(c.power, 2) }),
    ...(c.stray !== undefined && { stray_ma: ma(c.stray) }),
    ...(c.residual !== undefined && { residual_ma: ma(c.residual) }),
    ...(c.measured && { measured: measuredJson(c.measured) }),
    tube_m: rounded(c.tubeLength, 3),
    electrode_pairs: c.electrodePairs,
    verdict: c.verdict,
    loadings: c.loadings.map((l) => ({ by: l.by, share: rounded(l.share, 3), verdict: l.verdict })),
    terminals: c.terminals.map((t) => ({
      end: t.end,
      kv: kv(magnitude(t.voltage)),
      deg: phase(t.voltage),
      ma: ma(magnitude(t.current)),
      ma_deg: phase(t.current),
    })),
    tubes: c.tubes.map((t) => tubeJson(t, phase)),
    leads: c.leads.map(leadJson),
  }
}

/** computed: by the law without what was measured */
const measuredJson = (m: MeasuredCircuit): object => ({
  ...(m.primaryPower && { primary_w: figureJson(m.primaryPower, (watts) => rounded(watts, 2)) }),
  ...(m.currents.length > 0 && {
    ma: Object.fromEntries(m.currents.map((current) => [current.end, figureJson(current, ma)])),
  }),
  ...(m.factor !== undefined && { law_factor: rounded(m.factor, 4) }),
  band: rounded(lawBand(m.factor), 4),
})
const figureJson = ({ measured, computed }: MeasuredFigure, figure: (value: number) => number): object => ({
  measured: figure(measured),
  ...(computed !== undefined && { computed: figure(computed) }),
})

const wrapped = (angle: number): number => ((((angle + 180) % 360) + 360) % 360) - 180

function tubeJson(t: TubeFinding, phase: (z: Complex) => number): object {
  const end = (state: EndState | undefined, nameplate: number) => ({
    ...(state && {
      kv: kv(magnitude(state.voltage)),
      deg: phase(state.voltage),
      ma: ma(magnitude(state.current)),
    }),
    nameplate_kv: kv(nameplate),
  })
  return {
    id: t.id,
    length_mm: mm(t.length),
    ...(t.drop !== undefined && { drop_kv: kv(t.drop) }),
    a: end(t.a, t.nameplateA),
    b: end(t.b, t.nameplateB),
    ...(t.least && { min_ma: ma(t.least.current), min_at_mm: mm(t.least.at) }),
    ...(t.stray !== undefined && { stray_ma: ma(t.stray) }),
    ...(t.toGround !== undefined && { to_ground_ma: ma(t.toGround) }),
    ...(t.toNeighbours !== undefined && { to_neighbours_ma: ma(t.toNeighbours) }),
  }
}

const leadJson = (l: LeadFinding): object => ({
  between: l.between,
  role: l.role,
  length_mm: mm(l.length),
  route: l.assumed ? 'assumed' : 'drawn',
  ...(l.voltage !== undefined && { kv: kv(l.voltage) }),
  nameplate_kv: kv(l.nameplate),
  ...(l.stray !== undefined && { stray_ma: ma(l.stray) }),
  ...(l.toGround !== undefined && { to_ground_ma: ma(l.toGround) }),
  ...(l.toNeighbours !== undefined && { to_neighbours_ma: ma(l.toNeighbours) }),
})

const spotJson = (spot: Spot): object =>
  spot.kind === 'face'
    ? { part: 'face' }
    : {
        part: spot.part,
        at_mm: mm(spot.at),
        x: mm(spot.point[0]),
        y: mm(spot.point[1]),
        z: mm(spot.point[2]),
      }

function pairJson(p: PairFinding): object {
  const d = p.difference
  return {
    kind: p.kind,
    a: spotJson(p.a),
    b: spotJson(p.b),
    gap_mm: mm(p.gap),
    difference_kv: {
      ...(d.lit !== undefined && { lit: kv(d.lit) }),
      ...(d.litLow !== undefined && { lit_low: kv(d.litLow) }),
      ...(d.litHigh !== undefined && { lit_high: kv(d.litHigh) }),
      nameplate: kv(d.nameplate),
      broken: kv(d.broken),
    },
    ...(d.openTubes.length > 0 && { open_tubes: d.openTubes }),
    air: {
      peak_kv: kv(p.air.peak),
      starts_at_kv: kv(p.air.startsAt),
      ...(p.air.open && { open_peak_kv: kv(p.air.open.peak), open_counts: p.air.open.counted }),
    },
    rules: p.rules.map((r) => ({ set: r.set, clause: r.clause, needs_mm: mm(r.needs), ok: r.ok })),
    severity: rounded(p.severity, 3),
    verdict: p.verdict,
    governs: p.governs,
    ...(p.unsure && { unsure: true }),
  }
}
