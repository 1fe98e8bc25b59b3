import type { Range } from '#shared/contracts/limits.ts'
import type { FieldError } from '#shared/contracts/problems.ts'
import { findUnit, fromBase, parseQuantity, snapBoreMm } from '#shared/units/index.ts'
import type { ParseProblem, QuantityKind, Unit } from '#shared/units/index.ts'
import { readCsvText } from '../csv.ts'

export type Reading = { ok: true; value: unknown } | ({ ok: false } & Pick<FieldError, 'code' | 'message'>)

/** How one kind of cell is read and written. */
export interface Cell {
  /** the endings a heading may have, each with the unit that a bare number in the column then has */
  units: Record<string, string>
  read(text: string, unit: string | null): Reading
  /** as it stands under the heading with the first of the units */
  write(value: unknown): string | number | null
  /** for the readme */
  description: string
}

const refuse = (code: FieldError['code'], message: string): Reading => ({ ok: false, code, message })
const accept = (value: unknown): Reading => ({ ok: true, value })

const unitEndings = {
  volumeFlow: { m3_min: 'm³/min', cfm: 'cfm', m3_h: 'm³/h', l_s: 'L/s' },
  pressure: { kpa: 'kPa', psi: 'psi', bar: 'bar' },
  length: { m: 'm', ft: 'ft' },
  diameter: { mm: 'mm', in: 'in' },
  bore: { mm: 'mm', in: 'in', number: 'No.' },
  fuelRate: { l_h: 'L/h', gal_h: 'gal/h' },
  massFlow: { kg_h: 'kg/h', lb_h: 'lb/h' },
  mass: { kg: 'kg', lb: 'lb' },
  waterRate: { l_min: 'L/min', gal_min: 'gal/min' },
  volume: { l: 'L', gal: 'gal' },
} as const satisfies Partial<Record<QuantityKind, Record<string, string>>>

type Measured = keyof typeof unitEndings

const hasUnit = /[\p{L}#"'°º%″′]/u
const quote = (text: string) => `“${text.length > 40 ? `${text.slice(0, 40)}…` : text}”`

function explain(text: string, problem: ParseProblem, unit: Unit): Reading {
  const shown = (value: number) => `${Number(fromBase(unit, value).toPrecision(6))} ${unit.symbol}`
  switch (problem.problem) {
    case 'out-of-range': {
      const { min, max, value } = problem.detail
      const message = `${quote(text)} is outside of what is possible, ${shown(min)} to ${shown(max)}.`
      return refuse(value < min ? 'too-small' : 'too-big', message)
    }
    case 'ambiguous-number':
    case 'ambiguous-bore': {
      const readings = problem.detail.readings.map((reading) => reading.text).join(' or ')
      return refuse('invalid', `${quote(text)} can be read two ways: write ${readings}.`)
    }
    case 'too-long':
      return refuse('too-long', `${quote(text)} is too long for a quantity.`)
    default:
      return refuse('not-a-number', `${quote(text)} is not a number with a unit that belongs here.`)
  }
}

/** A quantity in the trade's words; a bare number has the unit of the heading. */
export function quantityCell(kind: Measured, range: Range): Cell {
  const units: Record<string, string> = unitEndings[kind]
  const [base = ''] = Object.values(units)
  return {
    units,
    description: `a quantity, ${base} unless the cell says its unit`,
    read(text, unit) {
      const isBare = !hasUnit.test(text)
      if (isBare && unit === null && kind !== 'bore') {
        return refuse('not-a-number', `${quote(text)} has no unit: write it, or name it in the heading.`)
      }
      const typed = !isBare || unit === null ? text : unit === 'No.' ? `No. ${text}` : `${text} ${unit}`
      const headed = findUnit(kind, unit ?? base) ?? findUnit(kind, base)
      const read = parseQuantity(kind, typed, { system: 'us', range })
      if (!read.ok) return explain(text, read, headed as Unit)
      return accept(kind === 'bore' ? snapBoreMm(read.value) : read.value)
    },
    write: (value) => value as number | null,
  }
}

/** A number without a unit; a percent is a hundredth. */
export const numberCell: Cell = {
  units: {},
  description: 'a plain number',
  read(text) {
    const isPercent = text.endsWith('%')
    const read = parseQuantity('number', isPercent ? text.slice(0, -1).trimEnd() : text, { system: 'us' })
    if (!read.ok) return refuse('not-a-number', `${quote(text)} is not a plain number.`)
    return accept(isPercent ? read.value / 100 : read.value)
  },
  write: (value) => value as number | null,
}

export const textCell: Cell = {
  units: {},
  description: 'text',
  read: (text) => accept(readCsvText(text)),
  write: (value) => value as string | null,
}

export const dateCell: Cell = { ...textCell, description: 'a date such as 2026-05-03' }

const spokenAnswers: Record<string, boolean> = {
  yes: true,
  y: true,
  true: true,
  1: true,
  sí: true,
  si: true,
  no: false,
  n: false,
  false: false,
  0: false,
}

export const yesNoCell: Cell = {
  units: {},
  description: 'yes or no',
  read(text) {
    const answer = spokenAnswers[text.toLowerCase()]
    return answer === undefined ? refuse('not-a-choice', `${quote(text)} is not yes or no.`) : accept(answer)
  },
  write: (value) => (value === true ? 'yes' : value === false ? 'no' : null),
}

export function choiceCell(choices: readonly string[]): Cell {
  return {
    units: {},
    description: `one of ${choices.join(', ')}`,
    read(text) {
      const chosen = choices.find((choice) => choice === text.toLowerCase().replace(/[\s_]+/g, '-'))
      return chosen === undefined
        ? refuse('not-a-choice', `${quote(text)} is not one of: ${choices.join(', ')}.`)
        : accept(chosen)
    },
    write: (value) => value as string | null,
  }
}

interface CurvePoint {
  pressureKpa: number
  freeAirM3Min: number
}

/** Points as `690 kPa @ 10.6 m3/min | 860 kPa @ 10.2 m3/min`. */
export const curveCell: Cell = {
  units: {},
  description: 'points of pressure @ free air with a bar between: 100 psi @ 375 cfm | 125 psi @ 360 cfm',
  read(text) {
    const points: CurvePoint[] = []
    for (const part of text.split('|')) {
      const [pressure, freeAir, ...rest] = part.split('@').map((side) => side.trim())
      const atPressure = parseQuantity('pressure', pressure ?? '', { system: 'us' })
      const delivered = parseQuantity('volumeFlow', freeAir ?? '', { system: 'us' })
      const hasUnits = hasUnit.test(pressure ?? '') && hasUnit.test(freeAir ?? '')
      if (!atPressure.ok || !delivered.ok || !hasUnits || rest.length > 0) {
        return refuse('invalid', `${quote(part.trim())} is not a point such as 100 psi @ 375 cfm.`)
      }
      points.push({ pressureKpa: atPressure.value, freeAirM3Min: delivered.value })
    }
    return accept(points)
  },
  write: (value) =>
    (value as CurvePoint[])
      .map(({ pressureKpa, freeAirM3Min }) => `${pressureKpa} kPa @ ${freeAirM3Min} m3/min`)
      .join(' | '),
}
