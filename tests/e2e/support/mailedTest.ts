import { rmSync, mkdtempSync } from 'node:fs'
import { createServer } from 'node:net'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { startMailServer } from '../../support/mailServer.ts'
import type { ReceivedMail } from '../../support/mailServer.ts'
import { startServerProcess } from '../../support/serverProcess.ts'
import { openCrewDesk } from './crewDesk.ts'
import type { CrewDesk } from './crewDesk.ts'
import { expect, test as base } from './test.ts'

interface MailedServer {
  address: string
  desk: CrewDesk
  /** the newest mail to somebody that leads to this page, once the mail server has it */
  findLink(to: string, page: string): Promise<{ link: string; mail: ReceivedMail }>
}

async function findFreePort(): Promise<number> {
  const server = createServer()
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address() as AddressInfo
  await new Promise((resolve) => server.close(resolve))
  return port
}

/** The server as people start it, with a real mail server beside it: the links in its mails lead back to it. */
export const test = base.extend<object, { mailed: MailedServer }>({
  mailed: [
    // eslint-disable-next-line no-empty-pattern -- the first argument says what a fixture needs
    async ({}, use) => {
      const dataDir = mkdtempSync(join(tmpdir(), 'sixteenth-e2e-mail-'))
      const mailServer = await startMailServer()
      const port = await findFreePort()
      const server = await startServerProcess(dataDir, {
        PORT: String(port),
        PUBLIC_URL: `http://127.0.0.1:${port}`,
        SMTP_URL: mailServer.url,
      })
      const desk = openCrewDesk(dataDir, server.address)
      await use({
        address: server.address,
        desk,
        async findLink(to, page) {
          const link = new RegExp(`${server.address}/${page}#[\\w-]+`)
          const find = () => mailServer.received.findLast((mail) => mail.to === to && link.test(mail.text))
          await expect.poll(find, { message: `a mail to ${to} that leads to ${page}` }).toBeDefined()
          const mail = find()!
          return { link: link.exec(mail.text)![0], mail }
        },
      })
      await desk.close()
      server.kill('SIGTERM')
      await server.ended
      await mailServer.stop()
      rmSync(dataDir, { recursive: true, force: true })
    },
    { scope: 'worker' },
  ],
  baseURL: async ({ mailed }, use) => use(mailed.address),
})

export { expect }
