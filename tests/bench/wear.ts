/* How long a forecast takes, and how honest it is where the world is not its model. It prints and judges nothing. */
import { forecastWear } from '#shared/wear/index.ts'
import type { WearQuestion } from '#shared/wear/index.ts'
import { measureCoverage } from '../shared/wear/coverage.ts'
import {
  limitBoreMm,
  makeChance,
  modelWorld,
  newBoreMm,
  rate,
  simulateNozzle,
} from '../shared/wear/simulate.ts'
import type { World } from '../shared/wear/simulate.ts'
import { quantile } from './statistics.ts'

const rounds = 15
const questionsEach = 200
const seed = 7
const nozzles = 2000

function makeQuestions(checkCount: number, drift: number): WearQuestion[] {
  const chance = makeChance(seed)
  return Array.from({ length: questionsEach }, () => {
    const { checks, hoursNow } = simulateNozzle(checkCount, chance)
    return {
      newBoreMm,
      rate,
      checks,
      drift,
      equivalentHoursNow: hoursNow,
      equivalentHoursPerWeek: 20,
      limitBoreMm,
    }
  })
}

/** Milliseconds a forecast: of each question the least of the rounds, so that what else the machine does is left out. */
function reportTime(checkCount: number, drift: number) {
  const questions = makeQuestions(checkCount, drift)
  const times = questions.map(() => Infinity)
  for (let round = 0; round < rounds; round++) {
    questions.forEach((question, i) => {
      const start = performance.now()
      forecastWear(question)
      times[i] = Math.min(times[i]!, performance.now() - start)
    })
  }
  const [middle, worst] = [quantile(times, 0.5), Math.max(...times)].map((ms) => ms.toFixed(2))
  console.log(
    `  ${checkCount} checks, drift ${drift}: median ${middle} ms, worst of ${questionsEach} ${worst} ms`,
  )
}

const worlds: Record<string, World> = {
  'the model without drift': modelWorld,
  'the model': { ...modelWorld, drift: 0.15 },
  'spread three times the table': { ...modelWorld, spread: 3 },
  'rate drifting 25 %': { ...modelWorld, rateChange: 0.25 },
  'oval bores, bits 15 % of the growth small': { ...modelWorld, ovalShare: 0.15 },
}

function reportCoverage(name: string, world: World, drift: number) {
  console.log(`  ${name}; forecast with drift ${drift}`)
  for (const count of [0, 1, 3, 10]) {
    const { bore, hours, contradicted } = measureCoverage(nozzles, count, world, { seed, drift })
    const [boreText, hoursText, firedText] = [bore, hours, contradicted].map((share) =>
      (100 * share).toFixed(1),
    )
    console.log(
      `    ${String(count).padStart(2)} checks: bore ${boreText} %, hours ${hoursText} %, contradicts ${firedText} %`,
    )
  }
}

console.log(`Wear forecasts, Node ${process.version}`)
for (const checkCount of [0, 1, 10, 100]) reportTime(checkCount, 0.15)
reportTime(10, 0)
console.log(
  `How often the 80 % range holds the truth, ${nozzles.toLocaleString('en')} simulated nozzles each:`,
)
for (const [name, world] of Object.entries(worlds)) {
  for (const drift of name === 'the model without drift' ? [0] : name === 'the model' ? [0.15] : [0, 0.15]) {
    reportCoverage(name, world, drift)
  }
}
