import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkRequestSchema } from '#shared/contracts/check.ts'
import type { CheckElement, CheckRequest } from '#shared/contracts/check.ts'
import { createCheckForm, createOutlet } from '#shared/form/checkForm.ts'
import type { CheckForm, TypedText } from '#shared/form/checkForm.ts'
import { readForm } from '#shared/form/readForm.ts'
import type { OtherUnit } from '#shared/form/readForm.ts'
import { arbitraryForm, freezeDeeply, nonsense } from './randomForms.ts'

/** pound 0.45359237 kg, standard gravity 9.80665 m/s², inch 25.4 mm, foot 0.3048 m: the definitions. */
const kpaPerPsi = (0.45359237 * 9.80665) / 0.0254 ** 2 / 1000
const m3PerCubicFoot = 0.3048 ** 3

const us = (text: string): TypedText => ({ text, system: 'us' })
const metric = (text: string): TypedText => ({ text, system: 'metric' })

function formWith(change: (form: CheckForm) => void): CheckForm {
  const form = createCheckForm()
  change(form)
  return freezeDeeply(form)
}

const problemsOf = (change: (form: CheckForm) => void) => {
  const { request, problems } = readForm(formWith(change))
  return {
    request,
    problems: Object.fromEntries(Object.entries(problems).map(([path, { problem }]) => [path, problem])),
  }
}

function requestOf(change: (form: CheckForm) => void = () => {}): CheckRequest {
  const { request, problems } = readForm(formWith(change))
  expect(problems).toEqual({})
  return request!
}

describe('the rig a visitor finds', () => {
  it('asks what its words say, in the units of the contract', () => {
    expect(requestOf()).toEqual({
      site: {
        altitudeM: expect.closeTo(304.8, 9), // 1,000 ft
        airTemperatureC: expect.closeTo(80 / 3, 9), // (80 − 32) · 5/9
        relativeHumidityPct: 50,
      },
      compressor: {
        ratedFreeAirM3Min: expect.closeTo(375 * m3PerCubicFoot, 9),
        setPressureKpa: expect.closeTo(125 * kpaPerPsi, 9),
        unloadPressureKpa: expect.closeTo(145 * kpaPerPsi, 9),
        lineTemperatureRiseK: 10,
      },
      airLine: [
        {
          name: 'air-line',
          insideDiameterMm: expect.closeTo(38.1, 9),
          lengthM: expect.closeTo(7.62, 9),
          lossK: 2,
          roughnessMm: 0.01,
        },
      ],
      outlets: [
        {
          line: [
            { name: 'pot', insideDiameterMm: 31.75, lossK: 8 },
            {
              name: 'blast-hose',
              insideDiameterMm: 31.75,
              lengthM: expect.closeTo(15.24, 9),
              lossK: 2,
              roughnessMm: 0.01,
              mediaFactor: 1.3,
            },
            {
              name: 'whip',
              insideDiameterMm: expect.closeTo(25.4, 9),
              lengthM: expect.closeTo(3.048, 9),
              lossK: 1,
              roughnessMm: 0.01,
              mediaFactor: 1.3,
            },
          ],
          nozzle: {
            boreMm: expect.closeTo((29 * 25.4) / 64, 9),
            newBoreMm: expect.closeTo((7 * 25.4) / 16, 9),
            dischargeCoefficient: 0.81,
          },
        },
      ],
      airTakenFirst: [{ name: 'hood', freeAirM3Min: expect.closeTo(15 * m3PerCubicFoot, 9) }],
      targetNozzlePressureKpa: expect.closeTo(100 * kpaPerPsi, 9),
      bitSet: 'fractional-64',
    })
  })

  it('is let through by the contract as it stands', () => {
    const request = requestOf()
    expect(checkRequestSchema.parse(request)).toEqual(request)
  })
})

