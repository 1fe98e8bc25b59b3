import type { AppContext } from '../context.ts'

/** The addresses that mails lead to. A token stands behind the #, which no browser sends and no server logs. */
export function linksOf({ publicUrl }: Pick<AppContext, 'publicUrl'>) {
  return {
    signIn: `${publicUrl}/sign-in`,
    signUp: `${publicUrl}/sign-up`,
    forgotten: `${publicUrl}/forgotten-password`,
    confirm: (token: string) => `${publicUrl}/confirm#${token}`,
    reset: (token: string) => `${publicUrl}/reset-password#${token}`,
  }
}
