import { describe, expect, it } from 'vitest'
import type { CheckAnswer, Verdict } from '#shared/contracts/check.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import VerdictHero from '../../../../src/components/check/VerdictHero.vue'
import { makeCheckRequest } from '../../../support/checkRequest.ts'
import { mountInApp, textOf } from '../mountInApp.ts'

const psi = 6.894757293168361
const cfm = 0.028316846592

interface Shown {
  verdict: Verdict
  pressuresPsi?: number[] | null
  marginPct?: number | null
  reason?: string | null
  isStale?: boolean
  hoods?: number
  units?: UnitSystem
  language?: 'en' | 'es'
}

/** A verdict of 100 psi, with the pressures at the nozzles as said. */
function showVerdict({
  verdict,
  pressuresPsi = [104],
  marginPct = null,
  reason = null,
  isStale = false,
  hoods = 0,
  units = 'us',
  language = 'en',
}: Shown) {
  const request = makeCheckRequest({
    targetNozzlePressureKpa: 100 * psi,
    airTakenFirst: Array.from({ length: hoods }, () => ({ name: 'hood', freeAirM3Min: 0.4 })),
  })
  const answer: CheckAnswer = {
    verdict,
    reason,
    operatingPoint: pressuresPsi && {
      compressorPressureKpa: 110 * psi,
      freeAirM3Min: 5,
      outlets: pressuresPsi.map((pressure) => ({
        nozzlePressureKpa: pressure * psi,
        freeAirM3Min: 5,
        massFlowKgS: 0.1,
        choked: true,
      })),
    },
    atTarget:
      marginPct === null
        ? null
        : {
            requiredFreeAirM3Min: 219 * cfm,
            requiredCompressorPressureKpa: 105 * psi,
            deliveredFreeAirM3Min: 286 * cfm,
            airMarginPct: marginPct,
          },
    outlets: [],
    waterToDrainLPerHour: null,
    cautions: [],
  }
  const check = { request, question: questionOfCheck(request), answer }
  const { wrapper } = mountInApp(VerdictHero, { check, isStale }, { units, language })
  const text = (id: string) => {
    const part = wrapper.get(`[data-testid="${id}"]`)
    const sentences = part.findAll('p')
    return sentences.length === 0 ? textOf(part) : sentences.map(textOf).join(' ')
  }
  return { wrapper, text, others: wrapper.findAll('.others li').map(textOf) }
}

