import { describe, expect, it } from 'vitest'
import type { BitChoice } from '#shared/form/checkForm.ts'
import type { OutletAnswer } from '#shared/contracts/check.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import WarningBits from '../../../../src/components/check/WarningBits.vue'
import { mountInApp, textOf } from '../mountInApp.ts'

const inch = 25.4
const psi = 6.894757293168361
const noSix = (6 / 16) * inch

function showBits(
  outlet: Partial<OutletAnswer>,
  {
    newBoreMm = noSix,
    units = 'us',
    language = 'en',
    bitSet = 'fractional-64',
  }: { newBoreMm?: number; units?: UnitSystem; language?: 'en' | 'es'; bitSet?: BitChoice } = {},
) {
  const answer: OutletAnswer = {
    limitBoreMm: 10.8,
    limitedBy: 'air',
    reason: null,
    noGoBit: null,
    orderBit: null,
    ...outlet,
  }
  const { wrapper } = mountInApp(
    WarningBits,
    { outlet: answer, newBoreMm, targetKpa: 100 * psi, bitSet, outletCount: 1 },
    { units, language },
  )
  const texts = (selector: string) => wrapper.findAll(selector).map(textOf)
  return { wrapper, order: texts('.order > *'), noGo: texts('.no-go > *'), rest: texts('.no-help, .limiter') }
}

describe('the warning bits', () => {
  it('say what each bit means when it goes through', () => {
    const { order, noGo, rest } = showBits({
      orderBit: { name: '27/64', mm: (27 / 64) * inch },
      noGoBit: { name: '7/16', mm: (28 / 64) * inch },
    })
    expect(order).toEqual(['Order bit', '27/64', 'If 27/64 goes all the way through, order the next nozzle.'])
    expect(noGo).toEqual([
      'No-go bit',
      '7/16',
      'If 7/16 goes all the way through, stop using this nozzle at 100 psi.',
    ])
    expect(rest).toEqual([])
  })

  it('with the target in the person’s units and the bit as it is named', () => {
    const { noGo } = showBits(
      { noGoBit: { name: '11 mm', mm: 11 } },
      { units: 'metric', bitSet: 'metric-0.5' },
    )
    expect(noGo[2]).toBe('If 11 mm goes all the way through, stop using this nozzle at 6.9 bar.')
  })

  it('say to order now where a new nozzle already passes the last bit under the limit', () => {
    const { order } = showBits({ noGoBit: { name: '25/64', mm: (25 / 64) * inch }, limitBoreMm: 9.6 })
    expect(order).toEqual([
      'Order bit',
      'none',
      'A new No. 6 already passes 3/8: no warning bit here, order now.',
    ])
  })

  it('say so where the box has no bit over the limit', () => {
    const { noGo } = showBits({ limitBoreMm: 25, orderBit: { name: '3/4', mm: 19.05 } })
    expect(noGo).toEqual(['No-go bit', 'none', 'No bit of this set is over the limit bore.'])
  })

  it('do not help where the limit is under the new bore, and say which nozzle fits', () => {
    const { order, noGo, rest } = showBits({ limitBoreMm: 8.5 })
    expect([order, noGo]).toEqual([[], []])
    expect(rest).toEqual(['No bit helps: this compressor cannot hold a new No. 6 at 100 psi. A No. 5 fits.'])
  })

  it('never call the nozzle that does not hold the one that fits', () => {
    // a hair under No. 6, by less than a bore is told apart
    const { rest } = showBits({ limitBoreMm: noSix - 0.0003 })
    expect(rest).toEqual(['No bit helps: this compressor cannot hold a new No. 6 at 100 psi. A No. 5 fits.'])
  })

  it('say so where no nozzle fits', () => {
    expect(showBits({ limitBoreMm: 2.5 }).rest).toEqual([
      'No bit helps: this compressor cannot hold a new No. 6 at 100 psi. No nozzle from No. 2 up fits.',
    ])
  })

  it.each([
    ['choked:whip', 'The whip is too narrow: this much air cannot pass it.'],
    ['regulator:2', 'The regulator of nozzle 2 is set too low for this pressure.'],
    ['air-taken-first', 'Hoods and tools take all the air there is; nothing is left for the nozzle.'],
  ])('give the reason %s where no bore reaches the target', (reason, sentence) => {
    const [rest] = showBits({ limitBoreMm: null, limitedBy: null, reason }).rest
    expect(rest).toContain('cannot hold a new No. 6 at 100 psi.')
    expect(rest).toContain(sentence)
  })

  it('name a nozzle without a number by its bore', () => {
    expect(showBits({ limitBoreMm: 10 }, { newBoreMm: 10.4 }).rest[0]).toContain('a new 0.409 in at')
  })

  it.each([
    ['line', 'The limit here is the hose: no bore wider than its own line counts.'],
    ['regulator', 'The limit here is the regulator.'],
    ['air-line', 'The limit here is the air line, which chokes beyond it.'],
  ] as const)('say what limits where it is the %s, over and under the new bore', (limitedBy, sentence) => {
    const over = showBits({ limitedBy, noGoBit: { name: '7/16', mm: 11.1125 } })
    expect(over.rest).toEqual([sentence])
    over.wrapper.unmount()
    const under = showBits({ limitedBy, limitBoreMm: 8.5 })
    expect(under.rest.at(-1)).toBe(sentence)
  })

  it('speak Spanish', () => {
    const { order, noGo } = showBits(
      { orderBit: { name: '27/64', mm: 10.7 }, noGoBit: { name: '7/16', mm: 11.1125 } },
      { language: 'es' },
    )
    expect(order).toEqual([
      'Broca de aviso',
      '27/64',
      'Si la de 27/64 pasa entera, pida la boquilla siguiente.',
    ])
    expect(noGo[2]).toBe('Si la de 7/16 pasa entera, no use más esta boquilla a 100 psi.')
  })
})
