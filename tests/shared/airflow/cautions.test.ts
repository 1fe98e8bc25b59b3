import { describe, expect, it } from 'vitest'
import { checkPressure, findCautions, standardPressure, waterToDrain } from '#shared/airflow/index.ts'
import type { Rig, Site } from '#shared/airflow/index.ts'
import { prepareRig } from '#shared/airflow/preparedRig.ts'

const seaLevel: Site = { altitudeM: 0, airTemperatureK: 293.15 }
const rig: Rig = {
  compressor: { freeAir: 0.177, setPressurePa: 101325 + 690e3, unloadPressurePa: 101325 + 830e3 },
  airLine: [],
  outlets: [
    {
      line: [{ insideDiameterM: 0.032, lengthM: 10 }],
      nozzle: { boreM: 0.0095, dischargeCoefficient: 0.97 },
    },
  ],
  airTakenFirst: [],
}

function cautionsOf(changed: Partial<Rig>, site = seaLevel, targetKpa = 600) {
  const asked = { ...rig, ...changed }
  const prepared = prepareRig(asked, site)
  const targetPa = prepared.ambient.pressurePa + targetKpa * 1000
  const found = findCautions(asked, site, prepared, checkPressure(asked, site, targetPa), targetKpa * 1000)
  for (let i = 1; i < found.length; i++) expect(found[i]!.sizePct).toBeLessThanOrEqual(found[i - 1]!.sizePct)
  return Object.fromEntries(found.map(({ code, sizePct }) => [code, sizePct]))
}

const nozzle = (boreM: number, dischargeCoefficient = 0.97) => ({ boreM, dischargeCoefficient })

