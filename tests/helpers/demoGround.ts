import pg from 'pg'
import type { Role } from '#shared/permission/permission'
import { setPool } from '../../server/database/client'
import { loadDemo } from '../../server/demo/loadDemo'
import { DEMO_PASSWORD, ORGANISATIONS } from '../../server/demo/people'
import { stopQueue } from '../../server/tasks/queue'
import { layServerGround, startServer, type RunningServer, type ServerGround } from './server'
import { Visitor } from './visitor'

export type DemoActor = Role | 'client'

/** A built server with the demo in its database: two contractors with people in every role and clients, jobs up to sealed and sent records. */
export interface DemoGround {
  ground: ServerGround
  server: RunningServer
  /** Superuser's connections, to look and to prepare. */
  admin: pg.Pool
  /** Somebody signed in; a session of their own each time. */
  visitor: (organisation: 'tarnbeck' | 'osprey', actor: DemoActor) => Promise<Visitor>
  end: () => Promise<void>
}

export const emailOf = (organisation: 'tarnbeck' | 'osprey', role: Role) => ORGANISATIONS.find(one => one.key === organisation)!.people.find(one => one.role === role)!.email

/** Contact of one contractor each, with a record that was sent to them. Ruth signs in by password, Abel by the link in his mail. */
export const CLIENT_OF = { tarnbeck: 'abel@quillfeather.example', osprey: 'ruth@wrenfold.example' }

export async function layDemoGround(): Promise<DemoGround> {
  const ground = await layServerGround()
  Object.assign(process.env, ground.environment, { LOG_LEVEL: 'silent' })
  const app = new pg.Pool({ connectionString: ground.database.appUrl, max: 6 })
  setPool(app)
  await loadDemo()
  await stopQueue()
  await app.end()
  const admin = new pg.Pool({ connectionString: ground.database.adminUrl, max: 3 })
  admin.on('error', () => undefined)
  const server = await startServer({ ground })
  let link: string | undefined

  return {
    ground, server, admin,
    async visitor(organisation, actor) {
      const visitor = new Visitor(server.baseURL)
      if (actor !== 'client' || organisation === 'osprey') {
        const { status } = await visitor.signIn(actor === 'client' ? CLIENT_OF.osprey : emailOf(organisation, actor), DEMO_PASSWORD)
        if (status !== 200) throw new Error(`${actor} of ${organisation} could not sign in: ${status}`)
        return visitor
      }
      link ??= linkIn((await ground.mailThat(mail => mail.envelope.to.includes(CLIENT_OF.tarnbeck))).text)
      const { status } = await visitor.send('POST', `/api/account/links/${link}`, {})
      if (status !== 200) throw new Error(`the client's link was not redeemed: ${status}`)
      return visitor
    },
    async end() {
      await server.stop()
      await admin.end()
      await ground.remove()
    },
  }
}

/** The token of the link in a mail. */
export function linkIn(text: string): string {
  return /\/link\/([\w-]{43})/.exec(text)![1]!
}
