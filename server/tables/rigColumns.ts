import { HOOD_DEFAULT_FREE_AIR_M3_MIN } from '#shared/catalogue/breathing.ts'
import { ABRASIVES } from '#shared/catalogue/media.ts'
import { checkLimits, fleetLimits, maxOutlets } from '#shared/contracts/limits.ts'
import { bitSetNameSchema } from '#shared/contracts/check.ts'
import { BORE_TOLERANCE_MM, mmOfInches } from '#shared/units/index.ts'
import { choiceCell, numberCell, quantityCell, textCell, yesNoCell } from './cells.ts'
import type { Column } from './columns.ts'

const { freeAirM3Min, insideDiameterMm, lengthM, boreMm, regulatorKpa, airTakenFirstM3Min } = checkLimits
const diameter = quantityCell('diameter', insideDiameterMm)
const bore = quantityCell('bore', boreMm)
const airTaken = quantityCell('volumeFlow', airTakenFirstM3Min)

function hoseColumns(prefix: string, path: Column['path']): Column[] {
  return [
    { field: `${prefix}_bore`, path: [...path, 'insideDiameterMm'], cell: diameter },
    { field: `${prefix}_length`, path: [...path, 'lengthM'], cell: quantityCell('length', lengthM) },
    { field: `${prefix}_couplings`, path: [...path, 'couplings'], cell: numberCell },
    {
      field: `${prefix}_measured_drop`,
      path: [...path, 'measured', 'dropKpa'],
      cell: quantityCell('pressure', fleetLimits.dropKpa),
    },
    {
      field: `${prefix}_measured_flow`,
      path: [...path, 'measured', 'freeAirM3Min'],
      cell: quantityCell('volumeFlow', freeAirM3Min),
    },
    {
      field: `${prefix}_roughness`,
      path: [...path, 'roughnessMm'],
      cell: quantityCell('diameter', checkLimits.roughnessMm),
    },
  ]
}

/** The first outlet’s headings stand alone; those of another begin with outlet_2 and so on. */
export function outletColumns(index: number): Column[] {
  const prefix = index === 0 ? '' : `outlet_${index + 1}_`
  const path = ['outlets', index]
  const nozzle = [...path, 'nozzle']
  return [
    { field: `${prefix}nozzle`, path: [...nozzle, 'newBoreMm'], cell: bore, isRequired: index === 0 },
    { field: `${prefix}nozzle_now`, path: [...nozzle, 'boreNowMm'], cell: bore },
    { field: `${prefix}nozzle_shape`, path: [...nozzle, 'shape'], cell: choiceCell(['venturi', 'straight']) },
    {
      field: `${prefix}nozzle_loading`,
      path: [...nozzle, 'loading'],
      cell: choiceCell(['clean', 'lean', 'normal', 'heavy-or-wet']),
    },
    { field: `${prefix}nozzle_coefficient`, path: [...nozzle, 'dischargeCoefficient'], cell: numberCell },
    {
      field: `${prefix}regulator`,
      path: [...path, 'regulatorKpa'],
      cell: quantityCell('pressure', regulatorKpa),
    },
    ...hoseColumns(`${prefix}hose`, [...path, 'hose']),
    ...hoseColumns(`${prefix}whip`, [...path, 'whip']),
  ]
}

