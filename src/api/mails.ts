import type { KeptMails } from '#shared/contracts/mails.ts'
import { askApi } from './request.ts'

export const fetchMails = () => askApi<KeptMails>('GET', '/api/v1/mails')
