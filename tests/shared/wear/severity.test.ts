import { describe, expect, it } from 'vitest'
import { ABRASIVES } from '#shared/catalogue/media.ts'
import { LINER_LIFE_SOURCE, LINER_LIVES, MEDIA_HARDNESS } from '#shared/catalogue/liners.ts'
import { equivalentHours, findLife, ratePriorOf, severityOf } from '#shared/wear/index.ts'
import type { BlastMode } from '#shared/wear/index.ts'

const psiAbsolute = 6.894757293
const mode: BlastMode = {
  liner: 'tungsten-carbide',
  media: MEDIA_HARDNESS['coal-slag'],
  isWet: false,
  nozzlePressureKpaAbsolute: 114.7 * psiAbsolute,
}

describe('severity (life table: common practice, no source)', () => {
  it('is 1 in the reference mode, dry slag or sand at 100 psi', () => {
    expect(severityOf(mode)).toBeCloseTo(1, 9)
    expect(severityOf({ ...mode, media: MEDIA_HARDNESS['silica-sand'], liner: 'boron-carbide' })).toBeCloseTo(
      1,
      9,
    )
  })

  it('is life over life: tungsten carbide on aluminium oxide 12 times', () => {
    // √(300 · 400)/√(20 · 40) = 346.41/28.284
    expect(severityOf({ ...mode, media: MEDIA_HARDNESS['aluminium-oxide'] })).toBeCloseTo(12.2474, 4)
    // √(300 · 400)/√(500 · 800) = 346.41/632.46
    expect(severityOf({ ...mode, media: MEDIA_HARDNESS['steel-grit'] })).toBeCloseTo(0.5477, 4)
  })

  it('goes with the absolute pressure at the nozzle', () => {
    expect(severityOf({ ...mode, nozzlePressureKpaAbsolute: 94.7 * psiAbsolute })).toBeCloseTo(
      94.7 / 114.7,
      9,
    )
  })

  it('wet changes nothing until a factor is set, and then the life', () => {
    expect(severityOf({ ...mode, isWet: true })).toBeCloseTo(1, 9)
    expect(severityOf({ ...mode, isWet: true, wetLifeFactor: 4 })).toBeCloseTo(0.25, 9)
    expect(severityOf({ ...mode, isWet: false, wetLifeFactor: 4 })).toBeCloseTo(1, 9)
  })

  it('turns the hours of a shift into equivalent hours', () => {
    expect(equivalentHours(6, { ...mode, media: MEDIA_HARDNESS['aluminium-oxide'] })).toBeCloseTo(
      6 * 12.2474,
      3,
    )
    expect(equivalentHours(0, mode)).toBe(0)
  })

  it('a table of the company replaces ours', () => {
    const hours = { lowHours: 100, highHours: 100 }
    const lives = [
      {
        liner: 'tungsten-carbide' as const,
        hours: { steel: hours, 'sand-or-slag': hours, 'aluminium-oxide': { lowHours: 50, highHours: 50 } },
      },
    ]
    expect(severityOf({ ...mode, media: MEDIA_HARDNESS['aluminium-oxide'], lives })).toBeCloseTo(2, 9)
    expect(findLife('boron-carbide', undefined, lives)).toMatchObject({
      liner: 'tungsten-carbide',
      hasData: false,
    })
    expect(() => findLife('steel', undefined, [])).toThrow('life table is empty')
  })
})

describe('the rate of a liner before any check', () => {
  it('is a sixteenth of an inch over the middle of the range', () => {
    // 1.5875 mm / √(300 · 400) h
    const prior = ratePriorOf('tungsten-carbide')
    expect(prior.medianMmPerHour).toBeCloseTo(0.0045827, 7)
    expect(prior.hasData).toBe(true)
  })

  it('takes the range as 80 %, and none as better than 0.35', () => {
    // ln(400/300)/2.5631 = 0.112; ln(30/10)/2.5631 = 0.4286
    expect(ratePriorOf('tungsten-carbide').logSigma).toBe(0.35)
    expect(ratePriorOf('alumina-ceramic').logSigma).toBeCloseTo(0.4286, 4)
  })

  it('says "no data" for a liner without a row, and takes the nearest by hardness', () => {
    const nitride = ratePriorOf('silicon-nitride')
    expect(nitride).toMatchObject({ liner: 'tungsten-carbide', logSigma: 1, hasData: false })
    expect(nitride.medianMmPerHour).toBe(ratePriorOf('tungsten-carbide').medianMmPerHour)
    expect(ratePriorOf('steel')).toMatchObject({ liner: 'alumina-ceramic', logSigma: 1, hasData: false })
  })

  it('says "no data" for a media without a column, and takes the nearest by hardness', () => {
    const nearest = (id: keyof typeof MEDIA_HARDNESS) => findLife('tungsten-carbide', MEDIA_HARDNESS[id])
    expect(nearest('garnet')).toMatchObject({ lifeMedia: 'sand-or-slag', hasData: false })
    expect(nearest('silicon-carbide')).toMatchObject({ lifeMedia: 'aluminium-oxide', hasData: false })
    expect(nearest('glass-bead')).toMatchObject({ lifeMedia: 'steel', hasData: false })
    expect(nearest('silica-sand')).toMatchObject({ lifeMedia: 'sand-or-slag', hasData: true })
    const medias = [MEDIA_HARDNESS['silica-sand'], MEDIA_HARDNESS.garnet]
    expect(ratePriorOf('tungsten-carbide', { medias })).toMatchObject({ logSigma: 1, hasData: false })
  })
})

describe('the life table', () => {
  it('is shown as common practice, and its ranges rise', () => {
    expect(LINER_LIFE_SOURCE.status).toBe('common practice, no source')
    for (const { hours } of LINER_LIVES) {
      for (const { lowHours, highHours } of Object.values(hours)) expect(lowHours).toBeLessThan(highHours)
    }
  })

  it('knows the hardness of every abrasive of the catalogue', () => {
    expect(Object.keys(MEDIA_HARDNESS).toSorted()).toEqual(ABRASIVES.map(({ id }) => id).toSorted())
  })
})
