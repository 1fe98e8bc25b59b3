import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { limitBorePrepared, limitBoresPrepared } from '#shared/airflow/limitBore.ts'
import { prepareRig } from '#shared/airflow/preparedRig.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import { anyChecks, seed } from './randomChecks.ts'

describe('the limit bores of a rig', () => {
  it('are what each outlet has alone, also where outlets that are alike share one', () => {
    let shared = 0
    fc.assert(
      fc.property(anyChecks, (body) => {
        const [outlet, ...others] = body.outlets
        const outlets = [outlet!, ...others.slice(0, 2), outlet!]
        const { rig, site, targetPa, ambientPa } = questionOfCheck({ ...body, outlets })
        const prepared = prepareRig(rig, site)
        const limits = limitBoresPrepared(prepared, targetPa - ambientPa)
        expect(limits).toHaveLength(outlets.length)
        limits.forEach((limit, i) => {
          const alone = limitBorePrepared(prepared, targetPa - ambientPa, i)
          expect([limit.limitedBy, limit.reason]).toEqual([alone.limitedBy, alone.reason])
          if (alone.boreM === null) expect(limit.boreM).toBeNull()
          else expect(Math.abs(limit.boreM! / alone.boreM - 1)).toBeLessThan(1e-9)
        })
        if (limits.at(-1) === limits[0]) shared++
      }),
      { seed, numRuns: 1_000 },
    )
    expect(shared).toBeGreaterThan(200)
  })
})
