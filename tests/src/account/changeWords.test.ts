import { describe, expect, test } from 'vitest'
import { defineComponent, h } from 'vue'
import type { AuditEntry } from '#shared/contracts/people.ts'
import AuditEntryRow from '../../../src/views/audit/AuditEntryRow.vue'
import { usePreferencesStore } from '../../../src/stores/preferences.ts'
import { fakeServer, mountRoom } from './mountRoom.ts'

const entry = (action: AuditEntry['action'], changes: AuditEntry['changes'], subject = 'Yard 375') =>
  ({
    id: '5e0c0de0-0000-4000-8000-00000000000a',
    at: '2026-05-03T15:00:00.000Z',
    actorName: 'Pat',
    actorEmail: null,
    action,
    subject,
    changes,
  }) as unknown as AuditEntry

async function textOf(shown: AuditEntry): Promise<string> {
  fakeServer(() => ({ rigs: [], compressors: [], sites: [], today: [] }))
  const Row = defineComponent(() => {
    usePreferencesStore().units = 'metric'
    return () => h('ul', [h(AuditEntryRow, { entry: shown })])
  })
  const { wrapper } = await mountRoom(Row, { language: 'es' })
  return wrapper.text().replace(/\s+/g, ' ')
}

describe('what the audit says was changed', () => {
  test('reads as the screens do: their words, the person’s units, no names of fields', async () => {
    const text = await textOf(
      entry('compressor.changed', {
        setPressureKpa: { from: 700, to: 800 },
        cooling: { from: 'aftercooled', to: 'bare' },
        rentedUntil: { from: null, to: '2026-12-20' },
      }),
    )
    expect(text).toMatch(/Presión de ajuste\s*7 bar → 8 bar/)
    expect(text).toContain('con posenfriador → sin posenfriador')
    expect(text).toContain('20 dic 2026')
    expect(text).not.toMatch(/kpa|cooling|rented/i)
  })

  test('of a rig only the part of a nozzle that changed is named', async () => {
    const outlet = (boreNowMm: number | null) => ({ whip: null, nozzle: { newBoreMm: 8, boreNowMm } })
    const text = await textOf(
      entry('rig.changed', { outlets: { from: [outlet(null)], to: [outlet(9)] } }, 'Trailer'),
    )
    expect(text).toContain('9 mm')
    expect(text).not.toMatch(/latiguillo|outlets|bore/i)
  })

  test('a compressor that is gone is not called none', async () => {
    const id = '5e0c0de0-0000-4000-8004-000000000009'
    const text = await textOf(entry('rig.changed', { compressorId: { from: id, to: null } }, 'Trailer'))
    expect(text).toContain('ya borrado')
    expect(text).not.toContain(id)
  })

  test('an import says what was imported', async () => {
    const text = await textOf(entry('fleet.imported', { written: { from: 0, to: 92 } }, 'rigs'))
    expect(text).toContain('Equipos')
    expect(text).toMatch(/líneas\s*92/)
    expect(text).not.toMatch(/written|rigs/)
  })
})