describe('cautions, each with a size worked by hand', () => {
  it('there is none on a rig that asks for none', () => {
    expect(cautionsOf({})).toEqual({})
  })

  it('media shut off: 0.97/0.81 is 19.8 % more air', () => {
    expect(cautionsOf({ outlets: [{ ...rig.outlets[0]!, nozzle: { boreM: 0.0095 } }] })).toEqual({
      'air-only-reading-low': expect.closeTo(19.75, 2),
    })
  })

  it('a barometer 21.3 % off its altitude: a weather report’s figure typed at 1,600 m', () => {
    // the standard atmosphere at 1,600 m is 83.528 kPa: 101.325/83.528 − 1 = 21.3 %
    const site = { ...seaLevel, altitudeM: 1600, barometerPa: 101325 }
    expect(cautionsOf({}, site)['barometer-against-altitude']).toBeCloseTo(21.31, 1)
    expect(cautionsOf({}, { ...seaLevel, barometerPa: 101325 * 1.039 })).toEqual({})
  })

  it('an engine at 2,000 m: at 2,000 and 4,000 m, naturally aspirated and turbocharged', () => {
    // set at 690 kPa gauge wherever it stands; at 2,000 m p 79,501 Pa: (1 + 690/79.501)^0.2857 − 1 = 0.91306; at sea level (1 + 690/101.325)^0.2857 − 1 = 0.79895
    // need = 79.501 · 0.91306 / (101.325 · 0.79895) = 0.8967; natural short = 1 − 1.1 · 0.8305/0.8967 < 0
    const high = { ...seaLevel, altitudeM: 2000 }
    const at = (engine: 'natural' | 'turbo', site: Site) =>
      cautionsOf(
        {
          compressor: { ...rig.compressor, engine, setPressurePa: standardPressure(site.altitudeM) + 690e3 },
        },
        site,
      )['engine-short']
    expect(at('natural', high)).toBeUndefined()
    // at 4,000 m: p 61,640 Pa: (1 + 690/61.64)^0.2857 − 1 = 1.04320, need = 61.64 · 1.04320/80.957 = 0.7943;
    // have = 1 − 0.3695 = 0.6305, short = 1 − 1.1 · 0.6305/0.7943 = 12.68 %; turbo 0.7: 1 − 0.77/0.7943 = 3.06 %
    expect(at('natural', { ...seaLevel, altitudeM: 4000 })).toBeCloseTo(12.68, 1)
    expect(at('turbo', { ...seaLevel, altitudeM: 4000 })).toBeCloseTo(3.06, 1)
  })

  it('a compressor working at 300 kPa is a quarter below 4 bar', () => {
    // 0.177 m³/s of dry air at sea level and 20 °C is 0.21313 kg/s; through Cd 0.97 at 401.325 kPa absolute it takes
    // A = 0.21313 √(287.05 · 293.15) / (0.97 · 401325 · 0.68473) = 2.3194e-4 m², a bore of 17.185 mm
    const wide = { ...rig, outlets: [{ line: [], nozzle: nozzle(0.017185) }] }
    expect(cautionsOf(wide)['low-compressor-pressure']).toBeCloseTo(25, 1)
  })

  it('a hose under three and under two bores: half the square of Cd Ψ over the area ratio', () => {
    const hose = (ratio: number) => ({
      outlets: [{ line: [{ insideDiameterM: 0.0095 * ratio }], nozzle: nozzle(0.0095) }],
    })
    // 0.97 · 0.6847 / 2.5² = 0.10627, squared and halved 0.565 %; /1.9² = 0.18398, 1.69 %
    expect(cautionsOf(hose(2.5))).toEqual({ 'hose-under-three-times-bore': expect.closeTo(0.565, 2) })
    expect(cautionsOf(hose(1.9))['hose-under-twice-bore']).toBeCloseTo(1.692, 2)
  })

  it('a bare compressor at 35 °C and 80 %: the moist air is 2.8 % more mass and 1 % lighter', () => {
    // p_sat 5,626 Pa (steam tables, from memory), vapour 4,501 Pa: w = 0.622 · 4501/96824 = 0.02891;
    // (1.02891) √(1 + 0.608 · 0.0281) − 1 = 3.76 %
    const site = { ...seaLevel, airTemperatureK: 308.15, relativeHumidity: 0.8 }
    const bare = { compressor: { ...rig.compressor, lineTemperatureRiseK: 40 } }
    expect(cautionsOf(bare, site)['humid-bare-compressor']).toBeCloseTo(3.76, 1)
    expect(cautionsOf({}, site)['humid-bare-compressor']).toBeUndefined()
  })

  it('a target over set, reached on the falling slope', () => {
    const strong = {
      compressor: { ...rig.compressor, freeAir: 0.5 },
      outlets: [{ line: [], nozzle: nozzle(0.0095) }],
    }
    // 725 kPa of 690 to 830: a quarter closed
    expect(cautionsOf(strong, seaLevel, 725)['target-above-set-pressure']).toBeCloseTo(25, 6)
  })

  it('a nozzle under the critical pressure of 90.5 kPa gauge at sea level', () => {
    // 101.325/0.52828 = 191.80 kPa absolute; at 50 kPa gauge 151.325/191.80 is 21.1 % under
    expect(cautionsOf({}, seaLevel, 50)['nozzle-below-critical']).toBeCloseTo(21.1, 1)
  })
})

describe('water to drain', () => {
  it('is the inlet vapour less what saturated air still holds', () => {
    const site = { ...seaLevel, airTemperatureK: 303.15, relativeHumidity: 0.7 }
    const prepared = prepareRig(rig, site)
    const check = checkPressure(rig, site, 700e3)
    const { massFlow, compressorPressurePa } = check.operatingPoint!
    // p_sat at 30 °C 4,247 Pa (steam tables, from memory): vapour 2,973 Pa
    const inlet = (0.622 * 2973) / (101325 - 2973)
    const held = (0.622 * 4247) / (compressorPressurePa - 4247)
    expect(waterToDrain(prepared, check)! / ((inlet - held) * massFlow * 3600)).toBeCloseTo(1, 2)
    expect(waterToDrain(prepareRig(rig, seaLevel), check)).toBe(0)
    expect(waterToDrain(prepared, { ...check, operatingPoint: null })).toBeNull()
  })
})
