import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { checkAnswerSchema } from '#shared/contracts/check.ts'
import { makeCheckRequest } from '../support/checkRequest.ts'
import { listErrors, postCheck, postText, readProblem } from '../support/requests.ts'
import { startServer } from '../support/server.ts'
import type { RunningServer } from '../support/server.ts'

let server: RunningServer
beforeAll(async () => {
  server = await startServer()
})
afterAll(() => server.stop())

async function refusedFields(body: unknown): Promise<string[]> {
  const response = await postCheck(server.address, body)
  expect(response.status).toBe(422)
  const problem = await readProblem(response)
  expect(problem.code).toBe('invalid-fields')
  return listErrors(problem)
}

describe('a check that can be answered', () => {
  it('gets a verdict in the shape of the contract', async () => {
    const response = await postCheck(server.address, makeCheckRequest())
    expect(response.status).toBe(200)
    const answer = checkAnswerSchema.parse(await response.json())
    expect(answer.outlets).toHaveLength(1)
    // A No. 4 at 90 psi draws far less than 185 cfm in any published nozzle chart.
    expect(answer.verdict).toBe('holds')
  })

  it('falls short with 185 cfm on a No. 8 at 90 psi', async () => {
    const outlets = [{ line: [], nozzle: { boreMm: 12.7 } }]
    const response = await postCheck(server.address, makeCheckRequest({ outlets }))
    expect(await response.json()).toMatchObject({ verdict: 'falls-short' })
  })

  it('is never stored by a cache on the way', async () => {
    const response = await postCheck(server.address, makeCheckRequest())
    expect(response.headers.get('cache-control')).toBe('no-store')
  })

  it('reads a bore of 9.5254 mm as the 3/8 in it is', async () => {
    const answers = [9.525, 9.5254].map(async (boreMm) => {
      const response = await postCheck(
        server.address,
        makeCheckRequest({ outlets: [{ line: [], nozzle: { boreMm } }] }),
      )
      return response.json()
    })
    const [exact, rounded] = await Promise.all(answers)
    expect(rounded).toEqual(exact)
    expect(exact).toHaveProperty('verdict')
  })

  it('takes every list at its cap', async () => {
    const line = Array.from({ length: 12 }, () => ({ insideDiameterMm: 50 }))
    const body = makeCheckRequest({
      airLine: line,
      outlets: Array.from({ length: 4 }, () => ({ line, nozzle: { boreMm: 3.175 } })),
      airTakenFirst: Array.from({ length: 8 }, () => ({ name: 'x'.repeat(60), freeAirM3Min: 0.1 })),
    })
    const response = await postCheck(server.address, body)
    expect(response.status).toBe(200)
    checkAnswerSchema.parse(await response.json())
  })
})

