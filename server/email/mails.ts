import { setLetter } from './letter.ts'
import type { Language, Letter } from './letter.ts'
import type { Mail } from './queueMail.ts'

interface MailValues {
  confirmSignUp: { name: string; companyName: string; link: string }
  /** to somebody who signs up with an address that has an account already */
  alreadyHasAccount: { name: string; signInLink: string; forgottenLink: string }
  resetPassword: { name: string; link: string }
  /** to an address without an account whose password somebody wants back */
  noAccount: { signUpLink: string }
  passwordChanged: { name: string; forgottenLink: string }
  invitation: { companyName: string; invitedBy: string; link: string; expiresAt: string }
}

type Writers = { [Kind in keyof MailValues]: (values: MailValues[Kind]) => Letter }

/** What each mail says, ready to be laid in the queue. */
export type MailWriter = {
  [Kind in keyof MailValues]: (to: string, language: Language, values: MailValues[Kind]) => Mail
}

function formatInstant(instant: string, locale: string): string {
  return new Intl.DateTimeFormat(locale, {
    dateStyle: 'long',
    timeStyle: 'short',
    timeZone: 'UTC',
  }).format(new Date(instant))
}

const english: Writers = {
  confirmSignUp: ({ name, companyName, link }) => ({
    subject: 'Confirm your address',
    paragraphs: [
      `Hello ${name},`,
      `One step is left before ${companyName} is set up: confirm that this address is yours. Then sign in with the password you chose.`,
    ],
    action: { label: 'Confirm this address', link },
    notes: ['You did not sign up? Then leave this mail alone: nothing is set up without the confirmation.'],
  }),
  alreadyHasAccount: ({ name, signInLink, forgottenLink }) => ({
    subject: 'You already have an account',
    paragraphs: [
      `Hello ${name},`,
      'Somebody, probably you, just signed up with this address. It already has an account, so nothing was changed: sign in with the password you have. A second company can be added once you are in.',
    ],
    action: { label: 'Sign in', link: signInLink },
    notes: [`Forgot the password? Choose a new one here: ${forgottenLink}`],
  }),
  resetPassword: ({ name, link }) => ({
    subject: 'Choose a new password',
    paragraphs: [
      `Hello ${name},`,
      'Here is the link to a new password. It works once. Everyone who is signed in with the old one is signed out then.',
    ],
    action: { label: 'Choose a new password', link },
    notes: ['You did not ask for it? Then leave this mail alone: your password stays as it is.'],
  }),
  noAccount: ({ signUpLink }) => ({
    subject: 'No account at this address',
    paragraphs: [
      'Somebody, probably you, asked for a new password for this address. There is no account at it: perhaps you signed up with another one.',
    ],
    action: { label: 'Sign up', link: signUpLink },
    notes: ['It was not you? Then there is nothing to do.'],
  }),
  passwordChanged: ({ name, forgottenLink }) => ({
    subject: 'Your password was changed',
    paragraphs: [
      `Hello ${name},`,
      'The password of your account was just changed. If that was you, all is well.',
    ],
    action: { label: 'It was not me: choose a new password', link: forgottenLink },
    notes: ['Tell the admin of your company too if it was not you.'],
  }),
  invitation: ({ companyName, invitedBy, link, expiresAt }) => ({
    subject: `${invitedBy} invites you to ${companyName}`,
    paragraphs: [
      `${invitedBy} wants you on the crew of ${companyName} in Sixteenth: the rigs, whether each holds its pressure today, and when a nozzle is due.`,
    ],
    action: { label: 'Join the crew', link },
    notes: [
      `The link works once, until ${formatInstant(expiresAt, 'en-US')} UTC. If it is too late by then, ask for another.`,
      'You do not know them? Then leave this mail alone: nobody joins without opening the link.',
    ],
  }),
}

const spanish: Writers = {
  confirmSignUp: ({ name, companyName, link }) => ({
    subject: 'Confirme su correo',
    paragraphs: [
      `${name}:`,
      `Para dejar lista la empresa ${companyName} solo falta saber que este correo es suyo. Después entre con la contraseña que eligió.`,
    ],
    action: { label: 'Sí, es mi correo', link },
    notes: ['Si usted no se registró, no haga nada: sin confirmar no se crea ninguna cuenta.'],
  }),
  alreadyHasAccount: ({ name, signInLink, forgottenLink }) => ({
    subject: 'Usted ya tiene cuenta',
    paragraphs: [
      `${name}:`,
      'Alguien, seguramente usted, acaba de registrarse con este correo. Ya tiene una cuenta y todo sigue igual: entre con su contraseña de siempre. Si quiere agregar otra empresa, se hace desde adentro.',
    ],
    action: { label: 'Entrar', link: signInLink },
    notes: [`¿No recuerda la contraseña? Elija otra aquí: ${forgottenLink}`],
  }),
  resetPassword: ({ name, link }) => ({
    subject: 'Elija otra contraseña',
    paragraphs: [
      `${name}:`,
      'Con este enlace se pone una contraseña nueva. Sirve una sola vez, y al usarlo se cierra la sesión en todos los teléfonos y computadoras.',
    ],
    action: { label: 'Poner otra contraseña', link },
    notes: ['Si no la pidió usted, no haga nada: su contraseña no cambia.'],
  }),
  noAccount: ({ signUpLink }) => ({
    subject: 'Con este correo no hay cuenta',
    paragraphs: [
      'Alguien, seguramente usted, pidió una contraseña nueva para este correo, pero no hay ninguna cuenta a su nombre. Puede ser que se haya registrado con otro.',
    ],
    action: { label: 'Registrarse', link: signUpLink },
    notes: ['Si no fue usted, no tiene que hacer nada.'],
  }),
  passwordChanged: ({ name, forgottenLink }) => ({
    subject: 'Se cambió su contraseña',
    paragraphs: [
      `${name}:`,
      'La contraseña de su cuenta se acaba de cambiar. Si fue usted, todo está en orden.',
    ],
    action: { label: 'No fui yo: poner otra contraseña', link: forgottenLink },
    notes: ['Si no fue usted, avise también al administrador de su empresa.'],
  }),
  invitation: ({ companyName, invitedBy, link, expiresAt }) => ({
    subject: `${invitedBy} le ofrece un lugar en ${companyName}`,
    paragraphs: [
      `${invitedBy} quiere contar con usted en la cuadrilla de ${companyName} en Sixteenth. Ahí se ven los equipos, si hoy aguantan la presión y cuándo toca cambiar la boquilla.`,
    ],
    action: { label: 'Entrar a la cuadrilla', link },
    notes: [
      `El enlace sirve una vez, hasta el ${formatInstant(expiresAt, 'es-US')} (UTC). Si ya se venció, pida otro.`,
      'Si no sabe quién es, no haga nada: sin abrir el enlace nadie entra.',
    ],
  }),
}

const writers: Record<Language, Writers> = { en: english, es: spanish }

export const mails: MailWriter = {
  confirmSignUp: (to, language, values) => setLetter(to, language, writers[language].confirmSignUp(values)),
  alreadyHasAccount: (to, language, values) =>
    setLetter(to, language, writers[language].alreadyHasAccount(values)),
  resetPassword: (to, language, values) => setLetter(to, language, writers[language].resetPassword(values)),
  noAccount: (to, language, values) => setLetter(to, language, writers[language].noAccount(values)),
  passwordChanged: (to, language, values) =>
    setLetter(to, language, writers[language].passwordChanged(values)),
  invitation: (to, language, values) => setLetter(to, language, writers[language].invitation(values)),
}