describe('a field that cannot be read', () => {
  /** Each quantity of the form, and a text that is outside its range. */
  const fields: [path: string, put: (form: CheckForm, typed: TypedText) => void, tooFar: string][] = [
    ['site.altitude', (form, typed) => (form.site.altitude = typed), '6000 m'],
    ['site.airTemperature', (form, typed) => (form.site.airTemperature = typed), '70 °C'],
    ['site.humidity', (form, typed) => (form.site.humidity = typed), '101 %'],
    ['compressor.freeAir', (form, typed) => (form.compressor.freeAir = typed), '151 m³/min'],
    ['compressor.setPressure', (form, typed) => (form.compressor.setPressure = typed), '36 bar'],
    ['compressor.unload', (form, typed) => (form.compressor.unload = typed), '41 bar'],
    ['compressor.condition', (form, typed) => (form.compressor.condition = typed), '121 %'],
    ['airLine.bore', (form, typed) => (form.airLine.bore = typed), '2 mm'],
    ['airLine.length', (form, typed) => (form.airLine.length = typed), '1001 m'],
    ['airLine.roughness', (form, typed) => (form.airLine.roughness = typed), '2 mm'],
    ['pot.bore', (form, typed) => (form.pot.bore = typed), '201 mm'],
    ['pot.lossK', (form, typed) => (form.pot.lossK = typed), '1001'],
    ['outlets.0.hose.bore', (form, typed) => (form.outlets[0]!.hose.bore = typed), '201 mm'],
    ['outlets.0.whip.length', (form, typed) => (form.outlets[0]!.whip.length = typed), '-1 ft'],
    ['outlets.0.newBore', (form, typed) => (form.outlets[0]!.newBore = typed), '61 mm'],
    ['outlets.0.boreNow', (form, typed) => (form.outlets[0]!.boreNow = typed), '61 mm'],
    ['outlets.0.regulator', (form, typed) => (form.outlets[0]!.regulator = typed), '1 psi'],
    ['outlets.0.coefficient', (form, typed) => (form.outlets[0]!.coefficient = typed), '1.1'],
    ['hoods.flowEach', (form, typed) => (form.hoods.flowEach = typed), '51 m³/min'],
    ['tools.flow', (form, typed) => (form.tools.flow = typed), '51 m³/min'],
    ['target', (form, typed) => (form.target = typed), '1 psi'],
  ]

  it.each(fields)(
    '%s: nonsense, another quantity or too far a value is said at its place',
    (path, put, tooFar) => {
      for (const [text, problem] of [
        ['about right', 'not-a-number'],
        ['5 lb/h', 'wrong-kind'],
        ['5 smoots', 'unknown-unit'],
        ['9'.repeat(41), 'too-long'],
        [tooFar, 'out-of-range'],
      ] as const) {
        const read = problemsOf((form) => put(form, us(text)))
        expect(read.problems, text).toEqual({ [path]: problem })
        expect(read.request, text).toBeNull()
      }
    },
  )

  it.each(
    fields.filter(
      ([path]) => !/humidity|unload|condition|roughness|lossK|boreNow|regulator|coefficient|tools/.test(path),
    ),
  )('%s is asked for where it is blank', (path, put) => {
    const read = problemsOf((form) => put(form, us('  ')))
    expect(read.problems).toEqual({ [path]: 'empty' })
    expect(read.request).toBeNull()
  })

  it('leaves the values of all the others to be read', () => {
    const { values } = readForm(formWith((form) => (form.target = us('?'))))
    expect(values).not.toHaveProperty('target')
    expect(values['compressor.freeAir']).toBeCloseTo(375 * m3PerCubicFoot, 9)
    expect(values['outlets.0.newBore']).toBeCloseTo(11.1125, 9)
  })

  it('does not count where its part is not used', () => {
    expect(
      requestOf((form) => Object.assign(form.airLine, { isUsed: false, bore: us('?') })).airLine,
    ).toEqual([])
    const withoutPot = requestOf((form) => Object.assign(form.pot, { isUsed: false, bore: us('?') }))
    expect(withoutPot.outlets[0]!.line.map(({ name, mediaFactor }) => [name, mediaFactor])).toEqual([
      ['blast-hose', undefined],
      ['whip', undefined],
    ])
    expect(requestOf((form) => (form.hoods = { count: 0, flowEach: us('?') })).airTakenFirst).toEqual([])
  })

  it('of an hour is said, but does not hold the check up', () => {
    const read = readForm(formWith((form) => (form.hour.bagMass = us('heavy'))))
    expect(read.problems['hour.bagMass']?.problem).toBe('not-a-number')
    expect(read.request).not.toBeNull()
  })
})

