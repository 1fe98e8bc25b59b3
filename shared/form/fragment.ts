import { ABRASIVES } from '../catalogue/media.ts'
import { BIT_SETS } from '../catalogue/drillBits.ts'
import { maxCurvePoints, maxOutlets } from '../contracts/limits.ts'
import { createCheckForm, createOutlet, mostHoods } from './checkForm.ts'
import type { CheckForm, CurvePointForm, OutletForm } from './checkForm.ts'

/** The first mark of an address that holds a check; a later shape of the form takes the next number. */
const version = '1'
/** more than every field of every nozzle filled to the brim */
const longestFragment = 40_000
/** what a field lets a person type, too long for a quantity or not */
const longestText = 60
const mostPieces = 20

type Json = null | boolean | number | string | Json[] | { [key: string]: Json }

/** What may stand in a choice of the form, by the name of its field. */
const choices: Record<string, readonly string[]> = {
  system: ['us', 'metric'],
  cooling: ['aftercooled', 'bare'],
  engine: ['unknown', 'natural', 'turbo'],
  loading: ['clean', 'lean', 'normal', 'heavy-or-wet'],
  shape: ['venturi', 'straight'],
  bitSet: BIT_SETS,
  abrasive: ABRASIVES.map((abrasive) => abrasive.id),
}

const emptyPoint = (): CurvePointForm => ({
  pressure: { text: '', system: 'us' },
  freeAir: { text: '', system: 'us' },
})

/** The shape that a list's entries have and how many there may be. */
const lists: Record<string, { create: () => OutletForm | CurvePointForm; least: number; most: number }> = {
  outlets: { create: createOutlet, least: 1, most: maxOutlets },
  curve: { create: emptyPoint, least: 0, most: maxCurvePoints },
}

function newEntry(key: string): Json {
  return (lists[key]?.create() ?? null) as unknown as Json
}

/** Only what differs from the form a visitor finds, so that a usual link stays short. */
function difference(value: Json, from: Json, key = ''): Json | undefined {
  if (Array.isArray(value)) {
    if (JSON.stringify(from) === JSON.stringify(value)) return undefined
    return value.map((entry) => difference(entry, newEntry(key)) ?? {})
  }
  if (value !== null && typeof value === 'object') {
    const base = from as { [key: string]: Json }
    const changed: { [key: string]: Json } = {}
    for (const [key, part] of Object.entries(value)) {
      const piece = difference(part, base[key] ?? null, key)
      if (piece !== undefined) changed[key] = piece
    }
    return Object.keys(changed).length === 0 ? undefined : changed
  }
  return value === from ? undefined : value
}

/** Lays what a link says over a form of the right shape; throws on anything the form has no place for. */
function overlay(shape: Json, said: Json, key: string): Json {
  if (typeof shape === 'string') {
    if (typeof said !== 'string' || said.length > longestText) throw new Error(key)
    const allowed = choices[key]
    if (allowed && !allowed.includes(said)) throw new Error(key)
    return said
  }
  if (typeof shape === 'number') {
    const most = key === 'count' ? mostHoods : mostPieces
    if (typeof said !== 'number' || !Number.isInteger(said) || said < 0 || said > most) throw new Error(key)
    return said
  }
  if (typeof shape === 'boolean') {
    if (typeof said !== 'boolean') throw new Error(key)
    return said
  }
  if (Array.isArray(shape)) {
    const list = lists[key]
    if (!list || !Array.isArray(said) || said.length < list.least || said.length > list.most)
      throw new Error(key)
    return said.map((entry) => overlay(newEntry(key), entry, key))
  }
  if (shape === null || said === null || typeof said !== 'object' || Array.isArray(said)) throw new Error(key)
  const result = { ...shape }
  for (const [name, part] of Object.entries(said)) {
    if (!Object.hasOwn(shape, name)) throw new Error(name)
    result[name] = overlay(shape[name]!, part, name)
  }
  return result
}

const alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_'

/** Base64 for addresses (RFC 4648 section 5) of the text's UTF-16 code units as UTF-8 percent-encoded ASCII. */
function toBase64Url(text: string): string {
  const bytes = encodeURIComponent(text).replace(/%([0-9A-F]{2})/g, (_, hex: string) =>
    String.fromCharCode(parseInt(hex, 16)),
  )
  let encoded = ''
  for (let i = 0; i < bytes.length; i += 3) {
    const three = [0, 1, 2].map((at) => bytes.charCodeAt(i + at) || 0)
    const bits = (three[0]! << 16) | (three[1]! << 8) | three[2]!
    const letters = Math.min(4, bytes.length - i + 1)
    for (let at = 0; at < letters; at++) encoded += alphabet[(bits >> (18 - 6 * at)) & 63]
  }
  return encoded
}

function fromBase64Url(encoded: string): string {
  let bytes = ''
  let bits = 0
  let held = 0
  for (const letter of encoded) {
    const value = alphabet.indexOf(letter)
    if (value < 0) throw new Error('letter')
    bits = (bits << 6) | value
    held += 6
    if (held >= 8) {
      held -= 8
      bytes += `%${((bits >> held) & 255).toString(16).padStart(2, '0')}`
      bits &= (1 << held) - 1
    }
  }
  return decodeURIComponent(bytes)
}

/** The whole check as the fragment of an address, without its `#`; empty for the check a visitor finds. */
export function writeFragment(form: CheckForm): string {
  const changed = difference(form as unknown as Json, createCheckForm() as unknown as Json)
  return changed === undefined ? '' : `${version}.${toBase64Url(JSON.stringify(changed))}`
}

/**
 * The check that an address holds.
 *
 * Inputs   a fragment with or without its `#`; anything at all
 * Result   the form; isBroken when there was something that is not a check, and then the form is a clean one
 * Errors   none        Checked  tests/shared/form/fragment.test.ts
 */
export function readFragment(fragment: string): { form: CheckForm; isBroken: boolean } {
  const text = fragment.replace(/^#/, '')
  if (text === '') return { form: createCheckForm(), isBroken: false }
  try {
    if (text.length > longestFragment || !text.startsWith(`${version}.`)) throw new Error('version')
    const said = JSON.parse(fromBase64Url(text.slice(version.length + 1))) as Json
    const form = overlay(createCheckForm() as unknown as Json, said, 'form') as unknown as CheckForm
    return { form, isBroken: false }
  } catch {
    return { form: createCheckForm(), isBroken: true }
  }
}
