import { freeAirAt, fullLoadDeliveryAt, prepareDelivery } from '../airflow/compressor.ts'
import { resolveAmbient } from '../airflow/index.ts'
import { fullLoadFuelLPerH } from '../catalogue/compressorClasses.ts'
import { ABRASIVES, BAG_MASS_KG, WET_BLAST, mediaFlowKgPerH } from '../catalogue/media.ts'
import type { AbrasiveId } from '../catalogue/media.ts'
import type { CheckAnswer, CheckRequest } from '../contracts/check.ts'
import { useOfHour } from '../economics/hourUse.ts'
import type { HourUse } from '../economics/hourUse.ts'
import type { UnitSystem } from '../units/quantities.ts'
import type { CheckQuestion } from './rigOfCheck.ts'

const perMinute = 60

/** Figures a person may type in place of the defaults, in base units. */
export interface HourFigures {
  mediaKgPerH: number
  bagMassKg: number
  fullLoadFuelLPerH: number
  waterLPerMin: number
  tankL: number
}

export interface HourQuestion {
  request: CheckRequest
  question: CheckQuestion
  answer: CheckAnswer
}

/** Abrasives to choose from: silica sand carries free silica and is not offered. */
export const offeredAbrasives = ABRASIVES.filter((abrasive) => abrasive.id !== 'silica-sand')

/**
 * The defaults of an hour's figures: media by the new bores at the pressures the nozzles see, all outlets together.
 *
 * Inputs   an answered check · abrasive, by its middle bulk density · the unit system, by which bags are sold
 * Result   media is 0 without an operating point or for an abrasive that is not offered
 * Checked  tests/shared/check/hourOfCheck.test.ts
 */
export function defaultHourFigures(
  { request, question, answer }: HourQuestion,
  abrasive: AbrasiveId,
  system: UnitSystem,
): HourFigures {
  const bulkDensityKgM3 = offeredAbrasives.find((row) => row.id === abrasive)?.bulkDensityKgM3.middle ?? 0
  let mediaKgPerH = 0
  request.outlets.forEach(({ nozzle }, index) => {
    const nozzleKpaGauge = answer.operatingPoint?.outlets[index]?.nozzlePressureKpa ?? 0
    mediaKgPerH += mediaFlowKgPerH({
      boreMm: nozzle.newBoreMm ?? nozzle.boreMm,
      nozzleKpaGauge,
      bulkDensityKgM3,
    })
  })
  const { compressor } = question.rig
  const ratedM3Min = freeAirAt(compressor, compressor.setPressurePa) * perMinute
  return {
    mediaKgPerH,
    bagMassKg: BAG_MASS_KG[system],
    fullLoadFuelLPerH: fullLoadFuelLPerH(ratedM3Min, request.compressor.setPressureKpa),
    waterLPerMin: WET_BLAST.waterLPerMin,
    tankL: WET_BLAST.tankL,
  }
}

/**
 * What an hour of a checked rig uses at its operating point.
 *
 * Inputs   an answered check · the figures, defaults or typed · is it wet blasting
 * Result   null without an operating point
 * Checked  tests/shared/check/hourOfCheck.test.ts
 */
export function hourOfCheck(
  { question, answer }: HourQuestion,
  figures: HourFigures,
  isWet: boolean,
): HourUse | null {
  const point = answer.operatingPoint
  if (!point) return null
  const ambient = resolveAmbient(question.site)
  const compressorPa = point.compressorPressureKpa * 1000 + ambient.pressurePa
  const fullLoad = fullLoadDeliveryAt(prepareDelivery(question.rig.compressor, ambient), compressorPa)
  return useOfHour({
    freeAirM3Min: point.freeAirM3Min,
    fullLoadFreeAirM3Min: (fullLoad / ambient.dryAirDensity) * perMinute,
    fullLoadFuelLPerH: figures.fullLoadFuelLPerH,
    mediaKgPerH: figures.mediaKgPerH,
    bagMassKg: figures.bagMassKg,
    waterLPerMin: isWet ? figures.waterLPerMin : 0,
    tankL: figures.tankL,
  })
}
