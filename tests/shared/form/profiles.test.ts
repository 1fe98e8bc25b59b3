import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { checkRequestSchema } from '#shared/contracts/check.ts'
import { compressorProfileSchema } from '#shared/contracts/compressors.ts'
import { rigProfileSchema } from '#shared/contracts/rigs.ts'
import { siteProfileSchema } from '#shared/contracts/sites.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import type { CheckForm } from '#shared/form/checkForm.ts'
import { checkRequestOfRig, formOfRig, putCompressor, putSite, readRig } from '#shared/form/profiles.ts'
import { readForm } from '#shared/form/readForm.ts'
import { arbitraryForm } from './randomForms.ts'

const psi = (0.45359237 * 9.80665) / 0.0254 ** 2 / 1000
const cubicFoot = 0.3048 ** 3

const savedOf = (form: CheckForm) => readRig(form, readForm(form))

function formWith(change: (form: CheckForm) => void): CheckForm {
  const form = createCheckForm()
  change(form)
  return form
}

/** Sensible forms only: another text in a field is a problem, and then there is nothing to save. */
const readableForm = arbitraryForm(fc.constant('7'))

describe('a check that is saved and opened again', () => {
  it.each(['us', 'metric'] as const)('asks the very same, in %s', (system) => {
    let saved = 0
    fc.assert(
      fc.property(readableForm, (form) => {
        const read = readForm(form)
        const parts = readRig(form, read)
        expect(parts === null).toBe(Object.keys(read.problems).length > 0)
        if (parts === null) return
        saved += 1
        const again = formOfRig(parts.rig, parts.compressor, parts.site, system)
        const readAgain = readForm(again)
        expect(readAgain.problems).toEqual({})
        expect(readAgain.request).toEqual(read.request)
        expect(readRig(again, readAgain)).toEqual(parts)
        expect(checkRequestOfRig(parts.rig, parts.compressor, parts.site)).toEqual(read.request)
      }),
      { numRuns: 300, seed: 16 },
    )
    expect(saved).toBeGreaterThan(100)
  })

  it('asks the very same of any number a record may hold', () => {
    const any = (min: number, max: number) => fc.double({ min, max, noNaN: true })
    const base = savedOf(createCheckForm())!
    fc.assert(
      fc.property(
        any(0.05, 150),
        any(100, 3000),
        any(-40, 60),
        any(-430, 5000),
        any(10, 3500),
        (freeAir, set, heat, altitude, target) => {
          const rig = { ...base.rig, targetNozzlePressureKpa: target }
          const compressor = { ...base.compressor, ratedFreeAirM3Min: freeAir, setPressureKpa: set }
          const site = { ...base.site, airTemperatureC: heat, altitudeM: altitude }
          const asked = checkRequestOfRig(rig, compressor, site)!
          expect([
            asked.compressor.ratedFreeAirM3Min,
            asked.compressor.setPressureKpa,
            asked.site.airTemperatureC,
            asked.site.altitudeM,
            asked.targetNozzlePressureKpa,
          ]).toEqual([freeAir, set, heat, altitude, target].map((value) => value + 0))
          for (const system of ['us', 'metric'] as const) {
            expect(readForm(formOfRig(rig, compressor, site, system)).request).toEqual(asked)
          }
        },
      ),
      { numRuns: 300, seed: 16 },
    )
  })

  it('is what the contracts of the records let through, unchanged', () => {
    const id = '7d3a1e58-7c1f-4a7e-9d36-0d6b9f0c7a11'
    fc.assert(
      fc.property(readableForm, (form) => {
        const parts = savedOf(form)
        if (parts === null) return
        const rig = { name: 'Rig', compressorId: id, siteId: null, ...parts.rig }
        const compressor = {
          name: 'Compressor',
          ownership: 'owned',
          rentedFrom: null,
          rentedUntil: null,
          ...parts.compressor,
        }
        const site = { name: 'Site', timeZone: 'America/Denver', ...parts.site }
        expect(rigProfileSchema.parse(rig)).toEqual(rig)
        expect(compressorProfileSchema.parse(compressor)).toEqual(compressor)
        expect(siteProfileSchema.parse(site)).toEqual(site)
        checkRequestSchema.parse(checkRequestOfRig(parts.rig, parts.compressor, parts.site))
      }),
      { numRuns: 300, seed: 16 },
    )
  })
})

