import { computed } from 'vue'
import { KPA_PER_PSI, M3_PER_CUBIC_FOOT, mmOfInches } from '#shared/units/quantities.ts'
import { useWords } from '../../composables/useWords.ts'

/** As its title is printed, in any language. */
const governmentSource = 'MIL-HDBK-1110, 10.3.2; UFC 3-190-06'

/** What the air model was checked against, and how near it came. */
export function useReferenceRows() {
  const { t, quantity } = useWords()

  /** A government point: free air through a bore at 100 psi. */
  const point = (inches: number, cfm: number) => ({
    bore: quantity('bore', mmOfInches(inches)),
    pressure: quantity('pressure', 100 * KPA_PER_PSI),
    air: quantity('volumeFlow', cfm * M3_PER_CUBIC_FOOT),
  })

  return computed(() =>
    [
      [
        t('pages.sources.checked.rows.atmosphere.what'),
        t('pages.sources.checked.rows.atmosphere.source'),
        t('pages.sources.checked.rows.atmosphere.residual'),
      ],
      [
        t('pages.sources.checked.rows.orifice.what'),
        t('pages.sources.checked.rows.orifice.source'),
        t('pages.sources.checked.rows.orifice.residual'),
      ],
      [
        t('pages.sources.checked.rows.serviceNozzle.what', point(1 / 4, 81)),
        governmentSource,
        t('pages.sources.checked.rows.serviceNozzle.more'),
      ],
      [
        t('pages.sources.checked.rows.serviceNozzle.what', point(5 / 8, 548)),
        governmentSource,
        t('pages.sources.checked.rows.serviceNozzle.less'),
      ],
      [
        t('pages.sources.checked.rows.cleanAir.what'),
        t('pages.sources.checked.rows.cleanAir.source'),
        t('pages.sources.checked.rows.cleanAir.residual'),
      ],
      [
        t('pages.sources.checked.rows.friction.what'),
        'C. F. Colebrook, 1939',
        t('pages.sources.checked.rows.friction.residual'),
      ],
      [
        t('pages.sources.checked.rows.viscosity.what'),
        t('pages.sources.checked.rows.viscosity.source'),
        t('pages.sources.checked.rows.viscosity.residual'),
      ],
      [
        t('pages.sources.checked.rows.vapour.what'),
        t('pages.sources.checked.rows.vapour.source'),
        t('pages.sources.checked.rows.vapour.residual', {
          low: quantity('temperature', -40),
          high: quantity('temperature', 50),
        }),
      ],
    ].map((cells, index) => ({ key: String(index), cells })),
  )
}
