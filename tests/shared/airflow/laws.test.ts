import fc from 'fast-check'
import { afterAll, describe, expect, it } from 'vitest'
import { gasConstant, resolveAmbient } from '#shared/airflow/ambient.ts'
import {
  limitBore,
  nozzleMassFlow,
  solveOperatingPoint,
  checkPressure,
  withBore,
} from '#shared/airflow/index.ts'
import type { Compressor, LineElement, OperatingPoint, Rig, Site } from '#shared/airflow/index.ts'
import {
  elementOutletPressure,
  findChokedElement,
  frictionFactor,
  prepareElement,
  prepareLineAir,
} from '#shared/airflow/line.ts'
import { viscosity } from '#shared/airflow/ambient.ts'
import type { CheckRequest } from '#shared/contracts/check.ts'
import { questionOfCheck } from '#shared/check/rigOfCheck.ts'
import { anyChecks, checkBodies, seed } from './randomChecks.ts'

/** rigs a law has looked at in this file, so that the last word can count them */
let rigsDrawn = 0

/** Looks at so many random rigs; returns how many the law had something to say about. */
const rigsALaw = 20_000

function everyRig(
  numRuns: number,
  bodies: fc.Arbitrary<CheckRequest>,
  law: (question: Question) => boolean | void,
) {
  let spoken = 0
  fc.assert(
    fc.property(bodies, (body) => {
      rigsDrawn++
      if (law(questionOfCheck(body)) !== false) spoken++
    }),
    { seed, numRuns, endOnFailure: true },
  )
  return spoken
}

type Question = ReturnType<typeof questionOfCheck>

const oneOutlet = (body: CheckRequest): CheckRequest => ({ ...body, outlets: body.outlets.slice(0, 1) })

/** kg/s of dry air by the design's words, apart from the code's own: k FAD ρd to set, then straight to 0 at unload. */
function deliveryByHand(compressor: Compressor, dryAirDensity: number, pressurePa: number): number {
  const { freeAir, setPressurePa, unloadPressurePa } = compressor
  const at = Math.min(pressurePa, setPressurePa)
  let volume: number
  if (typeof freeAir === 'number') volume = freeAir
  else {
    const right = freeAir.findIndex((point) => point.pressurePa >= at)
    if (right === -1) volume = freeAir.at(-1)!.freeAirM3S
    else if (right === 0) volume = freeAir[0]!.freeAirM3S
    else {
      const [a, b] = [freeAir[right - 1]!, freeAir[right]!]
      const part = (at - a.pressurePa) / (b.pressurePa - a.pressurePa)
      volume = a.freeAirM3S * (1 - part) + b.freeAirM3S * part
    }
  }
  const open = Math.max(0, Math.min(1, (unloadPressurePa - pressurePa) / (unloadPressurePa - setPressurePa)))
  return (compressor.conditionFactor ?? 1) * dryAirDensity * volume * open
}

const lineTemperature = (rig: Rig, site: Site) =>
  site.airTemperatureK + (rig.compressor.lineTemperatureRiseK ?? 0)
const firstMass = (rig: Rig, density: number) =>
  rig.airTakenFirst.reduce((sum, d) => sum + d.freeAirM3S, 0) * density
const lowestOf = (point: OperatingPoint) =>
  Math.min(...point.outlets.map((outlet) => outlet.nozzlePressurePa))

/** Pressure before an element by bisection of the design's equation, written out again; NaN when choked. */
function inletByHand(element: LineElement, temperatureK: number, massFlow: number, outletPa: number): number {
  const d = element.insideDiameterM
  const fluxRt = ((4 * massFlow) / (Math.PI * d * d)) ** 2 * gasConstant * temperatureK
  if (fluxRt >= outletPa ** 2) return NaN
  const reynolds = (4 * massFlow) / (Math.PI * d * viscosity(temperatureK))
  const length = ((element.mediaFactor ?? 1) * (element.lengthM ?? 0)) / d
  const friction = length === 0 ? 0 : length * frictionFactor(reynolds, (element.roughnessM ?? 1e-5) / d)
  const loss = friction + (element.lossK ?? 0)
  const excess = (p1: number) => p1 ** 2 - outletPa ** 2 - fluxRt * (loss + 2 * Math.log(p1 / outletPa))
  let low = outletPa
  let high = Math.sqrt(2 * (outletPa ** 2 + fluxRt * loss)) + outletPa
  while (excess(high) < 0) high *= 2
  // at p1 = p2 the excess is never positive and from the root on it rises
  for (let step = 0; step < 100; step++) {
    const middle = (low + high) / 2
    if (excess(middle) <= 0) low = middle
    else high = middle
  }
  return low
}

