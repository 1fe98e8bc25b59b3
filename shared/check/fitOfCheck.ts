import { engineShortfall } from '../airflow/cautions.ts'
import { findSmallestCompressor } from '../airflow/index.ts'
import type { Compressor, FittingCompressor } from '../airflow/index.ts'
import { prepareRig } from '../airflow/preparedRig.ts'
import { COMPRESSOR_CLASSES, SET_PRESSURES, defaultUnloadKpa } from '../catalogue/compressorClasses.ts'
import type { CheckQuestion } from './rigOfCheck.ts'

const perMinute = 60

/** A size class at a set pressure, as it is asked for at a rental counter. */
export interface RentalCompressor {
  ratedFreeAirM3Min: number
  setPressureKpa: number
}

/** Every size class at every usual set pressure, from small to large. Common practice, no source. */
export const rentalCompressors: readonly RentalCompressor[] = COMPRESSOR_CLASSES.flatMap(
  ({ ratedFreeAirM3Min }) => SET_PRESSURES.map(({ kpa }) => ({ ratedFreeAirM3Min, setPressureKpa: kpa })),
)

/** The compressor a size class stands for at a site: a sound one, with this rig's cooling and engine. */
export function compressorOfRental(rental: RentalCompressor, { rig, ambientPa }: CheckQuestion): Compressor {
  const { lineTemperatureRiseK, engine } = rig.compressor
  return {
    freeAir: rental.ratedFreeAirM3Min / perMinute,
    setPressurePa: rental.setPressureKpa * 1000 + ambientPa,
    unloadPressurePa: defaultUnloadKpa(rental.setPressureKpa) * 1000 + ambientPa,
    ...(lineTemperatureRiseK === undefined ? {} : { lineTemperatureRiseK }),
    ...(engine === undefined ? {} : { engine }),
  }
}

export interface RentalFit extends FittingCompressor<RentalCompressor> {
  /** 0 to 1: how short a naturally aspirated engine would be, where this rig's engine is not known; else 0 */
  naturalShortfall: number
}

/**
 * The smallest size class with which these nozzles, hoses and this site hold the target.
 *
 * Inputs   the question of a check
 * Result   the class with its check, its engine's shortfall, or null where none reaches the target
 * Checked  tests/shared/check/fitOfCheck.test.ts
 */
export function findRentalFit(question: CheckQuestion): RentalFit | null {
  const { rig, site, targetPa, ambientPa } = question
  const found = findSmallestCompressor(rig, site, targetPa - ambientPa, rentalCompressors, (rental) =>
    compressorOfRental(rental, question),
  )
  if (!found) return null
  if (rig.compressor.engine) return { ...found, naturalShortfall: 0 }
  const compressor: Compressor = { ...compressorOfRental(found.candidate, question), engine: 'natural' }
  const prepared = prepareRig({ ...rig, compressor }, site)
  return { ...found, naturalShortfall: engineShortfall(compressor, prepared, site.altitudeM) }
}