describe('what a form says of a rig', () => {
  it('is kept in the units of the record', () => {
    const { rig, compressor, site } = savedOf(createCheckForm())!
    expect(rig.outlets[0]!.nozzle).toEqual({
      numberSixteenths: 7,
      newBoreMm: 11.1125, // 7 · 25.4 / 16
      boreNowMm: 11.509375, // 29 · 25.4 / 64
      shape: 'venturi',
      loading: 'normal',
      dischargeCoefficient: null,
    })
    expect(rig.airLine).toEqual({
      insideDiameterMm: expect.closeTo(38.1, 12),
      lengthM: expect.closeTo(25 * 0.3048, 12),
      couplings: 2,
      measured: null,
      roughnessMm: null,
    })
    expect(rig.targetNozzlePressureKpa).toBeCloseTo(100 * psi, 9)
    expect(rig.hoods).toEqual({ count: 1, freeAirEachM3Min: expect.closeTo(15 * cubicFoot, 12) })
    expect(rig.toolsFreeAirM3Min).toBeNull()
    expect(compressor).toMatchObject({ cooling: 'aftercooled', engine: null, unloadPressureKpa: null })
    expect(compressor.ratedFreeAirM3Min).toBeCloseTo(375 * cubicFoot, 9)
    expect(site.altitudeM).toBeCloseTo(304.8, 9)
  })

  it('leaves a bore that is no whole number of sixteenths without a number', () => {
    const metric = savedOf(
      formWith((form) => (form.outlets[0]!.newBore = { text: '9.5 mm', system: 'metric' })),
    )
    expect(metric!.rig.outlets[0]!.nozzle).toMatchObject({ numberSixteenths: null, newBoreMm: 9.5 })
    const inch = savedOf(formWith((form) => (form.outlets[0]!.newBore = { text: '3/8', system: 'us' })))
    expect(inch!.rig.outlets[0]!.nozzle.numberSixteenths).toBe(6)
    const form = formOfRig(inch!.rig, inch!.compressor, inch!.site, 'metric')
    expect(form.outlets[0]!.newBore.text).toBe('No. 6')
  })

  it('is written as it was typed, whatever the units it is opened in', () => {
    const { rig, compressor, site } = savedOf(createCheckForm())!
    const form = formOfRig(rig, compressor, site, 'metric')
    expect(form.target).toEqual({ text: '100 psi', system: 'us' })
    expect(form.site.humidity).toEqual({ text: '50 %', system: 'metric' })
    const metric = savedOf(formWith((typed) => (typed.target = { text: '7 bar', system: 'metric' })))!
    expect(formOfRig(metric.rig, compressor, site, 'us').target).toEqual({ text: '7 bar', system: 'metric' })
    expect(formOfRig(metric.rig, compressor, site, 'metric').target.text).toBe('7 bar')
  })

  it('keeps the length of a hose whose loss was measured, where it can be read', () => {
    const measured = (length: string) =>
      savedOf(
        formWith(({ airLine }) => {
          airLine.measuredDrop = { text: '5 psi', system: 'us' }
          airLine.measuredFlow = { text: '185 cfm', system: 'us' }
          airLine.length = { text: length, system: 'us' }
        }),
      )!.rig.airLine!
    expect(measured('25 ft').lengthM).toBeCloseTo(7.62, 9)
    expect(measured('')).toMatchObject({ lengthM: null, measured: { dropKpa: expect.closeTo(5 * psi, 9) } })
  })

  it('is nothing to save while a field is wrong, one of the hour too', () => {
    expect(savedOf(formWith((form) => (form.target.text = 'abc')))).toBeNull()
    expect(savedOf(formWith((form) => (form.hour.bagMass.text = 'abc')))).toBeNull()
  })
})

describe('a compressor or a site that is picked for a form', () => {
  it('takes the place of the one that stood there, and of nothing else', () => {
    fc.assert(
      fc.property(readableForm, readableForm, (form, otherForm) => {
        const [parts, other] = [savedOf(form), savedOf(otherForm)]
        if (!parts || !other) return
        const picked = putSite(putCompressor(form, other.compressor, 'us'), other.site, 'metric')
        const asked = readForm(picked).request
        expect(asked).toEqual(checkRequestOfRig(parts.rig, other.compressor, other.site))
        if (asked) {
          const { rig, compressor, site } = savedOf(picked)!
          expect({ rig, compressor, site }).toEqual({ ...other, rig: parts.rig })
        }
      }),
      { numRuns: 200, seed: 16 },
    )
  })
})

describe('a rig without a compressor or a site', () => {
  const { rig, compressor, site } = savedOf(createCheckForm())!

  it('asks nothing, and its form says which fields are missing', () => {
    expect(checkRequestOfRig(rig, null, site)).toBeNull()
    expect(checkRequestOfRig(rig, compressor, null)).toBeNull()
    const problems = readForm(formOfRig(rig, null, null, 'us')).problems
    expect(Object.keys(problems).sort()).toEqual([
      'compressor.freeAir',
      'compressor.setPressure',
      'site.airTemperature',
      'site.altitude',
    ])
  })

  it('answers as its check does once it has both', () => {
    const asked = checkRequestOfRig(rig, compressor, site)!
    expect(answerCheck(asked)).toEqual(answerCheck(readForm(createCheckForm()).request!))
  })
})