describe('a check with wrong fields', () => {
  it('names a field that does not exist, at any depth', async () => {
    const body = makeCheckRequest()
    const nozzle = { boreMm: 6.35, bore: 1 }
    const errors = await refusedFields({ ...body, colour: 'red', outlets: [{ line: [], nozzle }] })
    expect(errors.sort()).toEqual(['unknown-field /colour', 'unknown-field /outlets/0/nozzle/bore'])
  })

  it('refuses the names that JavaScript keeps for itself', async () => {
    const text = JSON.stringify(makeCheckRequest()).replace('{', '{"__proto__":{"a":1},"constructor":1,')
    const response = await postText(server.address, text)
    expect(response.status).toBe(422)
    expect(listErrors(await readProblem(response))).toContain('unknown-field /__proto__')
  })

  it('names a text where a number belongs, a missing list and a null', async () => {
    const { airLine: _airLine, ...body } = makeCheckRequest()
    const site = { altitudeM: '0', airTemperatureC: 20, relativeHumidityPct: null }
    const errors = await refusedFields({ ...body, site })
    expect(errors.sort()).toEqual([
      'required /airLine',
      'wrong-type /site/altitudeM',
      'wrong-type /site/relativeHumidityPct',
    ])
  })

  it('says that null is not the same as leaving it out', async () => {
    const response = await postCheck(server.address, { ...makeCheckRequest(), bitSet: null })
    const problem = await readProblem(response)
    expect(listErrors(problem)).toEqual(['not-a-choice /bitSet'])
  })

  it('names each figure out of range', async () => {
    const errors = await refusedFields(
      makeCheckRequest({
        site: { altitudeM: 5000.1, airTemperatureC: -40.1, barometerKpa: 49.9 },
        outlets: [{ line: [], regulatorKpa: 9, nozzle: { boreMm: 0.99, dischargeCoefficient: 1.01 } }],
        targetNozzlePressureKpa: 3501,
      }),
    )
    expect(errors.sort()).toEqual([
      'too-big /outlets/0/nozzle/dischargeCoefficient',
      'too-big /site/altitudeM',
      'too-big /targetNozzlePressureKpa',
      'too-small /outlets/0/nozzle/boreMm',
      'too-small /outlets/0/regulatorKpa',
      'too-small /site/airTemperatureC',
      'too-small /site/barometerKpa',
    ])
  })

  it('says in words what would be possible', async () => {
    const response = await postCheck(server.address, makeCheckRequest({ targetNozzlePressureKpa: 9 }))
    const problem = await readProblem(response)
    expect(problem.errors).toEqual([
      {
        path: '/targetNozzlePressureKpa',
        code: 'too-small',
        message: 'targetNozzlePressureKpa must be at least 10.',
      },
    ])
  })

  it.each(['1e999', '-1e999'])('refuses %s, which is no finite number', async (figure) => {
    const text = JSON.stringify(makeCheckRequest()).replace('"altitudeM":0', `"altitudeM":${figure}`)
    const response = await postText(server.address, text)
    expect(response.status).toBe(422)
    expect(listErrors(await readProblem(response))).toEqual(['not-finite /site/altitudeM'])
  })

  it('refuses NaN, which is not JSON', async () => {
    const text = JSON.stringify(makeCheckRequest()).replace('"altitudeM":0', '"altitudeM":NaN')
    const response = await postText(server.address, text)
    expect(response.status).toBe(400)
    expect((await readProblem(response)).code).toBe('bad-json')
  })

  it('wants exactly one of nameplate and curve', async () => {
    const pressures = { setPressureKpa: 690, unloadPressureKpa: 830 }
    expect(await refusedFields(makeCheckRequest({ compressor: pressures }))).toEqual([
      'one-of-two /compressor/ratedFreeAirM3Min',
    ])
    const curve = [{ pressureKpa: 600, freeAirM3Min: 5 }]
    const both = { ...pressures, ratedFreeAirM3Min: 5, curve }
    expect(await refusedFields(makeCheckRequest({ compressor: both }))).toEqual([
      'one-of-two /compressor/curve',
    ])
    const response = await postCheck(
      server.address,
      makeCheckRequest({ compressor: { ...pressures, curve } }),
    )
    expect(response.status).toBe(200)
  })

  it('wants a curve of rising pressure and never rising free air', async () => {
    const curve = [
      { pressureKpa: 500, freeAirM3Min: 5 },
      { pressureKpa: 500, freeAirM3Min: 5 },
      { pressureKpa: 600, freeAirM3Min: 5.1 },
    ]
    const compressor = { curve, setPressureKpa: 690, unloadPressureKpa: 830 }
    expect(await refusedFields(makeCheckRequest({ compressor }))).toEqual([
      'curve-pressure-not-rising /compressor/curve/1/pressureKpa',
      'curve-free-air-rising /compressor/curve/2/freeAirM3Min',
    ])
  })

  it('wants the unload pressure 10 kPa above the set pressure', async () => {
    const compressor = { ratedFreeAirM3Min: 5, setPressureKpa: 690, unloadPressureKpa: 699.9 }
    expect(await refusedFields(makeCheckRequest({ compressor }))).toEqual([
      'unload-too-near-set /compressor/unloadPressureKpa',
    ])
    const response = await postCheck(
      server.address,
      makeCheckRequest({ compressor: { ...compressor, unloadPressureKpa: 700 } }),
    )
    expect(response.status).toBe(200)
  })

  it('takes no outlet as a rig that cannot run, and at most four', async () => {
    const outlet = { line: [], nozzle: { boreMm: 6.35 } }
    const answer = await (await postCheck(server.address, makeCheckRequest({ outlets: [] }))).json()
    expect(answer).toMatchObject({ verdict: 'cannot-run', reason: 'no-nozzle', outlets: [] })
    expect(await refusedFields(makeCheckRequest({ outlets: Array(5).fill(outlet) }))).toEqual([
      'too-many /outlets',
    ])
  })

  it('refuses a name of 61 characters and a bit set it does not know', async () => {
    const airTakenFirst = [{ name: 'x'.repeat(61), freeAirM3Min: 1 }]
    const errors = await refusedFields({ ...makeCheckRequest({ airTakenFirst }), bitSet: 'imperial' })
    expect(errors.sort()).toEqual(['not-a-choice /bitSet', 'too-long /airTakenFirst/0/name'])
  })

  it.each(['null', '5', '"text"', '[]', 'true'])('refuses %s as a body', async (text) => {
    const response = await postText(server.address, text)
    expect(response.status).toBe(422)
    expect(listErrors(await readProblem(response))).toEqual(['wrong-type '])
  })
})
