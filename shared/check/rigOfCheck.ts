import type { CheckElement, CheckRequest } from '../contracts/check.ts'
import { resolveAmbient } from '../airflow/index.ts'
import type { LineElement, Rig, Site } from '../airflow/index.ts'

const zeroCelsiusK = 273.15
const perMinute = 1 / 60

/** The air model's question that a check asks: SI, pressures absolute. Checked in tests/shared/check/answerCheck.test.ts */
export interface CheckQuestion {
  rig: Rig
  site: Site
  ambientPa: number
  targetPa: number
}

function elementOf(element: CheckElement): LineElement {
  const line: LineElement = { insideDiameterM: element.insideDiameterMm / 1000 }
  if (element.name !== undefined) line.name = element.name
  if (element.lengthM !== undefined) line.lengthM = element.lengthM
  if (element.roughnessMm !== undefined) line.roughnessM = element.roughnessMm / 1000
  if (element.lossK !== undefined) line.lossK = element.lossK
  if (element.mediaFactor !== undefined) line.mediaFactor = element.mediaFactor
  return line
}

export function siteOfCheck(site: CheckRequest['site']): Site {
  return {
    altitudeM: site.altitudeM,
    airTemperatureK: site.airTemperatureC + zeroCelsiusK,
    relativeHumidity: (site.relativeHumidityPct ?? 0) / 100,
    ...(site.barometerKpa === undefined ? {} : { barometerPa: site.barometerKpa * 1000 }),
  }
}

export function questionOfCheck(request: CheckRequest): CheckQuestion {
  const site = siteOfCheck(request.site)
  const ambientPa = resolveAmbient(site).pressurePa
  const absolute = (gaugeKpa: number) => gaugeKpa * 1000 + ambientPa
  const { compressor } = request
  const rig: Rig = {
    compressor: {
      freeAir:
        compressor.curve?.map((point) => ({
          pressurePa: absolute(point.pressureKpa),
          freeAirM3S: point.freeAirM3Min * perMinute,
        })) ?? (compressor.ratedFreeAirM3Min ?? 0) * perMinute,
      setPressurePa: absolute(compressor.setPressureKpa),
      unloadPressurePa: absolute(compressor.unloadPressureKpa),
      conditionFactor: compressor.conditionFactor ?? 1,
      lineTemperatureRiseK: compressor.lineTemperatureRiseK ?? 0,
      ...(compressor.engine ? { engine: compressor.engine } : {}),
    },
    airLine: request.airLine.map(elementOf),
    outlets: request.outlets.map((outlet) => ({
      line: outlet.line.map(elementOf),
      ...(outlet.regulatorKpa === undefined ? {} : { regulatorPa: absolute(outlet.regulatorKpa) }),
      nozzle: {
        boreM: outlet.nozzle.boreMm / 1000,
        ...(outlet.nozzle.dischargeCoefficient === undefined
          ? {}
          : { dischargeCoefficient: outlet.nozzle.dischargeCoefficient }),
      },
    })),
    airTakenFirst: request.airTakenFirst.map((draw) => ({
      name: draw.name,
      freeAirM3S: draw.freeAirM3Min * perMinute,
    })),
  }
  return { rig, site, ambientPa, targetPa: absolute(request.targetNozzlePressureKpa) }
}
