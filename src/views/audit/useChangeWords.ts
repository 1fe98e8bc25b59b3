import type { AuditEntry } from '#shared/contracts/people.ts'
import { roles } from '#shared/contracts/permissions.ts'
import { findDifferences } from '../../composables/recordDifferences.ts'
import { useFleetWords } from '../../composables/useFleetWords.ts'
import { useWords } from '../../composables/useWords.ts'
import { useFleet } from '../../queries/fleet.ts'
import { spellField, spellValue } from './describeChange.ts'

const knownFields = [
  'name',
  'roles',
  'state',
  'currency',
  'language',
  'timeZone',
  'email',
  'written',
] as const

const isNothing = (value: unknown) => value === null || value === undefined || value === ''

export interface ChangeWords {
  name: string
  label: string
  /** blank where what is new was nothing before */
  from: string
  to: string
}

/** What an entry of the audit changed, in the words of the screens it was changed on. */
export function useChangeWords() {
  const { t } = useWords()
  const { fieldLabel, valueText, dateText } = useFleetWords()
  const { fleet } = useFleet()

  function spell(value: unknown): string {
    return spellValue(value, {
      nothing: t('accounts.audit.nothing'),
      yes: t('accounts.audit.yes'),
      no: t('accounts.audit.no'),
      nameOf(text) {
        const role = roles.find((each) => each === text)
        if (role) return t(`accounts.roles.names.${role}`)
        if (text === 'active' || text === 'deactivated') return t(`accounts.people.states.${text}`)
        return text
      },
    })
  }

  function changesOfPerson(changes: AuditEntry['changes']): ChangeWords[] {
    return Object.entries(changes).map(([name, { from, to }]) => {
      const known = knownFields.find((field) => field === name)
      return {
        name,
        label: known ? t(`accounts.audit.fields.${known}`) : spellField(name),
        from: isNothing(from) || name === 'written' ? '' : spell(from),
        to: spell(to),
      }
    })
  }

  /** A machine that was deleted since has no name any more. */
  function fleetValue(path: string, value: unknown): string {
    const isMachine = path === 'compressorId' || path === 'siteId'
    if (isMachine && typeof value === 'string') {
      const records = path === 'siteId' ? fleet.value?.sites : fleet.value?.compressors
      return records?.find(({ id }) => id === value)?.name ?? t('accounts.audit.deleted')
    }
    if (path === 'localDate') return typeof value === 'string' ? dateText(value) : ''
    return valueText(path, value ?? null)
  }

  function changesOfRecord(changes: AuditEntry['changes']): ChangeWords[] {
    const side = (which: 'from' | 'to') =>
      Object.fromEntries(Object.entries(changes).map(([name, change]) => [name, change[which] ?? null]))
    const [before, after] = [side('from'), side('to')]
    const outlets = [before.outlets, after.outlets].map((list) => (Array.isArray(list) ? list.length : 1))
    return findDifferences(before, after, before).map(({ path, mine, theirs }) => ({
      name: path,
      label:
        path === 'localDate' ? t('accounts.audit.fields.localDate') : fieldLabel(path, Math.max(...outlets)),
      from: fleetValue(path, theirs),
      to: fleetValue(path, mine),
    }))
  }

  return ({ action, changes }: Pick<AuditEntry, 'action' | 'changes'>): ChangeWords[] => {
    if (!/^(rig|compressor|site)\./.test(action)) return changesOfPerson(changes)
    try {
      return changesOfRecord(changes)
    } catch {
      // written by a version whose records looked otherwise
      return changesOfPerson(changes)
    }
  }
}
