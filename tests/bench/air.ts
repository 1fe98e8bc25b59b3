import fc from 'fast-check'
import { deliveryAt } from '#shared/airflow/compressor.ts'
import { solveOperatingPoint, withBore } from '#shared/airflow/index.ts'
import type { Rig, Site } from '#shared/airflow/index.ts'
import { marchBack, startMarch } from '#shared/airflow/line.ts'
import { marchOutlet, prepareRig } from '#shared/airflow/preparedRig.ts'
import { answerCheck } from '#shared/check/answerCheck.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import type { CheckRequest } from '#shared/contracts/check.ts'
import { maxCurvePoints, maxDraws, maxElements, maxOutlets } from '#shared/contracts/limits.ts'
import { checkBodies, seed } from '../shared/airflow/randomChecks.ts'

interface Question {
  rig: Rig
  site: Site
}

const rigsEach = 1_000
const rounds = 15

/** Realistic rigs of one kind that run: the random body is bent into the kind, and thrown away where it cannot run. */
function drawRigs(bend: (body: CheckRequest) => CheckRequest | null): Question[] {
  const questions: Question[] = []
  for (const body of fc.sample(checkBodies('realistic'), { seed, numRuns: 40 * rigsEach })) {
    const bent = bend(body)
    if (!bent) continue
    const { rig, site } = questionOfCheck(bent)
    if (solveOperatingPoint(rig, site).operatingPoint) questions.push({ rig, site })
    if (questions.length === rigsEach) return questions
  }
  throw new Error(`only ${questions.length} rigs of the kind`)
}

/** Exactly so many elements, from whatever lines the body has. */
function withElements(body: CheckRequest, outletCount: number, inAirLine: number, inOutlet: number) {
  const elements = [...body.airLine, ...body.outlets.flatMap((outlet) => outlet.line)]
  const outlets = body.outlets.slice(0, outletCount)
  if (elements.length < inAirLine + inOutlet * outletCount || outlets.length < outletCount) return null
  return {
    ...body,
    airLine: elements.splice(0, inAirLine),
    outlets: outlets.map(({ nozzle }) => ({ nozzle, line: elements.splice(0, inOutlet) })),
  }
}

function median(values: number[]): number {
  const sorted = values.toSorted((a, b) => a - b)
  return sorted[Math.floor(sorted.length / 2)]!
}

/** Microseconds each for all questions together, the median of the rounds after as many to warm up. */
function timeEach(questions: readonly Question[], solve: (question: Question) => unknown): number {
  const times: number[] = []
  for (let round = 0; round < 2 * rounds; round++) {
    const start = performance.now()
    for (const question of questions) solve(question)
    times.push(((performance.now() - start) * 1000) / questions.length)
  }
  return median(times.slice(rounds))
}

function onePass({ rig, site }: Question) {
  const prepared = prepareRig(rig, site)
  const march = startMarch()
  marchOutlet(prepared.outlets[0]!, 0.1, march)
  marchBack(prepared.airLine, 0.1, prepared.ambient.pressurePa, march)
  return march
}

/** The same balance by halving alone, to the same tolerance: bracket 1e-9 and imbalance 1e-8 of full load. */
function bisect({ rig, site }: Question): number {
  const prepared = prepareRig(rig, site)
  const { delivery, firstMassFlow, ambient } = prepared
  const fullLoad = delivery.massFlows.at(-2)!
  const march = startMarch()
  let low = 0
  let high = prepared.openMassFlow - firstMassFlow
  let marches = 0
  for (;;) {
    const flow = (low + high) / 2
    marchOutlet(prepared.outlets[0]!, flow, march)
    marchBack(prepared.airLine, flow, ambient.pressurePa, march)
    marches++
    const imbalance = flow + firstMassFlow - deliveryAt(delivery, ambient.pressurePa + march.gaugePa)
    if (imbalance < 0) low = flow
    else high = flow
    if (high - low <= 1e-9 * high && Math.abs(imbalance) <= 1e-8 * fullLoad) return marches
  }
}

function report(name: string, questions: readonly Question[]) {
  const marches = questions.map(({ rig, site }) => solveOperatingPoint(rig, site).operatingPoint!.marches)
  const mean = marches.reduce((sum, count) => sum + count, 0) / marches.length
  const each = timeEach(questions, ({ rig, site }) => solveOperatingPoint(rig, site))
  const most = Math.max(...marches)
  console.log(`${name}: ${mean.toFixed(2)} marches on average (most ${most}), ${each.toFixed(2)} µs a solve`)
  return each
}

