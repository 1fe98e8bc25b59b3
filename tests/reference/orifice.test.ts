import { describe, expect, it } from 'vitest'
import { nozzleMassFlow } from '#shared/airflow/index.ts'
import { KG_PER_POUND, KPA_PER_PSI, M3_PER_CUBIC_FOOT, MM_PER_INCH } from '#shared/units/quantities.ts'

/**
 * Free air through a round orifice, cfm at 14.7 psia and 70 °F, coefficient of flow 1.00.
 * Source: the classic compressed-air handbook table of air discharged through an orifice (Compressed Air and Gas
 * Institute handbook lineage); above 15 psig it follows S. A. Moss, American Machinist, 20 Sept 1906:
 * W = 0.5303 A C P / √T (lb/s, in², psia, °R), density 0.07494 lb/ft³. Its 0.5303 is 0.3 % under the perfect gas.
 */
const bores = [1 / 64, 1 / 32, 1 / 16, 1 / 8, 1 / 4, 3 / 8, 1 / 2, 5 / 8, 3 / 4, 7 / 8, 1]
const printed = `
1,.028,.112,.450,1.80,7.18,16.2,28.7,45.0,64.7,88.1,115
2,.040,.158,.633,2.53,10.1,22.8,40.5,63.3,91.2,124,162
3,.048,.194,.775,3.10,12.4,27.8,49.5,77.5,111,152,198
4,.056,.223,.892,3.56,14.3,32.1,57.0,89.2,128,175,228
5,.062,.248,.993,3.97,15.9,35.7,63.5,99.3,143,195,254
6,.068,.272,1.09,4.34,17.4,39.1,69.5,109,156,213,278
7,.073,.293,1.17,4.68,18.7,42.2,75.0,117,168,230,300
9,.083,.331,1.32,5.30,21.1,47.7,84.7,132,191,260,339
12,.095,.379,1.52,6.07,24.3,54.6,97.0,152,218,297,388
15,.105,.420,1.68,6.72,26.9,60.5,108,168,242,329,430
20,.123,.491,1.96,7.86,31.4,70.7,126,196,283,385,503
25,.140,.562,2.25,8.98,35.9,80.9,144,225,323,440,575
30,.158,.633,2.53,10.1,40.5,91.1,162,253,365,496,648
35,.176,.703,2.81,11.3,45.0,101,180,281,405,551,720
40,.194,.774,3.10,12.4,49.6,112,198,310,446,607,793
45,.211,.845,3.38,13.5,54.1,122,216,338,487,662,865
50,.229,.916,3.66,14.7,58.6,132,235,366,528,718,938
60,.264,1.06,4.23,16.9,67.6,152,271,423,609,828,1082
70,.300,1.20,4.79,19.2,76.7,173,307,479,690,939,1227
80,.335,1.34,5.36,21.4,85.7,193,343,536,771,1050,1371
90,.370,1.48,5.92,23.7,94.8,213,379,592,853,1161,1516
100,.406,1.62,6.49,26.0,104,234,415,649,934,1272,1661
110,.441,1.76,7.05,28.2,113,254,452,705,1016,1383,1806
120,.476,1.91,7.62,30.5,122,274,488,762,1097,1494,1951
125,.494,1.98,7.90,31.6,126,284,506,790,1138,1549,2023`
  .trim()
  .split('\n')
  .map((row) => row.split(','))

const atmospherePa = 14.7 * KPA_PER_PSI * 1000
const site = { altitudeM: 0, airTemperatureK: ((70 + 459.67) * 5) / 9, barometerPa: atmospherePa }
const density = (0.07494 * KG_PER_POUND) / M3_PER_CUBIC_FOOT

function freeAirCfm(boreIn: number, psig: number): number {
  const nozzle = { boreM: (boreIn * MM_PER_INCH) / 1000, dischargeCoefficient: 1 }
  const massFlow = nozzleMassFlow(nozzle, atmospherePa + psig * KPA_PER_PSI * 1000, site)
  return ((massFlow / density) * 60) / M3_PER_CUBIC_FOOT
}

/** half of the last digit printed */
function halfDigit(text: string): number {
  return 0.5 * 10 ** -(text.split('.')[1] ?? '').length
}

const cells = printed.flatMap(([psig, ...cfm]) =>
  cfm.map((text, column) => ({ psig: Number(psig), boreIn: bores[column]!, text })),
)

describe('the handbook table of air through an orifice, coefficient 1', () => {
  it('has 275 cells', () => {
    expect(cells).toHaveLength(25 * 11)
  })

  it.each(cells)('$psig psig through $boreIn in: $text cfm', ({ psig, boreIn, text }) => {
    const computed = freeAirCfm(boreIn, psig)
    expect(Math.abs(computed - Number(text))).toBeLessThanOrEqual(halfDigit(text) + 0.004 * Number(text))
  })

  it('is met with residuals that are stated', () => {
    const percent = cells.map(({ psig, boreIn, text }) => (freeAirCfm(boreIn, psig) / Number(text) - 1) * 100)
    const sizes = percent.map(Math.abs).sort((a, b) => a - b)
    // what is left beyond the print's own rounding
    const beyond = cells.map(({ psig, boreIn, text }) => {
      const over = Math.abs(freeAirCfm(boreIn, psig) - Number(text)) - halfDigit(text)
      return (Math.max(0, over) / Number(text)) * 100
    })
    const median = sizes[Math.floor(sizes.length / 2)]!
    console.info(
      `orifice table, 275 cells: median ${median.toFixed(2)} %, largest ${sizes.at(-1)!.toFixed(2)} % (rounding of ` +
        `the print included), largest beyond half a printed digit ${Math.max(...beyond).toFixed(2)} %`,
    )
    expect(median).toBeLessThan(0.4)
    expect(Math.max(...beyond)).toBeLessThan(0.4)
  })
})
