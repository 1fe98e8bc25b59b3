import type { SourceStatus } from './source.ts'

export interface SafetyRule {
  id: string
  /** in signs and units that read the same in both languages; null where the rule is words, kept with the screen */
  figure: string | null
  citation: string
  status: SourceStatus
}

/**
 * Figures the screens cite. `published`: the figure was re-read in a published text. Where the paragraph was quoted
 * from memory the citation stops before it. Local codes and licensed practice come first.
 */
export const SAFETY_RULES = [
  {
    id: 'grade-d-oxygen',
    figure: '19.5–23.5 %',
    citation: '29 CFR 1910.134(i)(1)(ii)',
    status: 'published',
  },
  {
    id: 'grade-d-oil-mist',
    figure: '≤ 5 mg/m³',
    citation: '29 CFR 1910.134(i)(1)(ii)(B)',
    status: 'published',
  },
  {
    id: 'grade-d-carbon-monoxide',
    figure: '≤ 10 ppm',
    citation: '29 CFR 1910.134(i)(1)(ii)(C)',
    status: 'published',
  },
  {
    id: 'grade-d-carbon-dioxide',
    figure: '≤ 1,000 ppm',
    citation: '29 CFR 1910.134(i)(1)(ii)(D)',
    status: 'published',
  },
  { id: 'grade-d-odour', figure: null, citation: '29 CFR 1910.134(i)(1)(ii)(E)', status: 'published' },
  { id: 'air-quality', figure: 'O₂ ≥ 19.5 %', citation: '42 CFR 84.141', status: 'published' },
  {
    id: 'cylinder-dew-point',
    figure: '≤ −50 °F (−45.6 °C)',
    citation: '29 CFR 1910.134(i)',
    status: 'published',
  },
  {
    id: 'compressor-dew-point',
    figure: '10 °F (5.56 °C)',
    citation: '29 CFR 1910.134(i)',
    status: 'published',
  },
  { id: 'compressor-intake-and-filters', figure: null, citation: '29 CFR 1910.134(i)', status: 'published' },
  {
    id: 'carbon-monoxide-oil-free',
    figure: '≤ 10 ppm',
    citation: '29 CFR 1910.134(i)',
    status: 'published',
  },
  { id: 'oil-lubricated-alarm', figure: '≤ 10 ppm', citation: '29 CFR 1910.134(i)', status: 'published' },
  {
    id: 'hood-flow-loose-fitting',
    figure: '≥ 6 cfm (170 L/min)',
    citation: '42 CFR 84 Subpart J, Table 8',
    status: 'published',
  },
  {
    id: 'hood-flow-tight-fitting',
    figure: '≥ 4 cfm (115 L/min)',
    citation: '42 CFR 84 Subpart J, Table 8',
    status: 'published',
  },
  {
    id: 'hood-flow-most',
    figure: '≤ 15 cfm (425 L/min)',
    citation: '42 CFR 84 Subpart J, Table 8',
    status: 'published',
  },
  {
    id: 'breathing-hose-length',
    figure: '≤ 300 ft (91 m)',
    citation: '42 CFR 84 Subpart J, Table 8',
    status: 'published',
  },
  {
    id: 'dead-man-control',
    figure: null,
    citation: '29 CFR 1910.244(b); 1926.302(b)(10)',
    status: 'published',
  },
  {
    id: 'approved-respirator',
    figure: null,
    citation: '29 CFR 1910.94(a)(5)(i); 1926.57(f)(5)(i)',
    status: 'published',
  },
  {
    id: 'respirator-mandatory',
    figure: null,
    citation: '29 CFR 1910.94(a)(5); 1926.57(f)(5)',
    status: 'published',
  },
  {
    id: 'silica-limit',
    figure: '50 µg/m³ (8 h)',
    citation: '29 CFR 1926.1153; 1910.1053',
    status: 'published',
  },
  {
    id: 'silica-action-level',
    figure: '25 µg/m³',
    citation: '29 CFR 1926.1153(a), (b)',
    status: 'published',
  },
  {
    id: 'noise-ear-protection',
    figure: '> 85 dBA',
    citation: 'US Army TB 43-0144, ch. 2',
    status: 'published',
  },
  {
    id: 'noise-double-protection',
    figure: '> 108 dBA',
    citation: 'US Army TB 43-0144, ch. 2',
    status: 'published',
  },
  {
    id: 'noise-blast-nozzle',
    figure: '> 115 dBA',
    citation: 'conference abstract, AMPP 2022',
    status: 'published',
  },
  {
    id: 'noise-limit',
    figure: '90 dBA (8 h), 115 dBA (15 min)',
    citation: '29 CFR 1910.95',
    status: 'published',
  },
  {
    id: 'excess-flow-device',
    figure: '> 1/2 in',
    citation: '29 CFR 1926.302(b)',
    status: 'from memory',
  },
] as const satisfies readonly SafetyRule[]

export type SafetyRuleId = (typeof SAFETY_RULES)[number]['id']

export function safetyRule(id: SafetyRuleId): SafetyRule {
  return SAFETY_RULES.find((rule) => rule.id === id) as SafetyRule
}
