export const common = {
  app: { name: 'Sixteenth' },
  nav: {
    label: 'Principal',
    check: 'Prueba',
    sources: 'Fuentes',
    settings: 'Ajustes',
    skip: 'Ir al resultado',
  },
  verdicts: {
    holds: 'Aguanta',
    'barely-holds': 'Apenas aguanta',
    'falls-short': 'No alcanza',
    'cannot-run': 'No puede trabajar',
  },
  elements: {
    'air-line': 'manguera de aire',
    pot: 'tolva',
    'blast-hose': 'manguera de chorro',
    whip: 'latiguillo',
    regulator: 'regulador',
  },
  reasons: {
    'short-of-air': 'La boquilla pide más aire del que da el compresor a la presión que hace falta.',
    'above-unload':
      'Haría falta en el compresor más presión que la de descarga: antes de llegar, se descarga.',
    'air-taken-first':
      'Las escafandras y herramientas se llevan todo el aire; a la boquilla no le queda nada.',
    choked: 'Por aquí no pasa tanto aire, es muy angosto: {element}.',
    regulator: 'El regulador de la salida {number} está muy bajo para esta presión.',
    'bore-range': 'Aguanta con cualquier paso hasta 60 mm (2 3/8 in).',
  },
  check: {
    title: 'Prueba de presión',
    atNozzle: 'en la boquilla',
    atLowestNozzle: 'en la boquilla más baja',
    outlet: 'Boquilla {number}',
    target: 'Se piden {target}.',
    gauge: 'En el manómetro de aguja debe ver cerca de {pressure}.',
    margin: '{margin} de margen de aire',
    needs: 'gasta {needed} de los {delivered} que da a {pressure}',
    needsFirst:
      'gasta {needed} de los {delivered} que da a {pressure}, con lo de respirar y las herramientas',
    noPressure: 'sin presión estable',
    stale: 'Es el último resultado completo; hay una casilla a medias.',
    brokenLink: 'Ese enlace no traía una prueba que se pudiera leer; esta empieza de cero.',
    share: 'Copiar enlace',
    shared: 'Enlace copiado',
    shareFailed: 'Copie la dirección de la barra de arriba',
    reset: 'Empezar de nuevo',
    guidance:
      'Es una guía, no un permiso: deciden los manuales de las máquinas, las normas del lugar y una persona competente.',
  },
  ruler: {
    label:
      'Regla del paso: nueva {newBore}, hoy {nowBore}, límite {limit}. En el paso límite este equipo llega justo a la presión pedida.',
    labelNoLimit:
      'Regla del paso: nueva {newBore}, hoy {nowBore}. Con ningún paso se llega a la presión pedida.',
    handle: 'Paso de hoy: arrástrelo o muévalo con las flechas',
    new: 'nueva',
    now: 'hoy',
    limit: 'límite',
    uncertainty: '±4 %',
    limitedBy: {
      line: 'Aquí el límite lo pone la manguera: no cuenta un paso más ancho que ella.',
      regulator: 'Aquí el límite lo pone el regulador.',
      'air-line': 'Aquí el límite lo pone la manguera de aire: más allá ya no deja pasar.',
    },
  },
  bits: {
    order: 'Broca de aviso',
    noGo: 'Broca de alto',
    orderText: 'Si la de {bit} pasa entera, pida la boquilla siguiente.',
    noGoText: 'Si la de {bit} pasa entera, no use más esta boquilla a {target}.',
    noWarning:
      'Una boquilla {nozzle} nueva ya deja pasar la última broca antes del límite: aquí ninguna avisa, pida ya la siguiente.',
    noHelp: 'No hay broca que valga: este compresor no aguanta {target} con una boquilla {nozzle} nueva.',
    fits: 'Con una {nozzle} sí.',
    noneFits: 'No aguanta con ninguna desde la No. 2.',
    none: 'Este juego no trae broca mayor que el paso límite.',
    noneShort: 'ninguna',
    set: 'Brocas de la caja',
    safetyTitle: 'Antes de meter una broca',
    sets: {
      'fractional-64': 'pulgadas, de 1/64 en 1/64',
      'fractional-32': 'pulgadas, de 1/32 en 1/32',
      'metric-0.5': 'métricas, de 0.5 en 0.5 mm',
      'metric-0.1': 'métricas, de 0.1 en 0.1 mm',
      'number-letter': 'de número y de letra',
    },
    safety:
      'Compresor apagado, manguera purgada, control de hombre muerto bloqueado, boquilla fuera de la manguera. La broca se gira a mano desde el lado de la rosca y nunca se fuerza; pasó cuando libra la parte angosta. Antes, enjuague y mire a través: una grieta retira la boquilla diga lo que diga la broca.',
  },
  cautions: { title: 'Cuidado', more: 'Y {count} más' },
  safety: {
    title: 'Antes de chorrear',
    air: 'El aire de respirar es Grado D y va antes que el de la boquilla: de {least} a {most} por escafandra holgada (42 CFR 84 Subpart J, Table 8).',
    hose: 'Que el control de hombre muerto funcione; cable de seguridad y pasador en cada acople; nada de dobleces.',
    sand: 'Nada de arena con sílice libre. Protección de oídos: una boquilla pasa de 115 dBA.',
    liner: 'Un forro quebradizo no aguanta caídas: no lo deje caer ni lo golpee para destaparlo.',
  },
}
