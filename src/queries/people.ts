import { useMutation, useQuery, useQueryCache } from '@pinia/colada'
import type { Invitation, InvitationInput, Person, PersonChange } from '#shared/contracts/people.ts'
import { changePerson, fetchPeople, invite, resendInvitation, withdrawInvitation } from '../api/people.ts'
import { useSessionStore } from '../stores/session.ts'

/** The people of the active company and those who are invited. */
export function usePeople() {
  const session = useSessionStore()
  return useQuery({
    key: () => ['people', session.scope],
    query: fetchPeople,
    enabled: () => session.can('manage-people'),
  })
}

/** What an admin does to them; each change, made or refused, brings the list anew. */
export function usePeopleChanges() {
  const cache = useQueryCache()
  const session = useSessionStore()

  async function refresh() {
    await cache.invalidateQueries({ key: ['people'] })
    await cache.invalidateQueries({ key: ['audit'] }, false)
  }

  const change = useMutation({
    mutation: ({ person, ...change }: Omit<PersonChange, 'version'> & { person: Person }) =>
      changePerson(person.id, { version: person.version, ...change }),
    async onSettled(_data, _error, { person }) {
      await refresh()
      // who changed what they are themselves sees other pages now
      if (person.email === session.session?.account.email) await session.load(true)
    },
  })
  const send = useMutation({
    mutation: (input: InvitationInput) => invite(input),
    onSettled: refresh,
  })
  const resend = useMutation({
    mutation: (invitation: Invitation) => resendInvitation(invitation),
    onSettled: refresh,
  })
  const withdraw = useMutation({
    mutation: (invitation: Invitation) => withdrawInvitation(invitation),
    onSettled: refresh,
  })

  return {
    change: change.mutateAsync,
    invite: send.mutateAsync,
    resend: resend.mutateAsync,
    withdraw: withdraw.mutateAsync,
  }
}
