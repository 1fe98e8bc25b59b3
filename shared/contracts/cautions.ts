/** What a check may warn about. Each comes with its size in percent; sentences are made from the codes. */
export { cautionCodes } from '#shared/airflow/cautions.ts'
export type { CautionCode } from '#shared/airflow/cautions.ts'
