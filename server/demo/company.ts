import type { Role } from '#shared/contracts/permissions.ts'

/** An invented company of invented people: the demo. Its ids never change, so that a link into it stays good. */
export const demoCompany = {
  id: '5e0c0de0-0000-4000-8000-000000000001',
  name: 'Cinder Ridge Blasting',
  currency: 'USD',
  language: 'en',
  timeZone: 'America/Denver',
} as const

export interface DemoPerson {
  accountId: string
  membershipId: string
  email: string
  name: string
  language: 'en' | 'es'
  roles: readonly Role[]
}

function makeDemoPerson(
  number: number,
  name: string,
  email: string,
  role: Role,
  language: 'en' | 'es' = 'en',
): DemoPerson {
  return {
    accountId: `5e0c0de0-0000-4000-8001-00000000000${number}`,
    membershipId: `5e0c0de0-0000-4000-8002-00000000000${number}`,
    email,
    name,
    language,
    roles: [role],
  }
}

export const demoOwner = makeDemoPerson(3, 'Walt Hendry', 'walt@cinder-ridge.example', 'owner')

/** One person a role each. */
export const demoPeople: readonly DemoPerson[] = [
  makeDemoPerson(1, 'Lucía Barrera', 'lucia@cinder-ridge.example', 'blaster', 'es'),
  makeDemoPerson(2, 'Nell Okafor', 'nell@cinder-ridge.example', 'estimator'),
  demoOwner,
  makeDemoPerson(4, 'Ida Marsh', 'ida@cinder-ridge.example', 'admin'),
]
