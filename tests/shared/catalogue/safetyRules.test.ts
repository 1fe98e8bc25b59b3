import { expect, test } from 'vitest'
import { BREATHING_HOSE, HOOD_AIR, HOOD_DEFAULT_FREE_AIR_M3_MIN } from '#shared/catalogue/breathing.ts'
import { SAFETY_RULES, safetyRule } from '#shared/catalogue/safetyRules.ts'

test('every rule is listed once and cites something', () => {
  expect(new Set(SAFETY_RULES.map((rule) => rule.id)).size).toBe(SAFETY_RULES.length)
  for (const rule of SAFETY_RULES) expect(rule.citation).toMatch(/\d/)
})

// figures of 29 CFR 1910.134(i) and 42 CFR 84 Subpart J
test.each([
  ['grade-d-oxygen', /19\.5–23\.5 %/],
  ['grade-d-oil-mist', /5 mg\/m³/],
  ['grade-d-carbon-monoxide', /10 ppm/],
  ['grade-d-carbon-dioxide', /1,000 ppm/],
  ['hood-flow-loose-fitting', /6 cfm/],
  ['hood-flow-tight-fitting', /4 cfm/],
  ['hood-flow-most', /15 cfm/],
  ['compressor-dew-point', /10 °F/],
  ['silica-limit', /50 µg\/m³/],
] as const)('%s has its figure', (id, figure) => {
  expect(safetyRule(id).figure).toMatch(figure)
})

test('where the paragraph is from memory the citation stops before it', () => {
  // the paragraphs that the reference marks as not re-read
  const unread = [
    '(i)(4)',
    '(i)(5)',
    '(i)(6)',
    '(i)(7)',
    '(ii)(A)',
    '1153(d)',
    '1053(c)',
    '302(b)(7)',
    '(5)(ii)',
  ]
  for (const rule of SAFETY_RULES) {
    for (const paragraph of unread) expect(rule.citation, rule.id).not.toContain(paragraph)
  }
  expect(safetyRule('excess-flow-device').status).toBe('from memory')
})

test('a hood takes what the rule says, cfm and L/min agreeing to the digits it prints', () => {
  for (const hood of HOOD_AIR) {
    expect(Math.round(hood.leastFreeAirM3Min / 0.028316846592)).toBe(hood.leastCfm)
    expect(Math.round(hood.mostFreeAirM3Min / 0.028316846592)).toBe(hood.mostCfm)
    expect(HOOD_DEFAULT_FREE_AIR_M3_MIN).toBeGreaterThan(hood.leastFreeAirM3Min)
    expect(HOOD_DEFAULT_FREE_AIR_M3_MIN).toBeLessThan(hood.mostFreeAirM3Min * 1.001)
  }
  expect(Math.round(BREATHING_HOSE.mostFeet * 0.3048)).toBe(BREATHING_HOSE.mostM)
})