function marchByHand(
  line: readonly LineElement[],
  temperatureK: number,
  massFlow: number,
  pressurePa: number,
) {
  return line.reduceRight((p, element) => inletByHand(element, temperatureK, massFlow, p), pressurePa)
}

/** closer than this part, whichever of the two is right */
function expectNear(a: number, b: number, part: number) {
  expect(Math.abs(a - b)).toBeLessThanOrEqual(part * Math.max(Math.abs(a), Math.abs(b)))
}

describe('laws of every rig', () => {
  it('the verdict agrees with the operating point, and with its own margin', () => {
    const verdicts = new Map<string, number>()
    everyRig(rigsALaw, anyChecks, ({ rig, site, targetPa }) => {
      const { verdict, operatingPoint, atTarget, reason } = checkPressure(rig, site, targetPa)
      verdicts.set(verdict, (verdicts.get(verdict) ?? 0) + 1)
      const isReached = verdict === 'holds' || verdict === 'barely-holds'
      expect(reason === null).toBe(isReached)
      if (isReached && !operatingPoint) {
        // the balance lies beyond a choke, but at the target itself every outlet's line is open
        for (const { line, nozzle } of rig.outlets) {
          const flow = nozzleMassFlow(nozzle, targetPa, {
            ...site,
            airTemperatureK: lineTemperature(rig, site),
          })
          expect(marchByHand(line, lineTemperature(rig, site), flow, targetPa)).not.toBeNaN()
        }
      }
      if (operatingPoint && isReached) expect(lowestOf(operatingPoint)).toBeGreaterThan(targetPa * (1 - 1e-8))
      if (operatingPoint && !isReached) expect(lowestOf(operatingPoint)).toBeLessThan(targetPa * (1 + 1e-8))
      const ambient = resolveAmbient(site)
      const first = firstMass(rig, ambient.dryAirDensity)
      const open = deliveryByHand(rig.compressor, ambient.dryAirDensity, ambient.pressurePa)
      if (Math.abs(first / open - 1) > 1e-12) expect(verdict === 'cannot-run').toBe(first >= open)
      if (!atTarget) return
      const { setPressurePa } = rig.compressor
      const required = atTarget.requiredCompressorPressurePa
      const delivered = deliveryByHand(rig.compressor, ambient.dryAirDensity, required)
      const full = deliveryByHand(rig.compressor, ambient.dryAirDensity, Math.min(required, setPressurePa))
      const margin = (delivered - atTarget.requiredMassFlow) / full
      expectNear(1 + margin, 1 + atTarget.airMargin, 1e-6)
      expect(verdict).toBe(
        atTarget.airMargin >= 0.05 ? 'holds' : atTarget.airMargin >= -1e-9 ? 'barely-holds' : 'falls-short',
      )
    })
    for (const verdict of ['holds', 'barely-holds', 'falls-short', 'cannot-run']) {
      expect(verdicts.get(verdict) ?? 0, verdict).toBeGreaterThan(50)
    }
  })

  it('flow balances to 1e-8 of full-load delivery', () => {
    const spoken = everyRig(rigsALaw, anyChecks, ({ rig, site }) => {
      const { operatingPoint: point } = solveOperatingPoint(rig, site)
      if (!point) return false
      const { dryAirDensity } = resolveAmbient(site)
      const { compressor } = rig
      const drawn = point.outlets.reduce((sum, o) => sum + o.massFlow, firstMass(rig, dryAirDensity))
      expectNear(drawn, point.massFlow, 1e-12)
      expectNear(point.freeAirM3S * dryAirDensity, point.massFlow, 1e-12)
      const fullLoadAt = Math.min(point.compressorPressurePa, compressor.setPressurePa)
      const fullLoad = deliveryByHand(compressor, dryAirDensity, fullLoadAt)
      const delivered = deliveryByHand(compressor, dryAirDensity, point.compressorPressurePa)
      expect(Math.abs(delivered - drawn)).toBeLessThanOrEqual(1e-8 * fullLoad)
    })
    expect(spoken).toBeGreaterThan(3_000)
  })

  it('solved both ways agrees: from the nozzles back to the compressor, and from the compressor down', () => {
    let downward = 0
    const spoken = everyRig(rigsALaw, anyChecks, ({ rig, site }) => {
      const { operatingPoint: point } = solveOperatingPoint(rig, site)
      if (!point) return false
      const temperature = lineTemperature(rig, site)
      const atLine = { ...site, airTemperatureK: temperature, barometerPa: resolveAmbient(site).pressurePa }
      const manifoldPa = point.manifoldPressurePa
      let airLineFlow = 0
      rig.outlets.forEach((outlet, i) => {
        const { massFlow, nozzlePressurePa } = point.outlets[i]!
        airLineFlow += massFlow
        // at the least pressures the absolute one has lost what makes the flow
        const flowAt = (part: number) => nozzleMassFlow(outlet.nozzle, nozzlePressurePa * (1 + part), atLine)
        expect(massFlow).toBeGreaterThanOrEqual(flowAt(-1e-11) * (1 - 1e-9))
        expect(massFlow).toBeLessThanOrEqual(flowAt(1e-11) * (1 + 1e-9))
        const entryPa = Math.min(manifoldPa, outlet.regulatorPa ?? Infinity)
        expectNear(marchByHand(outlet.line, temperature, massFlow, nozzlePressurePa), entryPa, 1e-8)
      })
      const compressorPa = marchByHand(rig.airLine, temperature, airLineFlow, manifoldPa)
      expectNear(compressorPa, point.compressorPressurePa, 1e-8)
      // downwards the last digits are lost near the choke, where p2 no longer follows from p1
      let pressurePa = point.compressorPressurePa
      let steepest = 1
      for (const element of rig.airLine.map((e) =>
        prepareElement(e, prepareLineAir(temperature), 'line', 0),
      )) {
        const outletPa = elementOutletPressure(element, airLineFlow, pressurePa)
        const chi = ((airLineFlow * element.chokePerFlow) / outletPa) ** 2
        steepest *= pressurePa / outletPa / (1 - chi)
        pressurePa = outletPa
      }
      if (!(steepest < 1e3)) return
      downward++
      expectNear(pressurePa, manifoldPa, 1e-8 * steepest)
    })
    expect(spoken).toBeGreaterThan(2_500)
    expect(downward).toBeGreaterThan(2_500)
  })

  it('every element meets its equation from either end', () => {
    everyRig(rigsALaw, checkBodies('declared'), ({ rig, site }) => {
      const temperature = lineTemperature(rig, site)
      const [given] = rig.airLine
      if (!given) return false
      const element = prepareElement(given, prepareLineAir(temperature), 'line', 0)
      const ambientPa = resolveAmbient(site).pressurePa
      for (const part of [1e-4, 0.1, 0.5, 0.9]) {
        const massFlow = (part * ambientPa) / element.chokePerFlow
        const inletPa = inletByHand(given, temperature, massFlow, ambientPa)
        expectNear(elementOutletPressure(element, massFlow, inletPa), ambientPa, 1e-9)
      }
    })
  })

  it('more bore never raises any nozzle pressure', () => {
    let index = 0
    const spoken = everyRig(rigsALaw, anyChecks, ({ rig, site }) => {
      const before = solveOperatingPoint(rig, site).operatingPoint
      const which = index++ % rig.outlets.length
      const { boreM } = rig.outlets[which]!.nozzle
      const after = solveOperatingPoint(
        withBore(rig, which, boreM * (1.001 + (index % 7) / 5)),
        site,
      ).operatingPoint
      return expectNoneRises(before, after)
    })
    expect(spoken).toBeGreaterThan(2_500)
  })

  it('more air taken first never raises any nozzle pressure', () => {
    let index = 0
    const spoken = everyRig(rigsALaw, anyChecks, ({ rig, site }) => {
      const before = solveOperatingPoint(rig, site).operatingPoint
      const more = { name: 'one more', freeAirM3S: (index++ % 5) * 0.004 + 1e-6 }
      const after = solveOperatingPoint(
        { ...rig, airTakenFirst: [...rig.airTakenFirst, more] },
        site,
      ).operatingPoint
      return expectNoneRises(before, after)
    })
    expect(spoken).toBeGreaterThan(2_500)
  })

  it('more hose on an outlet never raises its own pressure', () => {
    let index = 0
    const spoken = everyRig(rigsALaw, anyChecks, ({ rig, site }) => {
      const which = index++ % rig.outlets.length
      const outlet = rig.outlets[which]!
      const hose = { insideDiameterM: 0.01 + (index % 4) * 0.01, lengthM: index % 40, lossK: index % 3 }
      const place = index % (outlet.line.length + 1)
      const line = outlet.line.toSpliced(place, 0, hose)
      const outlets = rig.outlets.with(which, { ...outlet, line })
      const before = solveOperatingPoint(rig, site).operatingPoint?.outlets[which]
      const after = solveOperatingPoint({ ...rig, outlets }, site).operatingPoint?.outlets[which]
      if (!before || !after) return false
      expect(after.nozzlePressurePa).toBeLessThanOrEqual(before.nozzlePressurePa * (1 + 1e-8))
    })
    expect(spoken).toBeGreaterThan(2_000)
  })

  it('with a flat nameplate below set and no regulator acting, more altitude never raises the pressure of one outlet', () => {
    let index = 0
    const flat = checkBodies('realistic').map((body) => {
      const {
        outlets: [outlet],
        ...rest
      } = body
      const nozzle = { ...outlet!.nozzle, boreMm: outlet!.nozzle.boreMm * 1.8 }
      return { ...rest, outlets: [{ ...outlet!, nozzle }] }
    })
    const spoken = everyRig(rigsALaw, flat, ({ rig, site }) => {
      if (typeof rig.compressor.freeAir !== 'number') return false
      const climb = 1 + (index++ % 9) * 250
      const { setPressurePa } = rig.compressor
      const [low, high] = [0, climb].map((more) => {
        const altitudeM = Math.min(5000, Math.max(-430, site.altitudeM + more))
        const there: Site = { ...site, altitudeM }
        delete there.barometerPa
        const ambientPa = resolveAmbient(there).pressurePa
        const setGaugePa = setPressurePa - resolveAmbient(site).pressurePa
        const compressor = {
          ...rig.compressor,
          setPressurePa: setGaugePa + ambientPa,
          unloadPressurePa: rig.compressor.unloadPressurePa - setPressurePa + setGaugePa + ambientPa,
        }
        const { regulatorPa: _, ...outlet } = rig.outlets[0]!
        const point = solveOperatingPoint({ ...rig, compressor, outlets: [outlet] }, there).operatingPoint
        if (!point || point.compressorPressurePa > compressor.setPressurePa) return null
        return point.outlets[0]!.nozzlePressurePa - ambientPa
      })
      if (typeof low !== 'number' || typeof high !== 'number') return false
      expect(high).toBeLessThanOrEqual(low * (1 + 1e-9))
    })
    expect(spoken).toBeGreaterThan(600)
  })

  it('two identical outlets on empty lines are one of twice the area, and so with fittings of twice the area', () => {
    let empty = 0
    const spoken = everyRig(rigsALaw, anyChecks.map(oneOutlet), ({ rig, site }) => {
      const { line, ...outlet } = rig.outlets[0]!
      // only K scales with area: friction would not
      const fittings = line.map(({ insideDiameterM, lossK = 0 }) => ({ insideDiameterM, lossK }))
      const wide = Math.SQRT2
      const doubled = {
        ...outlet,
        nozzle: { ...outlet.nozzle, boreM: outlet.nozzle.boreM * wide },
        line: fittings.map((e) => ({ ...e, insideDiameterM: e.insideDiameterM * wide })),
      }
      const single = { ...outlet, line: fittings }
      const two = solveOperatingPoint({ ...rig, outlets: [single, single] }, site)
      const one = solveOperatingPoint({ ...rig, outlets: [doubled] }, site)
      expect(two.reason?.split(':')[0]).toBe(one.reason?.split(':')[0])
      if (!two.operatingPoint || !one.operatingPoint) return false
      if (line.length === 0) empty++
      const [a, b] = two.operatingPoint.outlets
      const only = one.operatingPoint.outlets[0]!
      expectNear(two.operatingPoint.compressorPressurePa, one.operatingPoint.compressorPressurePa, 1e-7)
      expectNear(a!.nozzlePressurePa, only.nozzlePressurePa, 1e-7)
      const imbalance = 4e-8 * deliveryByHand(rig.compressor, resolveAmbient(site).dryAirDensity, 0)
      expect(Math.abs(a!.massFlow + b!.massFlow - only.massFlow)).toBeLessThan(imbalance)
    })
    expect(spoken).toBeGreaterThan(2_500)
    expect(empty).toBeGreaterThan(300)
  })

  it('an element without any loss chokes like one with K = 1e-9', () => {
    let index = 0
    let choked = 0
    everyRig(rigsALaw, anyChecks.map(oneOutlet), ({ rig, site }) => {
      const outlet = rig.outlets[0]!
      const insideDiameterM = outlet.nozzle.boreM * (0.6 + (index++ % 16) / 20)
      const withLoss = (lossK: number): Rig => ({
        ...rig,
        airLine: index % 2 ? [{ insideDiameterM, lossK, name: 'ring' }, ...rig.airLine] : rig.airLine,
        outlets: [
          index % 2
            ? outlet
            : { ...outlet, line: [...outlet.line, { insideDiameterM, lossK, name: 'ring' }] },
        ],
      })
      const none = solveOperatingPoint(withLoss(0), site)
      const least = solveOperatingPoint(withLoss(1e-9), site)
      if (none.reason === 'choked:ring') choked++
      expect(none.reason).toBe(least.reason)
      if (!none.operatingPoint || !least.operatingPoint) return
      expectNear(none.operatingPoint.compressorPressurePa, least.operatingPoint.compressorPressurePa, 1e-4)
      expectNear(lowestOf(none.operatingPoint), lowestOf(least.operatingPoint), 1e-4)
    })
    expect(choked).toBeGreaterThan(300)
  })

  it('the limit bore is where the target is just met', () => {
    const limits = new Map<string, number>()
    everyRig(rigsALaw, anyChecks, ({ rig, site, targetPa }) => {
      rig.outlets.forEach((outlet, index) => {
        const limit = limitBore(rig, site, targetPa, index)
        const kind = `${limit.limitedBy} ${limit.boreM === null ? 'none' : 'some'}`
        limits.set(kind, (limits.get(kind) ?? 0) + 1)
        const isReachedAt = (boreM: number) =>
          checkPressure(withBore(rig, index, boreM), site, targetPa).reason === null
        if (limit.boreM === null) {
          expect(isReachedAt(0.001)).toBe(false)
          expect(limit.reason).toMatch(/^(short-of-air|above-unload|air-taken-first|choked:.+|regulator:\d)$/)
          return
        }
        expect(isReachedAt(limit.boreM * (1 - 1e-7))).toBe(true)
        if (
          limit.limitedBy === 'line' &&
          limit.boreM === Math.min(...outlet.line.map((e) => e.insideDiameterM))
        )
          return
        if (limit.limitedBy === null) {
          expect([limit.boreM, limit.reason]).toEqual([0.06, 'bore-range'])
          return
        }
        expect(isReachedAt(limit.boreM * (1 + 1e-6))).toBe(false)
        if (limit.limitedBy !== 'air') return
        const point = solveOperatingPoint(withBore(rig, index, limit.boreM), site).operatingPoint
        expectNear(lowestOf(point!), targetPa, 1e-8)
      })
    })
    for (const kind of [
      'air some',
      'air none',
      'line some',
      'line none',
      'regulator some',
      'regulator none',
    ]) {
      expect(limits.get(kind) ?? 0, kind).toBeGreaterThan(5)
    }
    expect(limits.get('air-line some') ?? 0).toBeGreaterThan(5)
  })

  it('a choke is only named where no manifold pressure balances with every line open', () => {
    const narrow = checkBodies('declared').map((body) => ({
      ...body,
      airTakenFirst: [],
      outlets: body.outlets.map((outlet) => ({ ...outlet, line: [] })),
      airLine: [{ insideDiameterMm: Math.max(3, body.outlets[0]!.nozzle.boreMm * 0.6) }],
    }))
    const spoken = everyRig(rigsALaw, narrow, ({ rig, site }) => {
      const { reason } = solveOperatingPoint(rig, site)
      if (!reason?.startsWith('choked:')) return false
      const temperature = lineTemperature(rig, site)
      const ambient = resolveAmbient(site)
      let earlier = NaN
      for (let i = 1; i <= 60; i++) {
        const manifoldPa =
          ambient.pressurePa + ((rig.compressor.unloadPressurePa - ambient.pressurePa) * i) / 60
        const imbalance = imbalanceByHand(rig, site, temperature, manifoldPa)
        // a rise through zero between two open neighbours would be a balance that was missed
        if (earlier < 0) expect(imbalance > 0).toBe(false)
        earlier = imbalance
      }
    })
    expect(spoken).toBeGreaterThan(300)
  })

  afterAll(() => {
    console.info(`laws: ${rigsDrawn} random rigs`)
  })
})