describe('a blank stands for its default', () => {
  it('unload 20 psi over set, no humidity, no condition, as new, no regulator, no tools', () => {
    const request = requestOf((form) => {
      form.site.humidity = us('')
      form.compressor.setPressure = us('100 psi')
      form.outlets[0]!.boreNow = us(' ')
    })
    expect(request.compressor.unloadPressureKpa).toBeCloseTo(120 * kpaPerPsi, 9)
    expect(request.site).not.toHaveProperty('relativeHumidityPct')
    expect(request.compressor).not.toHaveProperty('conditionFactor')
    expect(request.compressor).not.toHaveProperty('engine')
    expect(request.outlets[0]).not.toHaveProperty('regulatorKpa')
    expect(request.outlets[0]!.nozzle.boreMm).toBe(request.outlets[0]!.nozzle.newBoreMm)
  })

  it.each([
    ['clean', 'venturi', 0.97],
    ['lean', 'venturi', 0.87],
    ['heavy-or-wet', 'venturi', 0.76],
    ['clean', 'straight', 0.9021], // 0.97 · 0.93
  ] as const)('the coefficient of %s through a %s is %d', (loading, shape, coefficient) => {
    const request = requestOf((form) => Object.assign(form.outlets[0]!, { loading, shape }))
    expect(request.outlets[0]!.nozzle.dischargeCoefficient).toBeCloseTo(coefficient, 12)
  })

  it('and what is typed takes its place', () => {
    const request = requestOf((form) => {
      form.compressor.unload = us('150 psi')
      form.compressor.condition = us('85')
      form.compressor.cooling = 'bare'
      form.compressor.engine = 'turbo'
      form.pot.lossK = us('12')
      form.tools.flow = us('30 cfm')
      Object.assign(form.outlets[0]!, { regulator: us('90 psi'), coefficient: us('0.9') })
    })
    expect(request.compressor).toMatchObject({
      unloadPressureKpa: expect.closeTo(150 * kpaPerPsi, 9) as number,
      conditionFactor: 0.85,
      lineTemperatureRiseK: 40,
      engine: 'turbo',
    })
    expect(request.outlets[0]!.line[0]).toMatchObject({ name: 'pot', lossK: 12 })
    expect(request.outlets[0]!.regulatorKpa).toBeCloseTo(90 * kpaPerPsi, 9)
    expect(request.outlets[0]!.nozzle.dischargeCoefficient).toBe(0.9)
    expect(request.airTakenFirst.map(({ name }) => name)).toEqual(['hood', 'tools'])
  })
})

describe('what a person types for a nozzle', () => {
  const newBoreOf = (typed: TypedText) =>
    requestOf((form) => Object.assign(form.outlets[0]!, { newBore: typed, boreNow: us('') })).outlets[0]!
      .nozzle.newBoreMm

  it.each(['No. 6', '#6', 'no 6', '3/8', '3/8 in', '0.375', '9.525 mm', '9.5254 mm'])(
    '%s is three eighths',
    (text) => {
      expect(newBoreOf(us(text))).toBe(9.525)
    },
  )

  it('a bare number is taken in the units it was typed under', () => {
    expect(newBoreOf(metric('9.5'))).toBe(9.5)
    expect(newBoreOf(us('0.31'))).toBeCloseTo(7.874, 9)
  })

  it('a bare whole number of inches is asked about: a number or a bore', () => {
    expect(problemsOf((form) => (form.outlets[0]!.newBore = us('8'))).problems).toEqual({
      'outlets.0.newBore': 'ambiguous-bore',
    })
  })

  it('the same text means another thing under other units', () => {
    const target = (typed: TypedText) => requestOf((form) => (form.target = typed)).targetNozzlePressureKpa
    expect(target(metric('7'))).toBeCloseTo(700, 9)
    expect(target(us('100'))).toBeCloseTo(100 * kpaPerPsi, 9)
    expect(target(us('7 bar'))).toBeCloseTo(700, 9)
  })

  it('a unit of no table of ours goes to the other reader, once there is one', () => {
    const yards: OtherUnit = (kind) => (text) =>
      kind === 'length' && text.endsWith(' yd') ? { value: parseFloat(text) * 0.9144, unit: 'm' } : null
    const form = formWith((changed) => (changed.airLine.length = us('10 yd')))
    expect(readForm(form).problems['airLine.length']?.problem).toBe('unknown-unit')
    expect(readForm(form, yards).request!.airLine[0]!.lengthM).toBeCloseTo(9.144, 9)
  })
})

