import type { Person } from '#shared/contracts/people.ts'
import type { Role } from '#shared/contracts/permissions.ts'

const isActive = ({ state }: Person) => state === 'active'

/** The roles that nobody else of the company has, and that it cannot be without. */
export function lastRolesOf(person: Person, people: readonly Person[]): Role[] {
  if (!isActive(person)) return []
  return (['owner', 'admin'] as const).filter(
    (role) =>
      person.roles.includes(role) &&
      !people.some((other) => other.id !== person.id && isActive(other) && other.roles.includes(role)),
  )
}

/** Folds case and accents, so that "jose" finds José. */
const fold = (text: string) =>
  text
    .normalize('NFD')
    .replace(/\p{Mn}/gu, '')
    .toLowerCase()

/** Whoever is found by each word that was typed; those who work here first, by name. */
export function findPeople(
  people: readonly Person[],
  search: string,
  nameRoles: (roles: readonly Role[]) => string,
): Person[] {
  const words = fold(search).split(/\s+/).filter(Boolean)
  return people
    .filter((person) => {
      const text = fold(`${person.name} ${person.email} ${nameRoles(person.roles)}`)
      return words.every((word) => text.includes(word))
    })
    .sort((a, b) => Number(isActive(b)) - Number(isActive(a)) || a.name.localeCompare(b.name))
}
