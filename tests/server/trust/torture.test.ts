import { rmSync } from 'node:fs'
import { expect, it } from 'vitest'
import { makeRandom } from '../../support/random.ts'
import { makeDataDir } from '../../support/server.ts'
import { fewestAcknowledged, torture } from '../../support/torture.ts'

/** npm run torture asks for more. */
const rounds = Number(process.env['TORTURE_ROUNDS'] ?? 10)
const seed = Number(process.env['TORTURE_SEED'] ?? 16)

it(
  `killed ${rounds} times while eight clients write, the server loses nothing it acknowledged`,
  async () => {
    const dataDir = makeDataDir()
    try {
      const { complaints, acknowledged, repeated } = await torture(dataDir, rounds, makeRandom(seed))
      expect(complaints).toEqual([])
      expect(acknowledged).toBeGreaterThanOrEqual(rounds * fewestAcknowledged)
      console.log(
        `${rounds} rounds: ${acknowledged} records acknowledged and there, ${repeated} sent again unanswered.`,
      )
    } finally {
      rmSync(dataDir, { recursive: true, force: true })
    }
  },
  rounds * 30_000,
)
