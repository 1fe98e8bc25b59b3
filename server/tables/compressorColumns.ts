import { checkLimits, fleetLimits } from '#shared/contracts/limits.ts'
import { choiceCell, curveCell, dateCell, numberCell, quantityCell, textCell, yesNoCell } from './cells.ts'
import type { Column } from './columns.ts'

export const compressorColumns: readonly Column[] = [
  { field: 'name', path: ['name'], cell: textCell, isRequired: true },
  {
    field: 'free_air',
    path: ['ratedFreeAirM3Min'],
    cell: quantityCell('volumeFlow', checkLimits.freeAirM3Min),
    isRequired: true,
  },
  {
    field: 'set_pressure',
    path: ['setPressureKpa'],
    cell: quantityCell('pressure', checkLimits.setPressureKpa),
    isRequired: true,
  },
  {
    field: 'unload_pressure',
    path: ['unloadPressureKpa'],
    cell: quantityCell('pressure', checkLimits.unloadPressureKpa),
  },
  { field: 'cooling', path: ['cooling'], cell: choiceCell(['aftercooled', 'bare']) },
  { field: 'engine', path: ['engine'], cell: choiceCell(['natural', 'turbo']) },
  { field: 'condition', path: ['conditionFactor'], cell: numberCell },
  {
    field: 'full_load_fuel',
    path: ['fullLoadFuelLPerH'],
    cell: quantityCell('fuelRate', fleetLimits.fullLoadFuelLPerH),
  },
  { field: 'ownership', path: ['ownership'], cell: choiceCell(['owned', 'rented']) },
  { field: 'rented_from', path: ['rentedFrom'], cell: dateCell },
  { field: 'rented_until', path: ['rentedUntil'], cell: dateCell },
  { field: 'curve', path: ['curve'], cell: curveCell },
  { field: 'is_archived', path: ['isArchived'], cell: yesNoCell },
]

/** A compressor of which a row says no more than it must. */
export function makeCompressorDraft(): object {
  return {
    curve: [],
    unloadPressureKpa: null,
    cooling: 'aftercooled',
    engine: null,
    conditionFactor: null,
    fullLoadFuelLPerH: null,
    ownership: 'owned',
    rentedFrom: null,
    rentedUntil: null,
  }
}
