import type { Sourced } from './source.ts'

export type LinerId =
  'tungsten-carbide' | 'silicon-carbide' | 'silicon-nitride' | 'boron-carbide' | 'alumina-ceramic' | 'steel'

export const LINER_LIFE_SOURCE: Sourced = {
  source: 'hours of dry blasting until the bore has grown 1/16 in, by liner and abrasive',
  status: 'common practice, no source',
}

/** What the life table has a column for. */
export type LifeMedia = 'steel' | 'sand-or-slag' | 'aluminium-oxide'

export interface HourRange {
  lowHours: number
  highHours: number
}

export interface LinerLife {
  liner: LinerId
  hours: Record<LifeMedia, HourRange>
}

const range = (lowHours: number, highHours: number): HourRange => ({ lowHours, highHours })

/**
 * Hours of dry blasting until the bore has grown by a sixteenth of an inch. Common practice, no source; editable, never
 * shown as published. Silicon carbide stands for the silicon-carbide and sialon composites. Silicon nitride and steel
 * have no row.
 */
export const LINER_LIVES: readonly LinerLife[] = [
  {
    liner: 'alumina-ceramic',
    hours: { steel: range(20, 40), 'sand-or-slag': range(10, 30), 'aluminium-oxide': range(1, 4) },
  },
  {
    liner: 'tungsten-carbide',
    hours: { steel: range(500, 800), 'sand-or-slag': range(300, 400), 'aluminium-oxide': range(20, 40) },
  },
  {
    liner: 'silicon-carbide',
    hours: { steel: range(500, 800), 'sand-or-slag': range(300, 400), 'aluminium-oxide': range(50, 100) },
  },
  {
    liner: 'boron-carbide',
    hours: {
      steel: range(1500, 2500),
      'sand-or-slag': range(750, 1500),
      'aluminium-oxide': range(200, 1000),
    },
  },
]

export const MOHS_SOURCE: Sourced = {
  source: 'Mohs hardness: Ridgway 1933, Wooddell 1935',
  status: 'published',
}
export const KNOOP_SOURCE: Sourced = {
  source: 'Knoop hardness, kgf/mm²: ordinary handbook values',
  status: 'from memory',
}

export interface Hardness {
  /** the middle of the range */
  mohs: number
  /** kgf/mm², the middle of the range; null where none is known */
  knoop: number | null
}

/** Steel is the hard steel of a file, before the 7 to 8 of hardened. */
export const LINER_HARDNESS: Record<LinerId, Hardness> = {
  'boron-carbide': { mohs: 9.45, knoop: 2825 },
  'silicon-carbide': { mohs: 9.3, knoop: 2490 },
  'tungsten-carbide': { mohs: 9.05, knoop: 1650 },
  'silicon-nitride': { mohs: 8.5, knoop: 1575 },
  'alumina-ceramic': { mohs: 9, knoop: 2050 },
  steel: { mohs: 6.5, knoop: null },
}

export interface MediaHardness extends Sourced {
  /** the middle of the range */
  mohs: number
  /** the column of the life table that is its own; null for none */
  lifeMedia: LifeMedia | null
}

const published = (mohs: number, lifeMedia: LifeMedia | null): MediaHardness => ({
  mohs,
  lifeMedia,
  ...MOHS_SOURCE,
})
const remembered = (mohs: number, lifeMedia: LifeMedia | null): MediaHardness => ({
  mohs,
  lifeMedia,
  source: 'ordinary handbook values',
  status: 'from memory',
})

/** The abrasives of `media.ts` by their ids. */
export const MEDIA_HARDNESS = {
  'silica-sand': published(7, 'sand-or-slag'),
  garnet: published(7.25, null),
  'coal-slag': remembered(6.5, 'sand-or-slag'),
  'copper-slag': remembered(6.5, 'sand-or-slag'),
  staurolite: remembered(7.25, null),
  'aluminium-oxide': published(9, 'aluminium-oxide'),
  'silicon-carbide': published(9.3, null),
  'glass-bead': published(6, null),
  'crushed-glass': published(6, null),
  'steel-shot': published(6.5, 'steel'),
  'steel-grit': published(6.5, 'steel'),
  'walnut-shell': remembered(3, null),
  'plastic-media': remembered(3.5, null),
  'sodium-bicarbonate': remembered(2.5, null),
} as const satisfies Record<string, MediaHardness>

/** The hardness a column of the life table is compared by: quartz, hard steel, fused aluminium oxide. */
export const LIFE_MEDIA_MOHS: Record<LifeMedia, number> = {
  steel: 6.5,
  'sand-or-slag': 7,
  'aluminium-oxide': 9,
}
