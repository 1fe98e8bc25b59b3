import type { AbrasiveId } from '../catalogue/media.ts'
import type { BitSetName } from '../contracts/check.ts'
import { maxDraws } from '../contracts/limits.ts'
import type { UnitSystem } from '../units/quantities.ts'

/** What a person typed, and under which units: shown back as typed, never converted in place. */
export interface TypedText {
  text: string
  system: UnitSystem
}

export type Cooling = 'aftercooled' | 'bare'
export type EngineChoice = 'unknown' | 'natural' | 'turbo'
export type MediaLoading = 'clean' | 'lean' | 'normal' | 'heavy-or-wet'
export type NozzleShape = 'venturi' | 'straight'
export type BitChoice = BitSetName

/** with the tools beside them no more than a check takes */
export const mostHoods = maxDraws - 1

export interface CurvePointForm {
  pressure: TypedText
  freeAir: TypedText
}

export interface CompressorForm {
  freeAir: TypedText
  setPressure: TypedText
  cooling: Cooling
  engine: EngineChoice
  /** blank: set + 20 psi */
  unload: TypedText
  /** percent of its nameplate; blank: 100 */
  condition: TypedText
  /** with points the nameplate is not used */
  curve: CurvePointForm[]
}

export interface HoseForm {
  isUsed: boolean
  bore: TypedText
  length: TypedText
  couplings: number
  /** "5 psi at 185 cfm" takes the place of length and couplings where both are given */
  measuredDrop: TypedText
  measuredFlow: TypedText
  /** blank: 0.01 mm */
  roughness: TypedText
}

export interface PotForm {
  isUsed: boolean
  bore: TypedText
  /** blank: 8 on the pot's own piping */
  lossK: TypedText
  /** one pot feeds every outlet */
  isShared: boolean
}

export interface OutletForm {
  /** blank: none */
  regulator: TypedText
  hose: HoseForm
  whip: HoseForm
  newBore: TypedText
  /** blank: as new */
  boreNow: TypedText
  loading: MediaLoading
  shape: NozzleShape
  /** blank: from loading and shape */
  coefficient: TypedText
}

/** What an hour uses; every blank is filled with a default that says where it comes from. */
export interface HourForm {
  abrasive: AbrasiveId
  mediaRate: TypedText
  bagMass: TypedText
  fullLoadFuel: TypedText
  isWet: boolean
  waterRate: TypedText
  tank: TypedText
}

export interface CheckForm {
  compressor: CompressorForm
  airLine: HoseForm
  pot: PotForm
  outlets: OutletForm[]
  hoods: { count: number; flowEach: TypedText }
  tools: { flow: TypedText }
  site: { altitude: TypedText; airTemperature: TypedText; humidity: TypedText }
  target: TypedText
  bitSet: BitChoice
  hour: HourForm
}

const us = (text: string): TypedText => ({ text, system: 'us' })

export function createHose(bore: string, length: string, couplings: number, isUsed = true): HoseForm {
  return {
    isUsed,
    bore: us(bore),
    length: us(length),
    couplings,
    measuredDrop: us(''),
    measuredFlow: us(''),
    roughness: us(''),
  }
}

export function createOutlet(): OutletForm {
  return {
    regulator: us(''),
    hose: createHose('1 1/4 in', '50 ft', 2),
    whip: createHose('1 in', '10 ft', 1),
    newBore: us('No. 7'),
    boreNow: us('29/64'),
    loading: 'normal',
    shape: 'venturi',
    coefficient: us(''),
  }
}

/** The rig a visitor finds: a common one, so that the first verdict is a real one. */
export function createCheckForm(): CheckForm {
  return {
    compressor: {
      freeAir: us('375 cfm'),
      setPressure: us('125 psi'),
      cooling: 'aftercooled',
      engine: 'unknown',
      unload: us(''),
      condition: us(''),
      curve: [],
    },
    airLine: createHose('1 1/2 in', '25 ft', 2),
    pot: { isUsed: true, bore: us('1 1/4 in'), lossK: us(''), isShared: true },
    outlets: [createOutlet()],
    hoods: { count: 1, flowEach: us('15 cfm') },
    tools: { flow: us('') },
    site: { altitude: us('1,000 ft'), airTemperature: us('80 °F'), humidity: us('50 %') },
    target: us('100 psi'),
    bitSet: 'fractional-64',
    hour: {
      abrasive: 'crushed-glass',
      mediaRate: us(''),
      bagMass: us(''),
      fullLoadFuel: us(''),
      isWet: false,
      waterRate: us(''),
      tank: us(''),
    },
  }
}
