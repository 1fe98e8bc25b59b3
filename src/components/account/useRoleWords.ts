import { roles } from '#shared/contracts/permissions.ts'
import type { Role } from '#shared/contracts/permissions.ts'
import { useWords } from '../../composables/useWords.ts'

export function useRoleWords() {
  const { t } = useWords()

  /** "owner and admin", in the order of the table; whoever has all of them is not read a list. */
  function rolesSentence(held: readonly Role[]): string {
    if (roles.every((role) => held.includes(role))) return t('accounts.roles.all')
    return roles
      .filter((role) => held.includes(role))
      .map((role) => t(`accounts.roles.names.${role}`))
      .join(', ')
  }

  return { rolesSentence }
}
