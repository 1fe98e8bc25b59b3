export const pages = {
  settings: {
    title: 'Ajustes',
    remembered: 'Se recuerda en este aparato.',
    units: 'Unidades',
    unitNames: { us: 'EE. UU.: psi, cfm, pulgadas', metric: 'Métricas: bar, m³/min, mm' },
    language: 'Idioma',
    languageNames: { en: 'English', es: 'Español' },
    theme: 'Pantalla',
    themeNames: { light: 'Clara', dark: 'Oscura', sun: 'Sol' },
    themeHints: { sun: 'El mayor contraste, para el resplandor.' },
  },
  sources: {
    title: 'De dónde salen las cifras',
    lead: 'Todo se calcula en este aparato con lo que hay en las casillas. Aquí se dice cómo, con qué fuentes y hasta dónde fiarse.',
    model: {
      title: 'Qué se calcula',
      steps: {
        site: 'El aire de la obra',
        nozzle: 'La boquilla',
        line: 'Mangueras, acoples y tolva',
        compressor: 'El compresor',
        point: 'Dónde se equilibran',
        limit: 'El paso límite',
      },
      texts: {
        site: 'Su presión sale de la altitud, por la atmósfera estándar. El aire libre se mide a la presión, el calor y la humedad de la obra, no en condiciones “estándar”.',
        nozzle:
          'De unos {critical} para arriba, al nivel del mar, el aire llega a la velocidad del sonido en la garganta. De ahí en adelante el caudal va con el área del paso y con la presión absoluta que tiene delante, por un coeficiente de descarga: 0.97 con puro aire, y menos cuanto más abrasivo lleva.',
        line: 'Cada pieza se queda con su parte de la presión, por el roce a lo largo y por sus propias pérdidas, con un aire que se va expandiendo. Si por una manguera no cabe el aire se dice que se ahoga, y no se inventa ninguna cifra.',
        compressor:
          'Da su aire libre, como masa en esta obra, hasta la presión de ajuste; de ahí baja en línea recta hasta nada en la de descarga. Las escafandras y herramientas toman lo suyo primero.',
        point:
          'La presión en la boquilla es aquella a la que se gasta justo lo que llega. El margen de aire es lo que sobraría a la presión pedida, como parte de lo que el compresor da a plena carga.',
        limit: 'El paso más grande con el que el equipo todavía llega a lo pedido, con lo demás como está.',
      },
    },
    checked: {
      title: 'Con qué se comparó',
      columns: { what: 'Qué', source: 'Publicado en', residual: 'Qué tan cerca' },
      rows: {
        atmosphere: {
          what: 'Presión del aire según la altitud',
          source: 'ISO 2533, atmósfera estándar',
          residual: 'es la fórmula de la norma',
        },
        orifice: {
          what: 'Paso de un gas perfecto a la velocidad del sonido',
          source:
            'tabla de orificios del manual clásico de aire comprimido, según S. A. Moss, American Machinist, 1906',
          residual: 'a menos de 0.4 %, más el redondeo de la tabla',
        },
        serviceNozzle: {
          what: 'Boquilla trabajando: {bore} a {pressure}, {air}',
          more: 'cerca de 4 % por encima de lo publicado',
          less: 'cerca de 4 % por debajo de lo publicado',
        },
        cleanAir: {
          what: 'Coeficiente con puro aire, 0.97',
          source: 'ISO 9300, toberas venturi de flujo crítico',
          residual: 'cerca de 2 % por debajo de una tobera de precisión',
        },
        friction: {
          what: 'Roce en la manguera',
          residual: 'es la misma ecuación; una recta donde el flujo no es ni laminar ni turbulento',
        },
        viscosity: {
          what: 'Viscosidad del aire',
          source: 'ley de Sutherland',
          residual: 'a menos de 2 %',
        },
        vapour: {
          what: 'Vapor de agua en el aire',
          source: 'O. A. Alduchov y R. E. Eskridge, 1996, forma de Magnus',
          residual: 'a menos de 0.4 % de {low} a {high}',
        },
      },
    },
    uncertainty: {
      title: 'Hasta dónde fiarse',
      limit:
        'El paso límite: ±4 % en 19 de cada 20 casos, por un coeficiente que se conoce a 3 % y un aire libre que se conoce a 2.5 % (una desviación estándar cada uno). En una No. 6 son {size} para cada lado.',
      margin:
        'Con un margen de aire de 0 a 5 % se dice que apenas aguanta: ni los manómetros ni las placas dan para más.',
      weather: 'El tiempo mueve la presión del aire de una obra cerca de 2 % para cada lado.',
      coefficient:
        'El coeficiente de trabajo se puso a medio camino entre los dos puntos oficiales, 0.780 y 0.844. Los de poco y mucho abrasivo están ajustados, no medidos.',
    },
    defaults: {
      title: 'Lo que ya viene puesto',
      note: 'Todo se puede cambiar. Lo que sale de memoria o de la costumbre no es cifra publicada: mídalo donde importe.',
      columns: { what: 'Qué', value: 'Se toma', status: 'De dónde' },
      rows: {
        nozzleNumber: 'El número de boquilla es el paso en dieciseisavos de pulgada',
        classes: 'Tamaños de compresor',
        unload: 'Descarga por encima del ajuste',
        aftercooled: 'Aire de la línea sobre el de la obra, con posenfriador',
        bare: 'Aire de la línea sobre el de la obra, sin posenfriador',
        coefficient: 'Coeficiente de descarga, abrasivo: {loading}',
        straight: 'Boquilla recta, frente a una venturi',
        coupling: 'Pérdida de un acople',
        pot: 'Pérdida de una tolva con tubería de {bore}',
        mediaFactor: 'Roce de la manguera que lleva abrasivo',
        roughness: 'Rugosidad de la manguera',
        hood: 'Aire de una escafandra holgada',
        bits: 'Brocas de número y de letra',
        fuel: 'Combustible a plena carga, {air} a {pressure}',
        idle: 'Combustible en vacío, frente a plena carga',
        media: 'Arena sílica por una No. 6 a {pressure}, base para todo abrasivo',
        density: 'Densidad a granel de un abrasivo, como el vidrio molido',
        bag: 'Un saco de abrasivo',
        water: 'Agua de un anillo de chorreo húmedo',
        tank: 'Su tanque',
        engine: 'Potencia que pierde un motor con la altitud',
      },
      values: {
        classes: '{least} a {most}, a {low}, {middle} o {high}',
        range: '{least} a {most}',
        hood: '{least} a {most}; viene puesto {most}',
        engine: '1 % cada {step} por encima de {natural} (sin turbo) o {turbo} (con turbo)',
      },
      basis: {
        coefficient: 'ajustado según la masa de abrasivo en el aire',
        normal: 'a medio camino entre los dos puntos oficiales',
        clean: 'manual de aire comprimido, entrada bien redondeada',
        straight: 'modelo de aire',
        bits: 'medidas como en ASME B94.11M',
        fuel: '6.4 a 7.8 kW por m³/min; diésel, 223 o 248 g/kWh (NR-009d)',
        media: 'manuales de permisos de los distritos de aire de California',
        density: 'intervalos de manual',
        engine: 'práctica de la MSHA de EE. UU., de segunda mano',
      },
    },
    statuses: {
      published: 'publicado',
      computed: 'calculado',
      memory: 'de memoria',
      practice: 'costumbre del oficio, sin fuente',
    },
    left: {
      title: 'Lo que no entra',
      wear: 'El desgaste con las horas y lo que cuesta: viene después.',
      steady: 'El tiempo: se calcula el trabajo ya estable, no los primeros segundos tras abrir.',
      bends: 'Curvas, dobleces y manguera que quedó enrollada.',
      metering: 'La válvula de abrasivo: cuánto lleva el aire se elige entre cuatro opciones.',
      water: 'El agua en la línea: se da por salida toda antes de la boquilla.',
      venturi:
        'Una venturi con menos de unos {critical} en la boquilla, al nivel del mar: pasa más aire del que se calcula.',
      heat: 'El aire que se enfría por la manguera: la línea tiene una sola temperatura.',
    },
    safety: {
      title: 'Cifras de seguridad y su norma',
      note: 'Deciden los manuales de las máquinas, las normas del lugar y una persona competente. Las de aquí son de Estados Unidos.',
      columns: { what: 'Qué', figure: 'Cifra', rule: 'Norma', status: 'Estado' },
      inWords: 'sin cifra',
      rules: {
        'grade-d-oxygen': 'Aire de respirar Grado D: oxígeno',
        'grade-d-oil-mist': 'Grado D: neblina de aceite',
        'grade-d-carbon-monoxide': 'Grado D: monóxido de carbono',
        'grade-d-carbon-dioxide': 'Grado D: dióxido de carbono',
        'grade-d-odour': 'Grado D: sin olor que se note',
        'air-quality': 'Aire a un respirador con suministro: Grado D o mejor',
        'cylinder-dew-point': 'Aire de cilindro: punto de rocío',
        'compressor-dew-point':
          'Compresor de aire de respirar: punto de rocío por debajo del aire de alrededor',
        'compressor-intake-and-filters':
          'Compresor de aire de respirar: toma limpia, filtros y etiqueta con fecha',
        'carbon-monoxide-oil-free': 'Compresor sin aceite: monóxido de carbono',
        'oil-lubricated-alarm':
          'Compresor con aceite: alarma de temperatura, de monóxido de carbono o las dos; monóxido de carbono',
        'hood-flow-loose-fitting': 'Aire a una escafandra holgada',
        'hood-flow-tight-fitting': 'Aire a una careta ajustada',
        'hood-flow-most': 'Aire a una escafandra, cuando mucho',
        'breathing-hose-length': 'Manguera de aire de respirar, en tramos de 25 ft (7.6 m)',
        'dead-man-control': 'Hombre muerto: solo se chorrea mientras la mano sostiene abierta la válvula',
        'approved-respirator': 'Solo respiradores de chorreo aprobados',
        'respirator-mandatory':
          'Respirador de chorreo obligatorio: en cuartos de chorreo, con arena sílica a cielo abierto, con polvo tóxico sobre su límite',
        'silica-limit': 'Sílice cristalina respirable, límite',
        'silica-action-level': 'Sílice cristalina respirable, nivel de acción',
        'noise-ear-protection': 'Protección de oídos',
        'noise-double-protection': 'Doble protección de oídos',
        'noise-blast-nozzle': 'Ruido de una boquilla',
        'noise-limit': 'Ruido, límite',
        'excess-flow-device':
          'Manguera de más de este diámetro interior: un dispositivo en la toma que corta la presión si la manguera falla',
      },
    },
  },
  notFound: { title: 'Aquí no hay nada', text: 'Esta página no existe.', back: 'A la prueba de presión' },
}