/** draw − delivery at a manifold pressure, every inner flow by bisection; NaN where any line is choked. */
function imbalanceByHand(rig: Rig, site: Site, temperature: number, manifoldPa: number): number {
  const ambient = resolveAmbient(site)
  const atLine = { ...site, airTemperatureK: temperature, barometerPa: ambient.pressurePa }
  let total = 0
  for (const outlet of rig.outlets) {
    const feedPa = Math.min(manifoldPa, outlet.regulatorPa ?? Infinity)
    let low = ambient.pressurePa
    let high = feedPa
    const flowAt = (nozzlePa: number) => nozzleMassFlow(outlet.nozzle, nozzlePa, atLine)
    for (let step = 0; step < 40; step++) {
      const middle = (low + high) / 2
      if (marchByHand(outlet.line, temperature, flowAt(middle), middle) <= feedPa) low = middle
      else high = middle
    }
    const entryPa = marchByHand(outlet.line, temperature, flowAt(low), low)
    if (!(Math.abs(entryPa / feedPa - 1) < 1e-6)) return NaN
    total += flowAt(low)
  }
  const line = rig.airLine.map((element) => prepareElement(element, prepareLineAir(temperature), 'line', 0))
  if (findChokedElement(line, total, manifoldPa - ambient.pressurePa, ambient.pressurePa)) return NaN
  const compressorPa = marchByHand(rig.airLine, temperature, total, manifoldPa)
  const drawn = total + firstMass(rig, ambient.dryAirDensity)
  return drawn - deliveryByHand(rig.compressor, ambient.dryAirDensity, compressorPa)
}

function expectNoneRises(before: OperatingPoint | null, after: OperatingPoint | null): boolean {
  if (!before || !after) return false
  before.outlets.forEach((outlet, i) => {
    expect(after.outlets[i]!.nozzlePressurePa).toBeLessThanOrEqual(outlet.nozzlePressurePa * (1 + 1e-8))
  })
  return true
}
