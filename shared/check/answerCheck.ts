import { findCautions, waterToDrain } from '../airflow/cautions.ts'
import { limitBoresPrepared } from '../airflow/limitBore.ts'
import { checkPrepared } from '../airflow/pressureCheck.ts'
import { prepareRig } from '../airflow/preparedRig.ts'
import { noGoBit, orderBit } from '../catalogue/drillBits.ts'
import type { BitSetName, CheckAnswer, CheckRequest, OutletAnswer } from '../contracts/check.ts'
import { sentenceOfCaution } from './cautionSentences.ts'
import { questionOfCheck } from './rigOfCheck.ts'

const perMinute = 60

/**
 * The whole answer to a pressure check, in the contract's units.
 *
 * Inputs   a request that the contract has let through
 * Result   see the contract; the order and no-go bits are null where no bit helps: a limit bore under the new bore
 * Errors   none        Checked  tests/shared/check/answerCheck.test.ts
 */
export function answerCheck(request: CheckRequest): CheckAnswer {
  const { rig, site, ambientPa, targetPa } = questionOfCheck(request)
  const prepared = prepareRig(rig, site)
  const targetGaugePa = targetPa - ambientPa
  const check = checkPrepared(prepared, targetGaugePa)
  const freeAir = (massFlow: number) => (massFlow / prepared.ambient.dryAirDensity) * perMinute
  const gaugeKpa = (pressurePa: number) => (pressurePa - ambientPa) / 1000
  const { operatingPoint, atTarget } = check
  const limits = limitBoresPrepared(prepared, targetGaugePa)
  return {
    verdict: check.verdict,
    reason: check.reason,
    operatingPoint: operatingPoint && {
      compressorPressureKpa: gaugeKpa(operatingPoint.compressorPressurePa),
      freeAirM3Min: freeAir(operatingPoint.massFlow),
      outlets: operatingPoint.outlets.map((outlet) => ({
        nozzlePressureKpa: gaugeKpa(outlet.nozzlePressurePa),
        freeAirM3Min: freeAir(outlet.massFlow),
        massFlowKgS: outlet.massFlow,
        choked: outlet.isChoked,
      })),
    },
    atTarget: atTarget && {
      requiredFreeAirM3Min: freeAir(atTarget.requiredMassFlow),
      requiredCompressorPressureKpa: gaugeKpa(atTarget.requiredCompressorPressurePa),
      deliveredFreeAirM3Min: freeAir(atTarget.deliveredMassFlow),
      airMarginPct: atTarget.airMargin * 100,
    },
    outlets: request.outlets.map(({ nozzle }, index): OutletAnswer => {
      const limit = limits[index]!
      const limitBoreMm = limit.boreM === null ? null : limit.boreM * 1000
      return {
        limitBoreMm,
        limitedBy: limit.limitedBy,
        reason: limit.reason,
        ...bitsFor(limitBoreMm, nozzle.newBoreMm ?? nozzle.boreMm, request.bitSet ?? 'fractional-64'),
      }
    }),
    waterToDrainLPerHour: waterToDrain(prepared, check),
    cautions: findCautions(rig, site, prepared, check, targetGaugePa).map(({ code, sizePct }) => ({
      code,
      sizePct,
      text: sentenceOfCaution(code, sizePct, 'en'),
    })),
  }
}

/** The two bits of a limit bore; none where a new nozzle is over the limit already. */
export function bitsFor(limitBoreMm: number | null, newBoreMm: number, set: BitSetName) {
  if (limitBoreMm === null || limitBoreMm < newBoreMm) return { noGoBit: null, orderBit: null }
  return { noGoBit: noGoBit(limitBoreMm, set), orderBit: orderBit(limitBoreMm, newBoreMm, set) }
}
