import type {
  AcceptInvitation,
  Company,
  CompanyChange,
  CompanyInput,
  InvitationView,
  ProfileInput,
  Session,
  SignIn,
  SignUp,
  Visit,
} from '#shared/contracts/accounts.ts'
import type { Language } from '../stores/preferences.ts'
import { askApi } from './request.ts'

export const fetchVisit = () => askApi<Visit>('GET', '/api/v1/visit')

export const signUp = (input: SignUp) => askApi('POST', '/api/v1/sign-up', input)

export const confirmSignUp = (token: string) =>
  askApi<{ email: string }>('POST', '/api/v1/sign-up/confirm', { token })

export const signIn = (input: SignIn) => askApi<Session>('POST', '/api/v1/session', input)

export const signInToDemo = (email: string) => askApi<Session>('POST', '/api/v1/demo-session', { email })

export const signOut = () => askApi('DELETE', '/api/v1/session')

export const askForPassword = (email: string, language: Language) =>
  askApi('POST', '/api/v1/password/forgotten', { email, language })

export const resetPassword = (token: string, password: string) =>
  askApi<{ email: string }>('POST', '/api/v1/password/reset', { token, password })

export const changePassword = (currentPassword: string, password: string) =>
  askApi('PUT', '/api/v1/account/password', { currentPassword, password })

export const saveProfile = (input: ProfileInput) => askApi<Session>('PUT', '/api/v1/account', input)

export const chooseCompany = (companyId: string) =>
  askApi<Session>('PUT', '/api/v1/session/company', { companyId })

export const createCompany = (input: CompanyInput & { id: string }) =>
  askApi<Session>('POST', '/api/v1/companies', input)

export const saveCompany = (input: CompanyChange) => askApi<Company>('PUT', '/api/v1/company', input)

export const viewInvitation = (token: string) =>
  askApi<InvitationView>('POST', '/api/v1/invitations/view', { token })

export const acceptInvitation = (input: AcceptInvitation) =>
  askApi<Session>('POST', '/api/v1/invitations/accept', input)
