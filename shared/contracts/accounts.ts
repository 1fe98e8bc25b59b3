import { z } from 'zod'
import { recordLimits } from './limits.ts'
import { roles } from './permissions.ts'
import { emailSchema, idSchema, languageSchema, nameSchema, versionSchema } from './records.ts'

/** A password as somebody typed it: any text may be wrong. An accented letter is one, whatever keyboard it is from. */
const typedPasswordSchema = z
  .string()
  .max(1000)
  .overwrite((text) => text.normalize('NFC'))

/** A new password. Whether it is a common one only the server tells, which has the list. */
export const newPasswordSchema = typedPasswordSchema
  .refine((text) => [...text].length >= recordLimits.passwordShortest, {
    error: `A password has at least ${recordLimits.passwordShortest} characters.`,
    params: { code: 'too-short' },
  })
  .refine((text) => utf8Length(text) <= recordLimits.passwordMostBytes, {
    error: `A password has at most ${recordLimits.passwordMostBytes} bytes; accented letters count two or more.`,
    params: { code: 'too-long' },
  })

function utf8Length(text: string): number {
  let length = 0
  for (const character of text) {
    const point = character.codePointAt(0) ?? 0
    length += point < 0x80 ? 1 : point < 0x800 ? 2 : point < 0x10000 ? 3 : 4
  }
  return length
}

export const tokenSchema = z.string().min(1).max(200)
export const rolesSchema = z
  .array(z.enum(roles))
  .min(1)
  .max(roles.length)
  .refine((held) => new Set(held).size === held.length, {
    error: 'Each role may be given once.',
    params: { code: 'invalid' },
  })
  .overwrite((held) => roles.filter((role) => held.includes(role)))

/** ISO 4217, three letters; whether the currency exists is for the runtime's own list. */
export const currencySchema = z.string().refine((text) => /^[A-Z]{3}$/.test(text), {
  error: 'A currency is three letters such as USD.',
  params: { code: 'not-a-currency' },
})

/** An IANA name such as America/Denver; whether it exists is for the runtime's own list. */
export const timeZoneSchema = z
  .string()
  .max(60)
  .refine((text) => /^[A-Za-z0-9_+\-/]+$/.test(text), {
    error: 'A time zone has a name such as America/Denver.',
    params: { code: 'not-a-time-zone' },
  })

export const companyInputSchema = z.strictObject({
  name: nameSchema,
  currency: currencySchema,
  language: languageSchema,
  timeZone: timeZoneSchema,
})

export const signUpSchema = z.strictObject({
  name: nameSchema,
  email: emailSchema,
  password: newPasswordSchema,
  company: companyInputSchema,
})
export const signInSchema = z.strictObject({ email: emailSchema, password: typedPasswordSchema })
export const tokenOnlySchema = z.strictObject({ token: tokenSchema })
/** a mail is sent in the language of the screen it was asked for on */
export const forgottenPasswordSchema = z.strictObject({ email: emailSchema, language: languageSchema })
export const resetPasswordSchema = z.strictObject({ token: tokenSchema, password: newPasswordSchema })
export const changePasswordSchema = z.strictObject({
  currentPassword: typedPasswordSchema,
  password: newPasswordSchema,
})
export const profileInputSchema = z.strictObject({ name: nameSchema, language: languageSchema })
export const chooseCompanySchema = z.strictObject({ companyId: idSchema })
export const newCompanySchema = companyInputSchema.extend({ id: idSchema })
export const companyChangeSchema = companyInputSchema.extend({ version: versionSchema })
/** an address without an account takes a name and a password with it; one with an account signs in first */
export const acceptInvitationSchema = z.strictObject({
  token: tokenSchema,
  name: nameSchema.optional(),
  password: newPasswordSchema.optional(),
})

export const companySchema = companyInputSchema.extend({ id: z.string(), version: z.number() })

export const sessionSchema = z.strictObject({
  account: z.strictObject({
    id: z.string(),
    name: z.string(),
    email: z.string(),
    language: languageSchema,
  }),
  /** null for somebody whom every company has let go */
  company: companySchema.nullable(),
  roles: z.array(z.enum(roles)),
  memberships: z.array(
    z.strictObject({ companyId: z.string(), companyName: z.string(), roles: z.array(z.enum(roles)) }),
  ),
})

/** What a visitor's screen needs to know before anybody signs in. */
export const visitSchema = z.strictObject({
  session: sessionSchema.nullable(),
  /** on the own machine only: whom one can be in the demo, and that mails can be read here */
  demoPeople: z.array(z.strictObject({ email: z.string(), name: z.string(), roles: z.array(z.enum(roles)) })),
  hasMailPage: z.boolean(),
})

export const invitationViewSchema = z.strictObject({
  companyName: z.string(),
  email: z.string(),
  invitedBy: z.string(),
  roles: z.array(z.enum(roles)),
  /** whether the address already has an account */
  hasAccount: z.boolean(),
})

export type Company = z.infer<typeof companySchema>
export type CompanyInput = z.infer<typeof companyInputSchema>
export type CompanyChange = z.infer<typeof companyChangeSchema>
export type Session = z.infer<typeof sessionSchema>
export type Visit = z.infer<typeof visitSchema>
export type SignUp = z.infer<typeof signUpSchema>
export type SignIn = z.infer<typeof signInSchema>
export type ProfileInput = z.infer<typeof profileInputSchema>
export type AcceptInvitation = z.infer<typeof acceptInvitationSchema>
export type InvitationView = z.infer<typeof invitationViewSchema>
