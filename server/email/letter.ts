import type { Mail } from './queueMail.ts'

export type Language = 'en' | 'es'

/** What a mail says, before it is set as text and as HTML. */
export interface Letter {
  subject: string
  paragraphs: string[]
  action: { label: string; link: string }
  /** under the button: what else can be done, what happens if nothing is done */
  notes: string[]
}

const colours = {
  ground: '#f3f0e9',
  card: '#fbfaf6',
  ink: '#1b2125',
  muted: '#566068',
  line: '#d6d0c4',
  link: '#1f4e6b',
}

const words = {
  en: {
    tagline: 'Air and nozzles for blasters',
    pasteLink: 'If the button does nothing, open this address:',
  },
  es: {
    tagline: 'Aire y boquillas para quien trabaja con chorro abrasivo',
    pasteLink: 'Si el botón no responde, abra esta dirección:',
  },
}

const entities: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
}

export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => entities[character] ?? '')
}

function setAsText({ paragraphs, action, notes }: Letter, language: Language): string {
  const { tagline } = words[language]
  return [...paragraphs, `${action.label}:\n${action.link}`, ...notes, `-- \nSixteenth\n${tagline}`].join(
    '\n\n',
  )
}

function setAsHtml({ subject, paragraphs, action, notes }: Letter, language: Language): string {
  const { tagline, pasteLink } = words[language]
  const paragraph = (style: string) => (text: string) =>
    `<p style="margin:0 0 16px;${style}">${escapeHtml(text)}</p>`
  const small = `font-size:14px;line-height:20px;color:${colours.muted}`
  const link = escapeHtml(action.link)
  return [
    `<!doctype html><html lang="${language}"><head><meta charset="utf-8">`,
    '<meta name="viewport" content="width=device-width"><meta name="color-scheme" content="light">',
    `<title>${escapeHtml(subject)}</title></head>`,
    `<body style="margin:0;padding:0;background:${colours.ground}">`,
    `<table role="presentation" width="100%" cellspacing="0" cellpadding="0" style="background:${colours.ground}">`,
    '<tr><td align="center" style="padding:24px 12px">',
    '<table role="presentation" width="100%" cellspacing="0" cellpadding="0" ',
    `style="max-width:520px;background:${colours.card};border:1px solid ${colours.line};border-radius:12px">`,
    '<tr><td style="padding:28px 24px;font-family:Inter,-apple-system,Segoe UI,Roboto,Helvetica,Arial,sans-serif;',
    `font-size:17px;line-height:26px;color:${colours.ink}">`,
    `<h1 style="margin:0 0 16px;font-size:22px;line-height:28px;font-weight:700">${escapeHtml(subject)}</h1>`,
    ...paragraphs.map(paragraph('')),
    `<p style="margin:8px 0 24px"><a href="${link}" style="display:inline-block;padding:13px 22px;`,
    `border-radius:10px;background:${colours.ink};color:${colours.card};font-weight:600;text-decoration:none">`,
    `${escapeHtml(action.label)}</a></p>`,
    ...notes.map(paragraph(small)),
    `<p style="margin:0;${small}">${escapeHtml(pasteLink)}<br>`,
    `<a href="${link}" style="color:${colours.link};word-break:break-all">${link}</a></p>`,
    '</td></tr></table>',
    `<p style="margin:16px 0 0;font-family:Inter,Helvetica,Arial,sans-serif;${small}">Sixteenth · ${tagline}</p>`,
    '</td></tr></table></body></html>',
  ].join('')
}

/** A letter as mail programs read it: as text, and as HTML that fetches nothing. */
export function setLetter(to: string, language: Language, letter: Letter): Mail {
  return {
    to,
    subject: letter.subject,
    text: setAsText(letter, language),
    html: setAsHtml(letter, language),
  }
}