describe('the verdict', () => {
  it('is a word, a pressure and the sentence of the needle gauge', () => {
    const { wrapper, text } = showVerdict({ verdict: 'holds', marginPct: 23.4 })
    expect(text('verdict')).toBe('Holds')
    expect(text('nozzle-pressure')).toBe('104')
    expect(textOf(wrapper.get('.unit'))).toBe('psi at the nozzle')
    expect(text('sentence')).toBe(
      'Target 100 psi. You should see about 104 psi on the needle gauge. ' +
        '23 % air margin: needs 219 cfm of the 286 cfm it delivers at 105 psi.',
    )
  })

  it('has its own shape and class for each', () => {
    const shapes = (['holds', 'barely-holds', 'falls-short', 'cannot-run'] as const).map((verdict) => {
      const { wrapper } = showVerdict({ verdict })
      expect(wrapper.get('section').classes()).toContain(verdict)
      const shape = wrapper.get('svg').html()
      wrapper.unmount()
      return shape
    })
    expect(new Set(shapes).size).toBe(4)
  })

  it('counts hoods in where there are some', () => {
    const { text } = showVerdict({ verdict: 'holds', marginPct: 12, hoods: 1 })
    expect(text('sentence')).toContain('it delivers at 105 psi, breathing air and tools first.')
  })

  it.each([
    [4.26, '4.3 % air margin'],
    [-3.21, '3.2 % air margin'],
    [0, '0.0 % air margin'],
    [-1e-9, '0.0 % air margin'],
    [9.97, '10 % air margin'],
  ])('says a margin of %d as %s', (marginPct, said) => {
    const sentence = showVerdict({ verdict: 'barely-holds', marginPct }).text('sentence')
    expect(sentence).toContain(said)
    const isNegative = /[-−]\d/.test(sentence)
    expect(isNegative).toBe(marginPct < -0.05)
  })

  it('gives one more digit where rounding would hide that it falls short', () => {
    const { text } = showVerdict({ verdict: 'falls-short', pressuresPsi: [99.7] })
    expect(text('nozzle-pressure')).toBe('99.7')
    expect(text('sentence')).toContain('You should see about 99.7 psi on the needle gauge.')
  })

  it('and more, where that is not enough', () => {
    const { text } = showVerdict({ verdict: 'falls-short', pressuresPsi: [99.97] })
    expect(text('nozzle-pressure')).toBe('99.97')
  })

  it('also in bar', () => {
    // 99.7 psi = 6.874 bar; 100 psi = 6.895 bar, both 6.9
    const { text } = showVerdict({ verdict: 'falls-short', pressuresPsi: [99.7], units: 'metric' })
    expect(text('nozzle-pressure')).toBe('6.87')
  })

  it('gives no more digits than a gauge shows where it hides nothing', () => {
    const short = showVerdict({ verdict: 'falls-short', pressuresPsi: [96.4] })
    expect(short.text('nozzle-pressure')).toBe('96')
    short.wrapper.unmount()
    const holds = showVerdict({ verdict: 'barely-holds', pressuresPsi: [100.3] })
    expect(holds.text('nozzle-pressure')).toBe('100')
  })

  it('of several nozzles is that of the lowest, with the others beside it', () => {
    const { wrapper, text, others } = showVerdict({ verdict: 'holds', pressuresPsi: [104.2, 101.4, 108] })
    expect(text('nozzle-pressure')).toBe('101')
    expect(textOf(wrapper.get('.unit'))).toBe('psi at the lowest nozzle')
    expect(others).toEqual(['Nozzle 1: 104 psi', 'Nozzle 2: 101 psi', 'Nozzle 3: 108 psi'])
  })

  it('does not say two things about one nozzle', () => {
    const { text, others } = showVerdict({ verdict: 'falls-short', pressuresPsi: [104.2, 99.7] })
    expect(text('nozzle-pressure')).toBe('99.7')
    expect(others).toEqual(['Nozzle 1: 104.2 psi', 'Nozzle 2: 99.7 psi'])
  })

  it('without a balance has no pressure and no gauge, but its reason', () => {
    const { wrapper, text } = showVerdict({
      verdict: 'cannot-run',
      pressuresPsi: null,
      reason: 'air-taken-first',
    })
    expect(wrapper.find('[data-testid="nozzle-pressure"]').exists()).toBe(false)
    expect(textOf(wrapper.get('.pressure'))).toBe('no steady pressure')
    expect(text('sentence')).toBe(
      'Target 100 psi. Hoods and tools take all the air there is; nothing is left for the nozzle.',
    )
  })

  it('names the part that is in the way', () => {
    const { text } = showVerdict({
      verdict: 'falls-short',
      pressuresPsi: null,
      reason: 'choked:blast-hose-2',
    })
    expect(text('sentence')).toContain('The blast hose 2 is too narrow: this much air cannot pass it.')
  })

  it('stays, and says that it is old, while a field is half typed', () => {
    const { wrapper, text } = showVerdict({ verdict: 'holds', isStale: true })
    expect(text('verdict')).toBe('Holds')
    expect(wrapper.get('section').classes()).toContain('stale')
    expect(textOf(wrapper.get('[role="status"]'))).toBe('The last whole answer; a field is not finished.')
  })

  it('speaks Spanish', () => {
    const { text } = showVerdict({ verdict: 'barely-holds', marginPct: 2.5, language: 'es' })
    expect(text('verdict')).toBe('Apenas aguanta')
    expect(text('sentence')).toBe(
      'Se piden 100 psi. En el manómetro de aguja debe ver cerca de 104 psi. ' +
        '2.5 % de margen de aire: gasta 219 cfm de los 286 cfm que da a 105 psi.',
    )
  })
})
