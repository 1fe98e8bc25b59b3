import { readdirSync, readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import type { Reason } from '#shared/airflow/operatingPoint.ts'
import { BIT_SETS } from '#shared/catalogue/drillBits.ts'
import { ABRASIVES } from '#shared/catalogue/media.ts'
import { cautionSentences } from '#shared/check/cautionSentences.ts'
import type { OutletAnswer, Verdict } from '#shared/contracts/check.ts'
import { auditActions, personStates } from '#shared/contracts/people.ts'
import { roles } from '#shared/contracts/permissions.ts'
import type { Cooling, EngineChoice, MediaLoading, NozzleShape } from '#shared/form/checkForm.ts'
import type { FieldProblem } from '#shared/form/readForm.ts'
import type { UnitSystem } from '#shared/units/quantities.ts'
import type { FieldSentence, RefusalSentence } from '../../src/components/account/formErrors.ts'
import { navigationPages } from '../../src/components/layout/navigationPages.ts'
import { en } from '../../src/i18n/en/index.ts'
import { es } from '../../src/i18n/es/index.ts'
import { languages, themes } from '../../src/stores/preferences.ts'

const sourceDir = join(import.meta.dirname, '../../src')
const sources = readdirSync(sourceDir, { recursive: true, withFileTypes: true })
  .filter((entry) => entry.isFile() && /\.(ts|vue)$/.test(entry.name))
  .map((entry) => join(entry.parentPath, entry.name))
  .filter((path) => !path.startsWith(join(sourceDir, 'i18n')))
  .map((path) => ({ path: path.slice(sourceDir.length + 1), text: readFileSync(path, 'utf8') }))

type Tree = { [key: string]: string | Tree }

function flatten(tree: Tree, prefix = ''): Map<string, string> {
  const found = new Map<string, string>()
  for (const [name, value] of Object.entries(tree)) {
    if (typeof value === 'string') found.set(prefix + name, value)
    else for (const [key, text] of flatten(value, `${prefix}${name}.`)) found.set(key, text)
  }
  return found
}

const english = flatten(en)
const spanish = flatten(es)

/** Every member of a union of names: the compiler says when one is missing or too many. */
function namesOf<T extends string>(names: Record<T, true>): string[] {
  return Object.keys(names)
}

/** `choked` of `choked:whip` */
type CodeOf<R> = R extends `${infer Code}:${string}` ? Code : R

const verdicts = namesOf<Verdict>({
  holds: true,
  'barely-holds': true,
  'falls-short': true,
  'cannot-run': true,
})
const coolings = namesOf<Cooling>({ aftercooled: true, bare: true })
const loadings = namesOf<MediaLoading>({ clean: true, lean: true, normal: true, 'heavy-or-wet': true })
const shapes = namesOf<NozzleShape>({ venturi: true, straight: true })
const unitSystems = namesOf<UnitSystem>({ us: true, metric: true })

const actionNames = auditActions.map((action) => action.replace('.', '_'))
const refusals = namesOf<RefusalSentence>({
  offline: true,
  'invalid-fields': true,
  'too-many-requests': true,
  'not-signed-in': true,
  'wrong-credentials': true,
  forbidden: true,
  'link-not-good': true,
  'other-company': true,
  'version-conflict': true,
  'id-in-use': true,
  'too-many-records': true,
  'last-admin': true,
  'last-owner': true,
  busy: true,
  'storage-unavailable': true,
  'not-found': true,
  other: true,
})

/** What stands for the variable part of a key, by the key as it is written in the source. */
const expansions: Record<string, readonly string[]> = {
  "accounts.audit.actions.${entry.action.replace('.', '_')}": actionNames,
  "accounts.audit.actions.${value.replace('.', '_')}": actionNames,
  'accounts.audit.fields.${known}': [
    'name',
    'roles',
    'state',
    'currency',
    'language',
    'timeZone',
    'email',
    'written',
  ],
  'accounts.people.last.${role}': ['owner', 'admin'],
  'accounts.people.lastStays.${role}': ['owner', 'admin'],
  'accounts.people.states.${state}': personStates,
  'accounts.people.states.${text}': personStates,
  'accounts.problems.${fieldSentence(error, blanks.value.has(pointer))}': namesOf<FieldSentence>({
    required: true,
    'too-long': true,
    'password-too-long': true,
    'too-short': true,
    'too-common': true,
    'too-few': true,
    'not-an-email': true,
    'not-a-time-zone': true,
    'not-a-currency': true,
    'name-in-use': true,
    'wrong-password': true,
    invalid: true,
  }),
  'accounts.refusals.${refusalOf(error)}': refusals,
  'accounts.refusals.${refusalSentence(refusal.value.code)}': refusals,
  'accounts.roles.may.${role}': roles,
  'accounts.roles.names.${role}': roles,
  "bits.sets.${set.replace('.', '_')}": BIT_SETS.map((set) => set.replace('.', '_')),
  'check.${outcome}': ['shared', 'shareFailed'],
  'elements.${base}': ['air-line', 'pot', 'blast-hose', 'whip', 'regulator'],
  'fields.compressor.coolings.${compressor.value.cooling}': coolings,
  'fields.compressor.coolings.${value}': coolings,
  'fields.compressor.engines.${value}': namesOf<EngineChoice>({ unknown: true, natural: true, turbo: true }),
  'fields.nozzle.loadings.${value}': loadings,
  'fields.nozzle.loadings.${outlet.value.loading}': loadings,
  'fields.nozzle.shapes.${value}': shapes,
  'fields.nozzle.shapes.${outlet.value.shape}': shapes,
  'fields.pot.${value}': ['shared', 'own'],
  'fields.problems.${problem.problem}': namesOf<FieldProblem['problem']>({
    empty: true,
    'not-a-number': true,
    'too-long': true,
    'unknown-unit': true,
    'wrong-kind': true,
    'ambiguous-number': true,
    'ambiguous-bore': true,
    'out-of-range': true,
    'unload-too-near-set': true,
    'bore-now-under-new': true,
    'curve-not-rising': true,
    'curve-air-rising': true,
    'drop-too-large': true,
    'loss-too-large': true,
  }),
  'nav.${page.name}': navigationPages.map(({ name }) => name),
  'pages.settings.unitNames.${value}': unitSystems,
  'pages.settings.languageNames.${theirs.language}': languages,
  'pages.settings.languageNames.${value}': languages,
  'pages.settings.themeNames.${value}': themes,
  'reasons.${code}': namesOf<CodeOf<Reason>>({
    'short-of-air': true,
    'above-unload': true,
    'air-taken-first': true,
    'no-nozzle': true,
    'bore-range': true,
    choked: true,
    regulator: true,
  }),
  'results.airUse.${key}': ['cannot', 'other'],
  'results.curve.${name}': ['new', 'now', 'more'],
  'results.hour.abrasives.${abrasive.id}': ABRASIVES.map(({ id }) => id),
  'results.hour.sources.${key}': [
    'freeAir',
    'fuelFullLoad',
    'fuelPartLoad',
    'media',
    'bag',
    'water',
    'drain',
  ],
  'results.hour.statuses.${status}': ['published', 'computed', 'memory', 'practice'],
  'ruler.limitedBy.${limitedBy}': namesOf<Exclude<OutletAnswer['limitedBy'], 'air' | null>>({
    line: true,
    regulator: true,
    'air-line': true,
  }),
  'verdicts.${check.answer.verdict}': verdicts,
  'verdicts.${verdict}': verdicts,
}

const areas = Object.keys(en).join('|')
const plainKey = new RegExp(`'((?:${areas})\\.[\\w.-]+)'`, 'g')
const templateKey = new RegExp(`\`((?:${areas})\\.[^\`]*)\``, 'g')

/** The variable part is one of our lists, or is chosen on the spot: `a.${b ? 'c' : 'd'}`. */
function expand(template: string): string[] | null {
  const [, before = '', variable = '', after = ''] = /^(.*?)\$\{(.*)\}(.*)$/.exec(template) ?? []
  const onTheSpot = /^[^']*\? '([\w-]+)' : '([\w-]+)'$/.exec(variable)?.slice(1)
  const names = expansions[template] ?? onTheSpot
  return names ? names.map((name) => before + name + after) : null
}

const plainKeys = sources.flatMap(({ text }) => [...text.matchAll(plainKey)].map(([, key]) => key!))
const templates = sources.flatMap(({ text }) => [...text.matchAll(templateKey)].map(([, key]) => key!))
const used = new Set([...plainKeys, ...templates.flatMap((template) => expand(template) ?? [])])

function placeholdersOf(text: string): string[] {
  return [...new Set([...text.matchAll(/\{(\w+)\}/g)].map(([, name]) => name!))].sort()
}

const formsOf = (text: string) => text.split(' | ').length

/** Names, titles of rules, and words that both languages write alike; figures without a word need no leave. */
const alikeInBoth = new Set([
  'accounts.audit.no',
  'app.name',
  'fields.nozzle.loadings.normal',
  'fields.nozzle.shapes.venturi',
  'pages.settings.languageNames.en',
  'pages.settings.languageNames.es',
])
const hasWords = (text: string) => /\p{L}/u.test(text.replace(/\{\w+\}/g, ''))

function rangesOf(list: string): [number, number][] {
  return list.split(',').map((range) => {
    const [from = '', to = from] = range.replace('U+', '').split('-')
    return [parseInt(from, 16), parseInt(to, 16)]
  })
}

/** The characters that the font's own package says its latin file holds. */
const latin = rangesOf(
  (createRequire(import.meta.url)('@fontsource/inter/unicode.json') as { latin: string }).latin,
)
const isInLatin = (character: string) =>
  latin.some(([from, to]) => character.codePointAt(0)! >= from && character.codePointAt(0)! <= to)

describe('the words', () => {
  test('English and Spanish say the same things', () => {
    expect([...spanish.keys()].sort()).toEqual([...english.keys()].sort())
  })

  test('every key the screens ask for exists', () => {
    expect(plainKeys.length).toBeGreaterThan(50)
    expect(templates.filter((template) => expand(template) === null)).toEqual([])
    expect([...used].filter((key) => !english.has(key))).toEqual([])
  })

  test('every key that exists is asked for', () => {
    expect([...english.keys()].filter((key) => !used.has(key))).toEqual([])
  })

  test('every list of names belongs to a key that is still written so', () => {
    expect(Object.keys(expansions).filter((template) => !templates.includes(template))).toEqual([])
  })

  test('both languages fill in the same figures', () => {
    const unlike = [...english].filter(
      ([key, text]) =>
        String(placeholdersOf(spanish.get(key) ?? '')) !== String(placeholdersOf(text)) ||
        formsOf(spanish.get(key) ?? '') !== formsOf(text),
    )
    expect(unlike.map(([key]) => key)).toEqual([])
  })

  test('no sentence is left in the other language', () => {
    const alike = [...english].filter(
      ([key, text]) => spanish.get(key) === text && hasWords(text) && !alikeInBoth.has(key),
    )
    expect(alike.map(([key, text]) => `${key}: ${text}`)).toEqual([])
    expect([...alikeInBoth].filter((key) => spanish.get(key) !== english.get(key))).toEqual([])
  })

  test('no word is empty', () => {
    const empty = [...english, ...spanish].filter(([, text]) => text.trim() === '')
    expect(empty.map(([key]) => key)).toEqual([])
  })

  test('every character is in the font that is shipped', () => {
    const cautions = Object.values(cautionSentences).flatMap((sentences) => Object.values(sentences))
    const texts = [...english.values(), ...spanish.values(), ...cautions]
    expect(isInLatin('é') && isInLatin('−') && !isInLatin('≤') && !isInLatin('Δ')).toBe(true)
    expect(texts.filter((text) => ![...text].every(isInLatin))).toEqual([])
  })
})
