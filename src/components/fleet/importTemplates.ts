import type { ImportKind } from '#shared/contracts/imports.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'

type Cells = readonly (readonly [heading: string, example: string])[]

/** The columns that a crew fills most; the units are those of the headings. */
const templates: Record<ImportKind, Record<UnitSystem, Cells>> = {
  compressors: {
    us: [
      ['name', 'Big red'],
      ['free_air_cfm', '375'],
      ['set_pressure_psi', '125'],
      ['unload_pressure_psi', ''],
      ['cooling', 'aftercooled'],
      ['engine', 'turbo'],
      ['full_load_fuel_gal_h', ''],
      ['ownership', 'owned'],
      ['rented_from', ''],
      ['rented_until', ''],
    ],
    metric: [
      ['name', 'Big red'],
      ['free_air_m3_min', '10.6'],
      ['set_pressure_bar', '8.6'],
      ['unload_pressure_bar', ''],
      ['cooling', 'aftercooled'],
      ['engine', 'turbo'],
      ['full_load_fuel_l_h', ''],
      ['ownership', 'owned'],
      ['rented_from', ''],
      ['rented_until', ''],
    ],
  },
  rigs: {
    us: [
      ['name', 'Trailer one'],
      ['compressor', ''],
      ['site', ''],
      ['target_pressure_psi', '100'],
      ['nozzle', 'No. 6'],
      ['nozzle_now', ''],
      ['hose_bore_in', '1 1/4'],
      ['hose_length_ft', '50'],
      ['hose_couplings', '2'],
      ['whip_bore_in', '1'],
      ['whip_length_ft', '10'],
      ['whip_couplings', '1'],
      ['air_line_bore_in', '1 1/2'],
      ['air_line_length_ft', '25'],
      ['air_line_couplings', '2'],
      ['pot_bore_in', '1 1/4'],
      ['hoods', '1'],
    ],
    metric: [
      ['name', 'Trailer one'],
      ['compressor', ''],
      ['site', ''],
      ['target_pressure_bar', '7'],
      ['nozzle_mm', '9.5'],
      ['nozzle_now_mm', ''],
      ['hose_bore_mm', '32'],
      ['hose_length_m', '15'],
      ['hose_couplings', '2'],
      ['whip_bore_mm', '25'],
      ['whip_length_m', '3'],
      ['whip_couplings', '1'],
      ['air_line_bore_mm', '38'],
      ['air_line_length_m', '8'],
      ['air_line_couplings', '2'],
      ['pot_bore_mm', '32'],
      ['hoods', '1'],
    ],
  },
}

/** A CSV file to start from: the headings, and a line that shows what goes under them. */
export function importTemplate(kind: ImportKind, system: UnitSystem): string {
  const cells = templates[kind][system]
  const line = (at: 0 | 1) => `${cells.map((cell) => cell[at]).join(',')}\r\n`
  return line(0) + line(1)
}
