import { M3_PER_CUBIC_FOOT } from '#shared/units/quantities.ts'
import type { Sourced } from './source.ts'

const HOOD_SOURCE = { source: '42 CFR 84 Subpart J, Table 8', status: 'published' } as const satisfies Sourced

/** A continuous-flow blasting respirator's air. The rule prints L/min with cfm beside it; L/min is used. */
export interface HoodAir extends Sourced {
  id: 'loose-fitting' | 'tight-fitting'
  leastFreeAirM3Min: number
  leastCfm: number
  mostFreeAirM3Min: number
  mostCfm: number
}

export const HOOD_AIR: readonly HoodAir[] = [
  {
    id: 'loose-fitting',
    leastFreeAirM3Min: 0.17,
    leastCfm: 6,
    mostFreeAirM3Min: 0.425,
    mostCfm: 15,
    ...HOOD_SOURCE,
  },
  {
    id: 'tight-fitting',
    leastFreeAirM3Min: 0.115,
    leastCfm: 4,
    mostFreeAirM3Min: 0.425,
    mostCfm: 15,
    ...HOOD_SOURCE,
  },
]

/**
 * What is taken first for one hood where nothing is known: the most the rule lets it pass, so that breathing air is
 * never counted short.
 */
export const HOOD_DEFAULT_FREE_AIR_M3_MIN = 15 * M3_PER_CUBIC_FOOT

/** A cooling or warming tube on the hood takes more than the hood passes; editable. */
export const CLIMATE_TUBE = {
  freeAirM3Min: 20 * M3_PER_CUBIC_FOOT,
  source: 'ordinary draw of a hood with a cooling tube',
  status: 'from memory',
} as const satisfies Sourced & { freeAirM3Min: number }

/** Type C supply hose: at most 300 ft, in 25 ft multiples. */
export const BREATHING_HOSE = { mostFeet: 300, mostM: 91, ...HOOD_SOURCE } as const
