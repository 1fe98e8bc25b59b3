import { forecastWear } from '#shared/wear/index.ts'
import type { Quantiles } from '#shared/wear/index.ts'
import { limitBoreMm, makeChance, newBoreMm, rate, simulateNozzle } from './simulate.ts'
import type { World } from './simulate.ts'

export interface Coverage {
  bore: number
  hours: number
  contradicted: number
  /** mean widths of the 80 % ranges */
  boreWidthMm: number
  hoursWidth: number
}

const holds = ({ p10, p90 }: Quantiles, truth: number) => p10 <= truth && truth <= p90

/** Shares of so many nozzles whose truth lies in the 80 % range. */
export function measureCoverage(
  nozzles: number,
  checkCount: number,
  world: World,
  { seed, drift }: { seed: number; drift: number },
): Coverage {
  const chance = makeChance(seed)
  const sum = { bore: 0, hours: 0, contradicted: 0, boreWidthMm: 0, hoursWidth: 0 }
  for (let i = 0; i < nozzles; i++) {
    const truth = simulateNozzle(checkCount, chance, world)
    const forecast = forecastWear({
      newBoreMm,
      rate,
      checks: truth.checks,
      drift,
      equivalentHoursNow: truth.hoursNow,
      equivalentHoursPerWeek: 20,
      limitBoreMm,
    })
    const { boreNowMm, hoursToLimit, contradictsPrior } = forecast
    sum.bore += Number(holds(boreNowMm, truth.boreMm))
    sum.hours += Number(holds(hoursToLimit, truth.hoursToLimit))
    sum.contradicted += Number(contradictsPrior)
    sum.boreWidthMm += boreNowMm.p90 - boreNowMm.p10
    sum.hoursWidth += hoursToLimit.p90 - hoursToLimit.p10
  }
  const mean = (total: number) => total / nozzles
  return {
    bore: mean(sum.bore),
    hours: mean(sum.hours),
    contradicted: mean(sum.contradicted),
    boreWidthMm: mean(sum.boreWidthMm),
    hoursWidth: mean(sum.hoursWidth),
  }
}
