import { readFileSync } from 'node:fs'
import { makeFieldProblem } from '../problems.ts'

/** As they are typed, hand over hand or along a row: whoever guesses passwords tries these before anything else. */
const walks = [
  'abcdefghijklmnopqrstuvwxyz',
  '01234567890123456789',
  'qwertyuiop[]',
  'asdfghjkl;',
  'zxcvbnm,./',
  'qwertzuiop',
  'yxcvbnm',
  'azertyuiop',
  'qsdfghjklm',
  'wxcvbn',
  'asdfghjklñ',
  '!@#$%^&*()_+',
  '!"#$%&/()=',
  '1q2w3e4r5t6y7u8i9o0p',
  'q1w2e3r4t5y6u7i8o9p0',
  '1qaz2wsx3edc4rfv5tgb6yhn7ujm8ik,9ol.',
  'qazwsxedcrfvtgbyhnujmikolp',
  'zaq12wsxcde34rfvbgt5',
  'zaqxswcdevfrbgtnhymju',
  'a1b2c3d4e5f6g7h8i9j0',
  '1a2b3c4d5e6f7g8h9i0j',
  '1a2s3d4f5g6h7j8k9l',
  'asdfqwerzxcv',
  '147258369',
  '159357',
  '741852963',
]
const shortestWalk = 3
const bothWays = walks.flatMap((walk) => [walk, [...walk].reverse().join('')])

/** What is typed for a letter to please a rule on digits and signs. */
const disguises = [
  {
    0: 'o',
    1: 'l',
    3: 'e',
    4: 'a',
    5: 's',
    6: 'g',
    7: 't',
    8: 'b',
    9: 'g',
    '@': 'a',
    $: 's',
    '!': 'i',
    '+': 't',
  },
  { 0: 'o', 1: 'i', 2: 'z', 3: 'e', 4: 'a', 5: 's', 7: 't', '@': 'a', $: 's', '!': 'l', '|': 'l', '(': 'c' },
] as Record<string, string>[]

const shortestWord = 4
const shortestBareWord = 6
/** What may stand beside the known parts of a password and leave it as easy to guess; a letter counts twice. */
const mostBeside = 6

/** One unit of text for one character, so that places in all readings agree: a picture becomes a private character. */
function toUnit(character: string): string {
  const point = character.codePointAt(0) ?? 0
  return point > 0xffff
    ? String.fromCharCode(0xe000 + (point % 0x1000))
    : character.normalize('NFD').charAt(0)
}

/** Small letters without accents. */
function simplify(text: string): string[] {
  return [...text.normalize('NFKC').toLowerCase()].map(toUnit)
}

function toWord(text: string): string {
  return simplify(text)
    .filter((character) => /[\p{L}\p{N}]/u.test(character))
    .join('')
}

/** Each listed password, and what it is without its digits, to which other digits may be put. */
function readList(): ReadonlySet<string> {
  const text = readFileSync(new URL('./commonPasswords.txt', import.meta.url), 'utf8')
  const words = text
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'))
    .map(toWord)
  const bare = words
    .map((word) => word.replace(/^\P{L}+|\P{L}+$/gu, ''))
    .filter((word) => word.length >= shortestBareWord)
  return new Set([...words, ...bare])
}

let list: ReadonlySet<string> | undefined

/** The words that somebody's own name, address or company would add to anybody's list: whole, and each part. */
function wordsOf(texts: readonly string[]): string[] {
  return texts
    .flatMap((text) => [text, ...text.split(/[^\p{L}\p{N}]+/u)])
    .map(toWord)
    .filter((word) => word.length >= shortestWord)
}

/** Marks every place where one of the words stands in one of the readings. */
function markWords(readings: readonly string[], words: Iterable<string>, marks: boolean[]): void {
  for (const word of words) {
    for (const reading of readings) {
      for (let at = reading.indexOf(word); at >= 0; at = reading.indexOf(word, at + 1)) {
        marks.fill(true, at, at + word.length)
      }
    }
  }
}

/** Marks what goes on by itself: a run along a keyboard or an alphabet, one character again and again, a year. */
function markRuns(text: string, marks: boolean[]): void {
  for (let start = 0; start < text.length; start += 1) {
    let end = start + shortestWalk
    while (end <= text.length && bothWays.some((walk) => walk.includes(text.slice(start, end)))) end += 1
    if (end - 1 - start >= shortestWalk) marks.fill(true, start, end - 1)
  }
  for (const { index, 0: run } of text.matchAll(/(.)\1{2,}|(?:19|20)\d\d/gsu)) {
    marks.fill(true, index, index + run.length)
  }
}

function isLeftEasy(characters: readonly string[], marks: readonly boolean[]): boolean {
  const beside = characters.filter((_character, index) => !marks[index])
  const weight = beside.reduce((sum, character) => sum + (/\p{L}/u.test(character) ? 2 : 1), 0)
  return weight <= mostBeside && beside.length < characters.length
}

function isRepeated(text: string): boolean {
  const unit = text.indexOf(text.charAt(0), 1) < 0 ? text.length : `${text}${text}`.indexOf(text, 1)
  return unit <= 6 && unit < text.length
}

/** Every word of the list that stands somewhere in the text, read in any of these ways. */
function findListed(readings: readonly string[]): Set<string> {
  list ??= readList()
  const found = new Set<string>()
  for (const reading of readings) {
    for (let start = 0; start <= reading.length - shortestWord; start += 1) {
      for (let end = start + shortestWord; end <= reading.length; end += 1) {
        const part = reading.slice(start, end)
        if (list.has(part)) found.add(part)
      }
    }
  }
  return found
}

function isEasy(characters: readonly string[], ownTexts: readonly string[]): boolean {
  const text = characters.join('')
  if (new Set(characters).size <= 3 || isRepeated(text)) return true
  const readings = [
    text,
    ...disguises.map((disguise) => characters.map((character) => disguise[character] ?? character).join('')),
  ]
  const known = characters.map(() => false)
  markWords(readings, wordsOf(['sixteenth', ...ownTexts]), known)
  markRuns(text, known)
  if (isLeftEasy(characters, known)) return true
  return [...findListed(readings)].some((word) => {
    const marks = [...known]
    markWords(readings, [word], marks)
    return isLeftEasy(characters, marks)
  })
}

/**
 * Whether a password is one that would be guessed early: a listed one however it is dressed up, one made of the
 * person's own words, or one that only goes along the keyboard. Random ones and phrases pass.
 */
export function isCommonPassword(password: string, ownTexts: readonly string[] = []): boolean {
  const characters = simplify(password)
  const joined = characters.filter((character) => /[\p{L}\p{N}]/u.test(character))
  return isEasy(characters, ownTexts) || (joined.length > characters.length / 2 && isEasy(joined, ownTexts))
}

export function refuseCommonPassword(password: string, ownTexts: readonly string[]): void {
  if (!isCommonPassword(password, ownTexts)) return
  throw makeFieldProblem(
    '/password',
    'too-common',
    'This password would be guessed soon: it is a common one, or made of your own words.',
  )
}
