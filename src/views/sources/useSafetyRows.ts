import { computed } from 'vue'
import { SAFETY_RULES } from '#shared/catalogue/safetyRules.ts'
import type { SafetyRuleId } from '#shared/catalogue/safetyRules.ts'
import { useWords } from '../../composables/useWords.ts'
import { useSourceStatus } from './useSourceStatus.ts'

const ruleKeys: Record<SafetyRuleId, string> = {
  'grade-d-oxygen': 'pages.sources.safety.rules.grade-d-oxygen',
  'grade-d-oil-mist': 'pages.sources.safety.rules.grade-d-oil-mist',
  'grade-d-carbon-monoxide': 'pages.sources.safety.rules.grade-d-carbon-monoxide',
  'grade-d-carbon-dioxide': 'pages.sources.safety.rules.grade-d-carbon-dioxide',
  'grade-d-odour': 'pages.sources.safety.rules.grade-d-odour',
  'air-quality': 'pages.sources.safety.rules.air-quality',
  'cylinder-dew-point': 'pages.sources.safety.rules.cylinder-dew-point',
  'compressor-dew-point': 'pages.sources.safety.rules.compressor-dew-point',
  'compressor-intake-and-filters': 'pages.sources.safety.rules.compressor-intake-and-filters',
  'carbon-monoxide-oil-free': 'pages.sources.safety.rules.carbon-monoxide-oil-free',
  'oil-lubricated-alarm': 'pages.sources.safety.rules.oil-lubricated-alarm',
  'hood-flow-loose-fitting': 'pages.sources.safety.rules.hood-flow-loose-fitting',
  'hood-flow-tight-fitting': 'pages.sources.safety.rules.hood-flow-tight-fitting',
  'hood-flow-most': 'pages.sources.safety.rules.hood-flow-most',
  'breathing-hose-length': 'pages.sources.safety.rules.breathing-hose-length',
  'dead-man-control': 'pages.sources.safety.rules.dead-man-control',
  'approved-respirator': 'pages.sources.safety.rules.approved-respirator',
  'respirator-mandatory': 'pages.sources.safety.rules.respirator-mandatory',
  'silica-limit': 'pages.sources.safety.rules.silica-limit',
  'silica-action-level': 'pages.sources.safety.rules.silica-action-level',
  'noise-ear-protection': 'pages.sources.safety.rules.noise-ear-protection',
  'noise-double-protection': 'pages.sources.safety.rules.noise-double-protection',
  'noise-blast-nozzle': 'pages.sources.safety.rules.noise-blast-nozzle',
  'noise-limit': 'pages.sources.safety.rules.noise-limit',
  'excess-flow-device': 'pages.sources.safety.rules.excess-flow-device',
}

/** Every safety figure with its rule. Figures stand as the rule prints them, in both units where it has both. */
export function useSafetyRows() {
  const { t } = useWords()
  const statusWord = useSourceStatus()
  return computed(() =>
    SAFETY_RULES.map(({ id, figure, citation, status }) => ({
      key: id,
      cells: [t(ruleKeys[id]), figure ?? t('pages.sources.safety.inWords'), citation, statusWord(status)],
    })),
  )
}
