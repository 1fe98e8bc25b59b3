import fc from 'fast-check'
import type { CheckElement, CheckOutlet, CheckRequest } from '#shared/contracts/check.ts'
import { checkLimits, maxCurvePoints, maxDraws, maxElements, maxOutlets } from '#shared/contracts/limits.ts'
import type { Range } from '#shared/contracts/limits.ts'

/** every run draws the same rigs */
export const seed = 20260

/** 0 to 1, even: a library's double is even over its bits instead, and so nearly always next to nothing. */
const part = fc.integer({ min: 0, max: 2 ** 30 }).map((count) => count / 2 ** 30)

/** Log-uniform over a range; one that begins at nothing gives nothing every fourth time. */
function spread({ min, max }: Range, decades = 4): fc.Arbitrary<number> {
  const least = min > 0 ? min : max / 10 ** decades
  const positive = part.map((at) => Math.min(max, Math.max(least, least * (max / least) ** at)))
  return min > 0
    ? positive
    : fc.oneof({ weight: 1, arbitrary: fc.constant(0) }, { weight: 3, arbitrary: positive })
}

const even = ({ min, max }: Range) => part.map((at) => Math.min(max, min + (max - min) * at))

/** The ranges a rig is drawn from: all that the contract lets through, or what is seen behind a truck. */
export type Reach = 'declared' | 'realistic'

const realisticLimits: typeof checkLimits | Record<keyof typeof checkLimits, Range> = {
  ...checkLimits,
  altitudeM: { min: 0, max: 3000 },
  airTemperatureC: { min: -10, max: 45 },
  barometerKpa: { min: 70, max: 103 },
  freeAirM3Min: { min: 2.5, max: 45 },
  curvePressureKpa: { min: 300, max: 1200 },
  setPressureKpa: { min: 690, max: 1035 },
  unloadPressureKpa: { min: 760, max: 1250 },
  conditionFactor: { min: 0.8, max: 1 },
  lineTemperatureRiseK: { min: 0, max: 40 },
  insideDiameterMm: { min: 19, max: 51 },
  lengthM: { min: 1, max: 60 },
  roughnessMm: { min: 0.005, max: 0.05 },
  lossK: { min: 0.5, max: 10 },
  mediaFactor: { min: 1, max: 1.5 },
  boreMm: { min: 4.7, max: 13 },
  dischargeCoefficient: { min: 0.75, max: 0.97 },
  airTakenFirstM3Min: { min: 0.1, max: 1 },
  regulatorKpa: { min: 300, max: 900 },
  targetNozzlePressureKpa: { min: 300, max: 850 },
}

/** Bodies of a pressure check. Curves closer than a kilopascal, which make the delivery jump, only when asked for. */
export function checkBodies(reach: Reach, { withJumps = false } = {}): fc.Arbitrary<CheckRequest> {
  const limits = reach === 'declared' ? checkLimits : realisticLimits
  const counts =
    reach === 'declared'
      ? { elements: maxElements, points: maxCurvePoints, draws: maxDraws }
      : { elements: 4, points: 6, draws: 2 }

  const element: fc.Arbitrary<CheckElement> = fc.record(
    {
      insideDiameterMm: spread(limits.insideDiameterMm),
      lengthM: spread(limits.lengthM),
      roughnessMm: spread(limits.roughnessMm),
      lossK: spread(limits.lossK),
      mediaFactor: even(limits.mediaFactor),
    },
    { requiredKeys: ['insideDiameterMm'] },
  )
  const line = fc.oneof(
    fc.array(element, { maxLength: 2 }),
    fc.array(element, { maxLength: counts.elements, size: 'max' }),
  )
  const nozzle = fc.record(
    { boreMm: spread(limits.boreMm), dischargeCoefficient: spread(limits.dischargeCoefficient) },
    { requiredKeys: ['boreMm'] },
  )
  const outlet: fc.Arbitrary<CheckOutlet> = fc
    .record({
      line,
      nozzle,
      regulatorKpa: fc.oneof(
        { weight: 4, arbitrary: fc.constant(undefined) },
        { weight: 1, arbitrary: spread(limits.regulatorKpa) },
      ),
    })
    .map(({ regulatorKpa, ...rest }) => (regulatorKpa === undefined ? rest : { ...rest, regulatorKpa }))

  const curve = fc
    .array(fc.tuple(even(limits.curvePressureKpa), spread(limits.freeAirM3Min)), {
      minLength: 1,
      maxLength: counts.points,
      size: 'max',
    })
    .map((points) => {
      const pressures = points.map(([pressure]) => pressure).sort((a, b) => a - b)
      const airs = points.map(([, air]) => air).sort((a, b) => b - a)
      const gap = withJumps ? 0 : 1
      return pressures
        .map((pressureKpa, i) => ({ pressureKpa, freeAirM3Min: airs[i]! }))
        .filter((point, i) => i === 0 || point.pressureKpa > pressures[i - 1]! + gap)
    })
  const freeAir = fc.oneof(
    { weight: 2, arbitrary: spread(limits.freeAirM3Min).map((ratedFreeAirM3Min) => ({ ratedFreeAirM3Min })) },
    { weight: 1, arbitrary: curve.map((points) => ({ curve: points })) },
  )
  const compressor = fc
    .tuple(
      freeAir,
      spread(limits.setPressureKpa),
      spread({ min: 10, max: reach === 'declared' ? 3000 : 200 }),
      fc.record(
        {
          conditionFactor: even(limits.conditionFactor),
          lineTemperatureRiseK: even(limits.lineTemperatureRiseK),
          engine: fc.constantFrom('natural' as const, 'turbo' as const),
        },
        { requiredKeys: [] },
      ),
    )
    .map(([air, setPressureKpa, band, rest]) => ({
      ...air,
      setPressureKpa,
      unloadPressureKpa: Math.min(checkLimits.unloadPressureKpa.max, setPressureKpa + band),
      ...rest,
    }))

  return fc.record({
    site: fc.record(
      {
        altitudeM: even(limits.altitudeM),
        airTemperatureC: even(limits.airTemperatureC),
        relativeHumidityPct: even(limits.relativeHumidityPct),
        barometerKpa: even(limits.barometerKpa),
      },
      { requiredKeys: ['altitudeM', 'airTemperatureC'] },
    ),
    compressor,
    airLine: line,
    outlets: fc.array(outlet, { minLength: 1, maxLength: maxOutlets, size: 'max' }),
    airTakenFirst: fc
      .oneof(
        { weight: 2, arbitrary: fc.constant([]) },
        {
          weight: 1,
          arbitrary: fc.array(spread(limits.airTakenFirstM3Min), { maxLength: counts.draws, size: 'max' }),
        },
      )
      .map((draws) => draws.map((freeAirM3Min, i) => ({ name: `hood ${i + 1}`, freeAirM3Min }))),
    targetNozzlePressureKpa: spread(limits.targetNozzlePressureKpa),
  })
}

/** Half of the rigs from each reach. */
export const anyChecks = fc.oneof(checkBodies('declared'), checkBodies('realistic'))
