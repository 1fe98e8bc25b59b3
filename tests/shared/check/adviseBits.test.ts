import { describe, expect, it } from 'vitest'
import { adviseBits } from '#shared/check/adviseBits.ts'
import type { OutletAnswer } from '#shared/contracts/check.ts'

const inch = 25.4
const noSix = 9.525
const over = (said: Partial<OutletAnswer>, outletCount = 1) =>
  adviseBits(
    { limitBoreMm: 8.5, limitedBy: 'air', reason: null, noGoBit: null, orderBit: null, ...said },
    noSix,
    'fractional-64',
    outletCount,
  )

describe('what the bits tell of a nozzle', () => {
  it('the order bit is the largest at or under the limit, the no-go bit the next', () => {
    // the limit 10.8 mm lies between 27/64 (10.716) and 7/16 (11.113)
    expect(over({ limitBoreMm: 10.8 })).toMatchObject({
      isOver: false,
      orderBit: { name: '27/64', mm: (27 / 64) * inch },
      noGoBit: { name: '7/16' },
    })
  })

  it('follows the box that is chosen', () => {
    const answer = {
      limitBoreMm: 10.8,
      limitedBy: 'air',
      reason: null,
      noGoBit: null,
      orderBit: null,
    } as const
    expect(adviseBits(answer, noSix, 'metric-0.5', 1)).toMatchObject({
      orderBit: { name: '10.5 mm' },
      noGoBit: { name: '11 mm' },
    })
  })

  it('names the bit that a new nozzle already passes where none can warn', () => {
    // 3/8 is the new bore itself and 25/64 is over the limit
    expect(over({ limitBoreMm: 9.6 })).toMatchObject({
      orderBit: null,
      passedBit: { name: '3/8' },
      noGoBit: { name: '25/64' },
    })
  })

  it('none is named under the smallest bit of the box', () => {
    const answer = {
      limitBoreMm: 3.7,
      limitedBy: 'air',
      reason: null,
      noGoBit: null,
      orderBit: null,
    } as const
    expect(adviseBits(answer, 3.175, 'fractional-64', 1)).toMatchObject({ orderBit: null, passedBit: null })
  })

  it.each([
    [{}, 1, 'compressor', 5],
    [{}, 2, 'other-nozzles', 5],
    [{ limitedBy: 'line' }, 1, 'own-line', 5],
    [{ limitedBy: 'regulator' }, 1, 'rig', 5],
    [{ limitBoreMm: null, reason: 'short-of-air' }, 1, 'compressor', null],
    [{ limitBoreMm: null, reason: 'short-of-air' }, 2, 'rig', null],
    [{ limitBoreMm: null, limitedBy: 'regulator', reason: 'regulator:1' }, 1, 'rig', null],
    [{ limitBoreMm: null, limitedBy: 'line', reason: 'choked:whip' }, 1, 'rig', null],
  ] as const)(
    'over the limit %o with %i outlets blames the %s',
    (said, outletCount, because, fittingNumber) => {
      expect(over(said, outletCount)).toMatchObject({ isOver: true, because, fittingNumber })
    },
  )

  it('never calls the nozzle that does not hold the one that fits', () => {
    expect(over({ limitBoreMm: noSix - 0.0003 })).toMatchObject({ isOver: true, fittingNumber: 5 })
  })
})