const isThrottled = ({ rig, site }: Question) =>
  solveOperatingPoint(rig, site).operatingPoint!.compressorPressurePa > rig.compressor.setPressurePa

const hasNameplate = (body: CheckRequest) => body.compressor.curve === undefined
const single = drawRigs((body) => (hasNameplate(body) ? withElements(body, 1, 2, 2) : null))
const throttled = single.filter(isThrottled)
const open = single.filter((question) => !isThrottled(question))
const curve = drawRigs((body) => (hasNameplate(body) ? null : withElements(body, 1, 2, 2)))
const two = drawRigs((body) => withElements(body, 2, 1, 2))

console.log(
  `Node ${process.version}; ${rigsEach} random realistic rigs of each kind, median of ${rounds} rounds\n`,
)
const singleEach = report('one outlet, four elements', single)
report(`  of these below set pressure (${open.length})`, open)
report(`  of these on the falling slope (${throttled.length})`, throttled)
report('two unlike outlets, five elements', two)
report("a user's curve, one outlet", curve)

const bisectMarches = single.map(bisect).reduce((sum, count) => sum + count, 0) / single.length
const bisectEach = timeEach(single, bisect)
console.log(
  `plain bisection of the first: ${bisectMarches.toFixed(2)} marches, ${bisectEach.toFixed(2)} µs: ` +
    `${(bisectEach / singleEach).toFixed(1)} times as long`,
)
const floor = timeEach(single, onePass)
const prepareEach = timeEach(single, ({ rig, site }) => prepareRig(rig, site))
console.log(
  `the floor, preparing the rig (${prepareEach.toFixed(2)} µs) and one march: ${floor.toFixed(2)} µs; ` +
    `a solve is ${(singleEach / floor).toFixed(1)} floors`,
)

const [chartRig] = throttled
const chartTimes: number[] = []
for (let round = 0; round < 2 * rounds; round++) {
  const start = performance.now()
  for (let i = 0; i < 1_000; i++) {
    solveOperatingPoint(withBore(chartRig!.rig, 0, 0.004 + 0.000012 * i), chartRig!.site)
  }
  chartTimes.push(performance.now() - start)
}
console.log(`1,000 solves as for a chart: ${median(chartTimes.slice(rounds)).toFixed(2)} ms`)

/** At every cap of the contract: what is there is repeated until no more is let through. */
function fillToCaps(body: CheckRequest): CheckRequest {
  const fill = <T>(items: readonly T[], spare: T, count: number): T[] =>
    Array.from({ length: count }, (_, i) => items[i % items.length] ?? spare)
  const element = { insideDiameterMm: 32, lengthM: 15, lossK: 1 }
  const { curve: points, ratedFreeAirM3Min, ...compressor } = body.compressor
  const first = points?.[0]?.freeAirM3Min ?? ratedFreeAirM3Min!
  return {
    ...body,
    compressor: {
      ...compressor,
      curve: Array.from({ length: maxCurvePoints }, (_, i) => ({
        pressureKpa: 50 * (i + 1),
        freeAirM3Min: first * (1 - 0.03 * i),
      })).map((point) => ({ ...point, freeAirM3Min: Math.max(0.05, point.freeAirM3Min) })),
    },
    airLine: fill(body.airLine, element, maxElements),
    outlets: fill(body.outlets, body.outlets[0]!, maxOutlets).map((outlet) => ({
      ...outlet,
      line: fill(outlet.line, element, maxElements),
    })),
    airTakenFirst: fill(body.airTakenFirst, { name: 'hood', freeAirM3Min: 0.01 }, maxDraws).map((draw) => ({
      ...draw,
      freeAirM3Min: draw.freeAirM3Min / maxDraws,
    })),
  }
}

const half = { seed, numRuns: Number(process.env.BODIES ?? 10_000) / 2 }
const atCaps = [
  ...fc.sample(checkBodies('declared'), half),
  ...fc.sample(checkBodies('realistic'), half),
].map(fillToCaps)
for (const body of atCaps.slice(0, 500)) answerCheck(body)
/** The least of three rounds, so that what else the machine does is not taken for the body's own time. */
const bodyTimes = atCaps.map(() => Infinity)
for (let round = 0; round < 3; round++) {
  atCaps.forEach((body, i) => {
    const start = performance.now()
    answerCheck(body)
    bodyTimes[i] = Math.min(bodyTimes[i]!, performance.now() - start)
  })
}
console.log(
  `${atCaps.length.toLocaleString('en')} random bodies at the caps: median ${median(bodyTimes).toFixed(3)} ms, ` +
    `worst ${Math.max(...bodyTimes).toFixed(2)} ms`,
)
