import type { CautionCode } from '../airflow/index.ts'

export type Language = 'en' | 'es'

/** One sentence a caution and language; {size} is its size in percent. */
export const cautionSentences: Record<Language, Record<CautionCode, string>> = {
  en: {
    'engine-short':
      'At this altitude the engine is short of about {size} % of the power this duty takes: ask for a turbocharged machine or the next class.',
    'barometer-against-altitude':
      'The barometer is {size} % off what this altitude gives. It must be the station’s own reading, not a weather report’s sea-level figure.',
    'air-only-reading-low':
      'With the media shut off the same nozzle draws about {size} % more air, so an air-only gauge reading is low. Read the needle gauge while blasting.',
    'target-above-set-pressure':
      'The target is reached only above the set pressure, where the machine has closed by {size} %: there is little behind it.',
    'low-compressor-pressure':
      'The compressor works {size} % below about 4 bar (58 psi), where a screw machine carries oil over and its safety devices may act.',
    'hose-under-twice-bore':
      'The last hose is under twice the bore of the nozzle: its gauge reads up to {size} % off what the nozzle sees. Use a wider whip.',
    'hose-under-three-times-bore':
      'The last hose is under three times the bore of the nozzle, less than common practice asks; the gauge is within {size} % of what the nozzle sees.',
    'humid-bare-compressor':
      'Hot, humid air from a bare compressor carries its water to the nozzle: the true pressure is about {size} % above this, and the media may clump.',
    'nozzle-below-critical':
      'The nozzle works {size} % under the pressure at which its throat turns sonic: a venturi passes more air there than is computed.',
  },
  es: {
    'engine-short':
      'A esta altitud al motor le falta cerca de {size} % de la potencia que pide el trabajo: pida una máquina con turbo o el tamaño siguiente.',
    'barometer-against-altitude':
      'El barómetro se aparta {size} % de lo que toca a esta altitud. Tiene que ser la lectura en la obra, no la del parte del tiempo, que viene llevada al nivel del mar.',
    'air-only-reading-low':
      'Con el abrasivo cerrado la misma boquilla gasta cerca de {size} % más aire y el manómetro marca de menos. Lea el manómetro de aguja mientras chorrea.',
    'target-above-set-pressure':
      'A la presión pedida solo se llega pasando la de ajuste, con la máquina ya cerrada {size} %: detrás queda muy poco aire.',
    'low-compressor-pressure':
      'El compresor trabaja {size} % por debajo de unos 4 bar (58 psi): ahí uno de tornillo arrastra aceite y pueden saltar sus protecciones.',
    'hose-under-twice-bore':
      'La última manguera no llega al doble del paso de la boquilla: el manómetro se aparta hasta {size} % de lo que ve la boquilla. Ponga un latiguillo más ancho.',
    'hose-under-three-times-bore':
      'La última manguera no llega al triple del paso de la boquilla, menos de lo acostumbrado; el manómetro queda a {size} % de lo que ve la boquilla.',
    'humid-bare-compressor':
      'Con aire caliente y húmedo, un compresor sin posenfriador lleva el agua hasta la boquilla: la presión real es cerca de {size} % mayor y el abrasivo puede apelmazarse.',
    'nozzle-below-critical':
      'La boquilla trabaja {size} % por debajo de la presión con la que el aire llega a la velocidad del sonido: ahí una venturi deja pasar más aire del que se calcula.',
  },
}

/** The sentence of a caution with its size put in: whole percents, tenths below 10. */
export function sentenceOfCaution(code: CautionCode, sizePct: number, language: Language): string {
  return cautionSentences[language][code].replace('{size}', formatSize(sizePct))
}

export function formatSize(sizePct: number): string {
  return sizePct >= 9.95 ? sizePct.toFixed(0) : sizePct.toFixed(1).replace(/\.0$/, '')
}
