/** `setPressureKpa` is "set pressure kpa": a field without words of its own is still to be read. */
export function spellField(name: string): string {
  return name
    .replace(/([a-z\d])([A-Z])/g, '$1 $2')
    .replace(/[_-]+/g, ' ')
    .toLowerCase()
}

interface ValueWords {
  nothing: string
  yes: string
  no: string
  /** a name known in the person's language, such as that of a role */
  nameOf: (value: string) => string
}

/** What a field held, in words: lists and groups within it one after the other. */
export function spellValue(value: unknown, words: ValueWords): string {
  if (value === null || value === undefined || value === '') return words.nothing
  if (typeof value === 'boolean') return value ? words.yes : words.no
  if (typeof value === 'string') return words.nameOf(value)
  if (typeof value === 'number') return String(value)
  if (Array.isArray(value))
    return value.length === 0 ? words.nothing : value.map((item) => spellValue(item, words)).join(', ')
  return Object.entries(value as object)
    .map(([name, inner]) => `${spellField(name)} ${spellValue(inner, words)}`)
    .join(' · ')
}