describe('rules between fields', () => {
  it('unload is at least 10 kPa over set', () => {
    const withUnload = (unload: string) =>
      problemsOf((form) => Object.assign(form.compressor, { setPressure: us('700 kPa'), unload: us(unload) }))
    expect(withUnload('710 kPa').problems).toEqual({})
    expect(withUnload('709 kPa').problems).toEqual({ 'compressor.unload': 'unload-too-near-set' })
    expect(withUnload('709 kPa').request).toBeNull()
  })

  it('a bore does not shrink', () => {
    const nowAt = (boreNow: string) =>
      problemsOf((form) => Object.assign(form.outlets[0]!, { newBore: us('No. 6'), boreNow: us(boreNow) }))
    expect(nowAt('3/8').problems).toEqual({})
    expect(nowAt('9.525 mm').problems).toEqual({})
    expect(nowAt('23/64').problems).toEqual({ 'outlets.0.boreNow': 'bore-now-under-new' })
    expect(nowAt('23/64').request).toBeNull()
  })

  it('a curve rises in pressure and does not rise in air, and takes the place of the nameplate', () => {
    const point = (pressure: string, freeAir: string) => ({ pressure: us(pressure), freeAir: us(freeAir) })
    const withCurve = (...curve: ReturnType<typeof point>[]) =>
      problemsOf((form) => Object.assign(form.compressor, { curve, freeAir: us('') }))
    const good = withCurve(
      point('4 bar', '11 m3/min'),
      point('7 bar', '10 m3/min'),
      point('9 bar', '10 m3/min'),
    )
    expect(good.problems).toEqual({})
    expect(good.request!.compressor).not.toHaveProperty('ratedFreeAirM3Min')
    expect(good.request!.compressor.curve).toEqual([
      { pressureKpa: 400, freeAirM3Min: 11 },
      { pressureKpa: 700, freeAirM3Min: 10 },
      { pressureKpa: 900, freeAirM3Min: 10 },
    ])
    expect(withCurve(point('7 bar', '11 m3/min'), point('7 bar', '10 m3/min')).problems).toEqual({
      'compressor.curve.1.pressure': 'curve-not-rising',
    })
    expect(withCurve(point('4 bar', '10 m3/min'), point('7 bar', '11 m3/min')).problems).toEqual({
      'compressor.curve.1.freeAir': 'curve-air-rising',
    })
    expect(withCurve(point('4 bar', '10 m3/min'), point('', '9 m3/min')).problems).toEqual({
      'compressor.curve.1.pressure': 'empty',
    })
  })
})

