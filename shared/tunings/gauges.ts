/**
 * Strings by gauge. Unit weights in 10⁻⁵ lb/in from a maker's chart (D'Addario, as transcribed in the zmoon/stringcalc repository,
 * daddario-tension.csv; each row recomputed here against its published tension). Another maker's .012 weighs 3.40: figures differ by
 * ±7 percent between makers. One public copy of the chart shifts the bronze rows after .035; this is not that copy.
 */
export type StringKind = 'plain' | 'bronze' | 'nickel'

/** The most by which makers differ in the weight of the same gauge. */
export const MAKER_SPREAD = 0.07
export const SPREAD_NOTE = 'Makers differ by up to 7 percent for the same gauge, so read every tension as ±7 percent.'

type Row = readonly [inches: number, weight: number]

const CHART: Record<StringKind, readonly Row[]> = {
  plain: [[0.010, 2.215], [0.011, 2.680], [0.012, 3.190], [0.013, 3.744], [0.014, 4.342], [0.016, 5.671], [0.017, 6.402]],
  bronze: [[0.024, 11.682], [0.026, 13.640], [0.032, 21.018], [0.035, 25.365], [0.042, 36.722], [0.045, 41.751], [0.053, 56.962], [0.056, 63.477]],
  nickel: [[0.026, 12.671], [0.036, 23.964], [0.046, 38.216]],
}

/** Sizes sold beside those of the chart (from memory); their weights are calculated. */
const ALSO_SOLD: Record<StringKind, readonly number[]> = {
  plain: [0.008, 0.009, 0.0095, 0.0105, 0.0115, 0.0135, 0.015, 0.018, 0.019, 0.020],
  bronze: [0.025, 0.027, 0.028, 0.030, 0.034, 0.036, 0.038, 0.039, 0.044, 0.046, 0.047, 0.048, 0.049, 0.050, 0.052, 0.054],
  nickel: [0.028, 0.030, 0.032, 0.034, 0.038, 0.040, 0.042, 0.044],
}

/** Solid wire weighs with the square of its diameter; the chart's own .012, 7.81 g/cm³, sets the density. */
const PLAIN_FACTOR = 3.190 / 12 ** 2

/** Weight between two rows of the chart: a straight line through their logarithms, since weight goes with a power of the diameter. */
function between(rows: readonly Row[], inches: number): number | null {
  const above = rows.findIndex(([diameter]) => diameter >= inches)
  const [high, low] = [rows[above], rows[above - 1]]
  if (!high || !low) return null
  const power = Math.log(high[1] / low[1]) / Math.log(high[0] / low[0])
  return low[1] * (inches / low[0]) ** power
}

const plainWeight = (inches: number): number | null =>
  (inches >= 0.006 && inches <= 0.026 ? PLAIN_FACTOR * (inches * 1000) ** 2 : null)

const isSameSize = (a: number, b: number): boolean => Math.abs(a - b) < 1e-6

/**
 * Pounds to the inch of a string.
 * @param inches diameter: plain .006 to .026, wound within the chart
 * @returns null where no source reaches that far
 */
export function unitWeight(kind: StringKind, inches: number): number | null {
  const charted = CHART[kind].find(([diameter]) => isSameSize(diameter, inches))?.[1]
  const weight = charted ?? (kind === 'plain' ? plainWeight(inches) : between(CHART[kind], inches))
  return weight === null ? null : weight * 1e-5
}

export interface Gauge {
  readonly kind: StringKind
  /** Outer diameter in inches, as the trade names it. */
  readonly inches: number
}

export interface SoldGauge extends Gauge {
  /** Weight read off the maker's chart, or calculated from it. */
  readonly source: 'chart' | 'calculated'
}

/** All gauges of a kind, thinnest first. */
export const gaugesOf = (kind: StringKind): readonly SoldGauge[] => [
  ...CHART[kind].map(([inches]): SoldGauge => ({ kind, inches, source: 'chart' })),
  ...ALSO_SOLD[kind].map((inches): SoldGauge => ({ kind, inches, source: 'calculated' })),
].sort((a, b) => a.inches - b.inches)

/** ".012", ".024 bronze". */
export const gaugeLabel = ({ kind, inches }: Gauge): string =>
  inches.toFixed(4).replace(/^0/, '').replace(/0$/, '') + (kind === 'plain' ? '' : ` ${kind}`)

/** Core of a wound string in inches where it was measured (stepheneb/guitarcompensation, to .001, so stress is good to ±8 percent). */
const MEASURED_CORES: readonly { kind: StringKind, outer: number, core: number }[] = [{ kind: 'bronze', outer: 0.024, core: 0.013 }]

/** Diameter of the steel that bears the load: all of a plain string, the core of a wound one; null where no measurement is known. */
export const coreInches = ({ kind, inches }: Gauge): number | null =>
  (kind === 'plain' ? inches : MEASURED_CORES.find(each => each.kind === kind && isSameSize(each.outer, inches))?.core ?? null)
