import type { PreparedRig } from './preparedRig.ts'

/**
 * A prepared rig with another bore at one outlet: ṁ goes with the bore squared, everything else stays prepared.
 *
 * Inputs   rig, prepared · which outlet · bore m        Checked  tests/shared/airflow/airUse.test.ts
 */
export function withPreparedBore(rig: PreparedRig, outletIndex: number, boreM: number): PreparedRig {
  return {
    ...rig,
    outlets: rig.outlets.map((outlet, index) => {
      if (index !== outletIndex) return outlet
      const conductance = outlet.nozzle.conductance * (boreM / outlet.boreM) ** 2
      return { ...outlet, boreM, nozzle: { ...outlet.nozzle, conductance } }
    }),
  }
}