describe('a loss that was measured', () => {
  /**
   * By hand, for 5 psi at 185 cfm through 1 1/4 in at 125 psi, by the sea at 20 °C, 10 K warmer in the line:
   *   p1 = 861,845 + 101,325 = 963,170 Pa, p2 = p1 − 34,474 = 928,696 Pa
   *   ṁ  = 185 · 0.0283168/60 · 101,325/(287.05 · 293.15) = 0.105132 kg/s: free air is at the site's temperature
   *   G  = ṁ / (π/4 · 0.03175²) = 132.787 kg/(s m²)
   *   K  = (p1² − p2²)/(G² · 287.05 · 303.15) − 2 ln(p1/p2) = 42.433
   */
  const handK = 42.43305604665751
  const byTheSea = (form: CheckForm) => {
    form.site = { altitude: us('0 ft'), airTemperature: us('20 °C'), humidity: us('') }
    Object.assign(form.outlets[0]!.hose, { measuredDrop: us('5 psi'), measuredFlow: us('185 cfm') })
  }
  const hoseOf = (request: CheckRequest): CheckElement => request.outlets[0]!.line[1]!

  it('becomes the loss of the hose, in the place of its length and couplings', () => {
    const hose = hoseOf(requestOf(byTheSea))
    expect(hose).toEqual({
      name: 'blast-hose',
      insideDiameterMm: 31.75,
      lossK: expect.closeTo(handK, 6),
    })
  })

  it('is the same loss where the air in the line is hotter and wetter, by the law of the line', () => {
    const request = requestOf((form) => {
      byTheSea(form)
      form.compressor.cooling = 'bare'
      form.site.humidity = us('80 %')
    })
    // 20 °C: saturation 2,339 Pa (steam tables), of which 80 %; the line is at 60 °C
    const massFlow = ((185 * m3PerCubicFoot) / 60) * ((101325 - 0.8 * 2339) / (287.05 * 293.15))
    const flux = massFlow / ((Math.PI / 4) * 0.03175 ** 2)
    const inlet = 125 * kpaPerPsi * 1000 + 101325
    const outlet = inlet - 5 * kpaPerPsi * 1000
    const loss = hoseOf(request).lossK!
    const right = flux ** 2 * 287.05 * 333.15 * (loss + 2 * Math.log(inlet / outlet))
    // the saturation pressure is known to 0.4 % of 2 %
    expect(right / (inlet ** 2 - outlet ** 2)).toBeCloseTo(1, 3)
  })

  it('asks for its flow, and does nothing without its drop', () => {
    expect(problemsOf((form) => (form.airLine.measuredDrop = us('5 psi'))).problems).toEqual({
      'airLine.measuredFlow': 'empty',
    })
    expect(requestOf((form) => (form.airLine.measuredFlow = us('185 cfm')))).toEqual(requestOf())
  })

  it('cannot be more than the hose can lose at that flow, and says how much that is', () => {
    const { request, problems } = readForm(
      formWith((form) => {
        byTheSea(form)
        form.outlets[0]!.hose.measuredDrop = us('130 psi')
      }),
    )
    expect(request).toBeNull()
    const problem = problems['outlets.0.hose.measuredDrop']
    expect(problem?.problem).toBe('drop-too-large')
    // choked at p2 = G √(R T) = 132.787 · 294.99 = 39,171 Pa, which is under the air around: so all of 125 psi
    expect(problem).toMatchObject({ detail: { largestKpa: expect.closeTo(125 * kpaPerPsi, 6) as number } })
  })
})

describe('several nozzles', () => {
  const two = (isShared: boolean) => (form: CheckForm) => {
    form.outlets.push(createOutlet())
    form.pot.isShared = isShared
  }
  const namesOf = (request: CheckRequest) => [
    request.airLine.map(({ name }) => name),
    ...request.outlets.map(({ line }) => line.map(({ name }) => name)),
  ]

  it('share the pot at the end of the air line', () => {
    expect(namesOf(requestOf(two(true)))).toEqual([
      ['air-line', 'pot'],
      ['blast-hose-1', 'whip-1'],
      ['blast-hose-2', 'whip-2'],
    ])
  })

  it('or have one each', () => {
    expect(namesOf(requestOf(two(false)))).toEqual([
      ['air-line'],
      ['pot-1', 'blast-hose-1', 'whip-1'],
      ['pot-2', 'blast-hose-2', 'whip-2'],
    ])
  })

  it('each have their own problems', () => {
    const { problems } = problemsOf((form) => {
      two(true)(form)
      form.outlets[1]!.newBore = us('wide')
    })
    expect(problems).toEqual({ 'outlets.1.newBore': 'not-a-number' })
  })
})

describe('any form at all', () => {
  it('gives a request that the contract lets through, or says what is wrong; and leaves what was typed alone', () => {
    let asked = 0
    fc.assert(
      fc.property(arbitraryForm(nonsense), (form) => {
        const before = JSON.stringify(form)
        const { request, problems, values } = readForm(freezeDeeply(form))
        expect(JSON.stringify(form)).toBe(before)
        expect(Object.values(values).every(Number.isFinite)).toBe(true)
        if (request === null) {
          expect(Object.keys(problems).filter((path) => !path.startsWith('hour.'))).not.toEqual([])
          return
        }
        asked += 1
        const parsed = checkRequestSchema.safeParse(request)
        expect(parsed.error?.issues ?? []).toEqual([])
      }),
      { numRuns: 3000 },
    )
    expect(asked).toBeGreaterThan(300)
  })
})
