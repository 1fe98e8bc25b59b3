import { cleanAirDischargeCoefficient } from '../airflow/nozzle.ts'
import type { CheckCaution } from '../contracts/check.ts'
import { coefficientOf } from './readForm.ts'
import type { CheckForm } from './checkForm.ts'

const code = 'air-only-reading-low'

/**
 * The cautions of a check for the form it came from. A coefficient alone cannot tell media from a straight bore; the
 * form can, so how much more air the nozzle draws with its media shut off is taken from the loading.
 *
 * Result   biggest first        Checked  tests/shared/form/cautionsOfForm.test.ts
 */
export function cautionsOfForm(cautions: readonly CheckCaution[], form: CheckForm): CheckCaution[] {
  if (form.outlets.some(({ coefficient }) => coefficient.text.trim() !== '')) return [...cautions]
  const coefficients = form.outlets.map(({ loading }) => coefficientOf({ loading, shape: 'venturi' }))
  const sizePct = (cleanAirDischargeCoefficient / Math.min(...coefficients) - 1) * 100
  return cautions
    .map((caution) => (caution.code === code ? { ...caution, sizePct } : caution))
    .filter((caution) => caution.sizePct > 0)
    .sort((a, b) => b.sizePct - a.sizePct)
}