export const rigOwnColumns: readonly Column[] = [
  { field: 'name', path: ['name'], cell: textCell, isRequired: true },
  { field: 'compressor', path: ['compressorId'], cell: textCell },
  { field: 'site', path: ['siteId'], cell: textCell },
  {
    field: 'target_pressure',
    path: ['targetNozzlePressureKpa'],
    cell: quantityCell('pressure', checkLimits.targetNozzlePressureKpa),
    isRequired: true,
  },
  ...hoseColumns('air_line', ['airLine']),
  { field: 'pot_bore', path: ['pot', 'insideDiameterMm'], cell: diameter },
  { field: 'pot_loss_k', path: ['pot', 'lossK'], cell: numberCell },
  { field: 'pot_is_shared', path: ['pot', 'isShared'], cell: yesNoCell },
  { field: 'hoods', path: ['hoods', 'count'], cell: numberCell },
  { field: 'hood_air', path: ['hoods', 'freeAirEachM3Min'], cell: airTaken },
  { field: 'tools_air', path: ['toolsFreeAirM3Min'], cell: airTaken },
  { field: 'bit_set', path: ['bitSet'], cell: choiceCell(bitSetNameSchema.options) },
  { field: 'abrasive', path: ['hour', 'abrasive'], cell: choiceCell(ABRASIVES.map(({ id }) => id)) },
  {
    field: 'media_rate',
    path: ['hour', 'mediaRateKgPerH'],
    cell: quantityCell('massFlow', fleetLimits.mediaRateKgPerH),
  },
  { field: 'bag_mass', path: ['hour', 'bagMassKg'], cell: quantityCell('mass', fleetLimits.bagMassKg) },
  { field: 'is_wet', path: ['hour', 'isWet'], cell: yesNoCell },
  {
    field: 'water_rate',
    path: ['hour', 'waterRateLPerMin'],
    cell: quantityCell('waterRate', fleetLimits.waterRateLPerMin),
  },
  { field: 'tank', path: ['hour', 'tankL'], cell: quantityCell('volume', fleetLimits.tankL) },
  { field: 'is_archived', path: ['isArchived'], cell: yesNoCell },
]

export const rigColumns: readonly Column[] = [
  ...rigOwnColumns,
  ...Array.from({ length: maxOutlets }, (_, index) => outletColumns(index)).flat(),
]

/** A rig of which a row says no more than it must. */
export function makeRigDraft(): object {
  return {
    airLine: null,
    pot: null,
    hoods: { count: 0, freeAirEachM3Min: HOOD_DEFAULT_FREE_AIR_M3_MIN },
    toolsFreeAirM3Min: null,
    bitSet: 'fractional-64',
    compressorId: null,
    siteId: null,
    hour: {
      abrasive: 'crushed-glass',
      mediaRateKgPerH: null,
      bagMassKg: null,
      isWet: false,
      waterRateLPerMin: null,
      tankL: null,
    },
  }
}

type Part = Record<string, unknown> | null | undefined

function finishHose(hose: Part): Part {
  return hose ? { lengthM: null, couplings: 0, measured: null, roughnessMm: null, ...hose } : null
}

/** The number that a bore in sixteenths of an inch is called by. */
function numberOfBore(newBoreMm: unknown): number | null {
  if (typeof newBoreMm !== 'number') return null
  const number = Math.round((newBoreMm * 16) / mmOfInches(1))
  return Math.abs(mmOfInches(number / 16) - newBoreMm) <= BORE_TOLERANCE_MM ? number : null
}

function finishOutlet(outlet: Record<string, Part>): object {
  const nozzle = outlet['nozzle'] ?? {}
  return {
    regulatorKpa: null,
    ...outlet,
    hose: finishHose(outlet['hose']),
    whip: finishHose(outlet['whip']),
    nozzle: {
      numberSixteenths: numberOfBore(nozzle['newBoreMm']),
      boreNowMm: null,
      shape: 'venturi',
      loading: 'normal',
      dischargeCoefficient: null,
      ...nozzle,
    },
  }
}

/** Each part of which a cell says anything, with the defaults of what no cell says. */
export function finishRigDraft(draft: Record<string, unknown>): object {
  const pot = draft['pot'] as Part
  const outlets = Array.from((draft['outlets'] ?? []) as (Record<string, Part> | undefined)[])
  return {
    ...draft,
    airLine: finishHose(draft['airLine'] as Part),
    pot: pot ? { lossK: null, isShared: true, ...pot } : null,
    outlets: outlets.map((outlet) => finishOutlet(outlet ?? {})),
  }
}
