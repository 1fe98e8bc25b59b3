import type { Invitation, InvitationInput, People, Person, PersonChange } from '#shared/contracts/people.ts'
import { askApi } from './request.ts'

const people = '/api/v1/people'

export const fetchPeople = () => askApi<People>('GET', people)

export const changePerson = (id: string, change: PersonChange) =>
  askApi<Person>('PUT', `${people}/${encodeURIComponent(id)}`, change)

export const invite = (input: InvitationInput) => askApi<Invitation>('POST', `${people}/invitations`, input)

export const resendInvitation = ({ id, version }: Invitation) =>
  askApi<Invitation>('POST', `${people}/invitations/${encodeURIComponent(id)}/resend`, { version })

export const withdrawInvitation = ({ id, version }: Invitation) =>
  askApi<Invitation>('POST', `${people}/invitations/${encodeURIComponent(id)}/withdraw`, { version })
