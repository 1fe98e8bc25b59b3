import type { Mail } from './queueMail.ts'

type Language = 'en' | 'es'

/** What each mail says; the words of both languages are written by the mail itself. */
export interface MailWriter {
  confirmSignUp(
    to: string,
    language: Language,
    values: { name: string; companyName: string; link: string },
  ): Mail
  /** to somebody who signs up with an address that has an account already */
  alreadyHasAccount(
    to: string,
    language: Language,
    values: { name: string; signInLink: string; forgottenLink: string },
  ): Mail
  resetPassword(to: string, language: Language, values: { name: string; link: string }): Mail
  /** to an address without an account whose password somebody wants back */
  noAccount(to: string, language: Language, values: { signUpLink: string }): Mail
  passwordChanged(to: string, language: Language, values: { name: string; forgottenLink: string }): Mail
  invitation(
    to: string,
    language: Language,
    values: { companyName: string; invitedBy: string; link: string; expiresAt: string },
  ): Mail
}

function plain(to: string, subject: string, lines: string[]): Mail {
  return { to, subject, text: lines.join('\n\n'), html: lines.map((line) => `<p>${line}</p>`).join('') }
}

export const mails: MailWriter = {
  confirmSignUp: (to, _language, { link }) => plain(to, 'Confirm your address', [link]),
  alreadyHasAccount: (to, _language, { signInLink }) => plain(to, 'You have an account', [signInLink]),
  resetPassword: (to, _language, { link }) => plain(to, 'A new password', [link]),
  noAccount: (to, _language, { signUpLink }) => plain(to, 'No account', [signUpLink]),
  passwordChanged: (to, _language, { forgottenLink }) => plain(to, 'Password changed', [forgottenLink]),
  invitation: (to, _language, { link }) => plain(to, 'Invitation', [link]),
}
