import { create, unitDependencies } from 'mathjs'
import { baseUnit } from '#shared/units/quantities.ts'
import type { QuantityKind } from '#shared/units/quantities.ts'
import type { OtherUnit } from '#shared/form/readForm.ts'

const { unit } = create(unitDependencies!)

/** The name by which mathjs knows a kind's base unit. */
const baseUnitNames: Partial<Record<QuantityKind, string>> = {
  pressure: 'kPa',
  barometer: 'kPa',
  length: 'm',
  altitude: 'm',
  bore: 'mm',
  diameter: 'mm',
  volumeFlow: 'm^3/minute',
  temperature: 'degC',
  temperatureDifference: 'K',
  mass: 'kg',
  massFlow: 'kg/hour',
  volume: 'L',
  power: 'kW',
  fuelRate: 'L/hour',
  waterRate: 'L/minute',
  density: 'kg/m^3',
  hours: 'hour',
}

/** Any other unit of the right dimension, read as a unit and never as an expression. */
export const readOtherUnit: OtherUnit = (kind) => (text) => {
  const target = baseUnitNames[kind]
  if (target === undefined) return null
  return { value: unit(text).toNumber(target), unit: baseUnit(kind).symbol }
}
