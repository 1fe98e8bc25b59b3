import { KG_PER_POUND, L_PER_US_GALLON, M3_PER_CUBIC_FOOT } from '#shared/units/quantities.ts'
import type { Sourced } from './source.ts'

export { mediaFlowKgPerH, SAND_FLOW_SOURCE } from './sandFlow.ts'

const KG_M3_PER_LB_FT3 = KG_PER_POUND / M3_PER_CUBIC_FOOT

export interface Abrasive {
  id: string
  bulkDensityKgM3: { low: number; middle: number; high: number }
}

export const ABRASIVE_SOURCE: Sourced = { source: 'ordinary handbook ranges', status: 'from memory' }

/** Bulk density, lb/ft³, lowest and highest. From memory: ordinary handbook ranges. */
const BULK_DENSITY_LB_FT3 = {
  'silica-sand': [90, 100],
  garnet: [130, 147],
  'coal-slag': [80, 100],
  'copper-slag': [100, 120],
  staurolite: [125, 130],
  'aluminium-oxide': [115, 130],
  'silicon-carbide': [95, 105],
  'glass-bead': [95, 100],
  'crushed-glass': [80, 100],
  'steel-shot': [270, 290],
  'steel-grit': [220, 250],
  'walnut-shell': [40, 45],
  'plastic-media': [45, 60],
  'sodium-bicarbonate': [60, 60],
} as const satisfies Record<string, readonly [number, number]>

export type AbrasiveId = keyof typeof BULK_DENSITY_LB_FT3

export const ABRASIVES: readonly (Abrasive & { id: AbrasiveId })[] = (
  Object.keys(BULK_DENSITY_LB_FT3) as AbrasiveId[]
).map((id) => {
  const [low, high] = BULK_DENSITY_LB_FT3[id]
  return {
    id,
    bulkDensityKgM3: {
      low: low * KG_M3_PER_LB_FT3,
      middle: ((low + high) / 2) * KG_M3_PER_LB_FT3,
      high: high * KG_M3_PER_LB_FT3,
    },
  }
})

/** What one bag weighs, editable. Common practice, no source. */
export const BAG_MASS_KG = { us: 50 * KG_PER_POUND, metric: 25 } as const

/** Water of a wet-blast ring or pump, and its tank: 0.5 gal/min, 100 gal; editable. Common practice, no source. */
export const WET_BLAST = {
  waterLPerMin: 0.5 * L_PER_US_GALLON,
  tankL: 100 * L_PER_US_GALLON,
  source: 'a wet-blast ring at 0.5 US gal/min on a 100 gal tank',
  status: 'common practice, no source',
} as const satisfies Sourced & { waterLPerMin: number; tankL: number }

/**
 * Discharge coefficients in service. Clean air 0.97: a well-rounded entry, compressed-air handbook. The others are
 * fitted: Cd ≈ 0.97 / √(1 + 0.51 η), η = media over air by mass; 0.81 is midway between two government figures.
 */
export const DISCHARGE_COEFFICIENTS = [
  { id: 'clean', value: 0.97, source: 'compressed-air handbook, well-rounded entry', status: 'published' },
  { id: 'lean', value: 0.87, source: 'fitted: Cd ≈ 0.97/√(1 + 0.51 η)', status: 'computed' },
  { id: 'normal', value: 0.81, source: 'fitted: midway between two government figures', status: 'computed' },
  { id: 'heavy-or-wet', value: 0.76, source: 'fitted: Cd ≈ 0.97/√(1 + 0.51 η)', status: 'computed' },
] as const satisfies readonly (Sourced & { id: string; value: number })[]

/** A straight bore passes so much of what a venturi of the same bore does. */
export const STRAIGHT_BORE_FACTOR = { value: 0.93, source: 'air model', status: 'computed' } as const
