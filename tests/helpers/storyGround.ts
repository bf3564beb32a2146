import pg from 'pg'
import { hashPassword } from '../../server/services/account/password'
import { makeRound, makeStoryOrganisation, type StoryAt } from './roundAt'
import type { PEOPLE } from './roundStory'
import { layServerGround, startServer, type RunningServer, type ServerGround } from './server'
import { Visitor } from './visitor'

export const STORY_PASSWORD = 'walk every bay of it'

/** A built server with the organisation of the stories, whose people sign in by password. */
export interface StoryGround {
  ground: ServerGround
  /** The one that runs now; a test may kill it and start another. */
  server: RunningServer
  admin: pg.Pool
  newRound: () => Promise<StoryAt>
  signedIn: (who: keyof typeof PEOPLE) => Promise<Visitor>
  end: () => Promise<void>
}

export async function layStoryGround(): Promise<StoryGround> {
  const ground = await layServerGround()
  const admin = new pg.Pool({ connectionString: ground.database.adminUrl, max: 3 })
  admin.on('error', () => undefined)
  const at = await makeStoryOrganisation(admin)
  await admin.query('update account set password_hash = $1', [await hashPassword(STORY_PASSWORD)])
  const it: StoryGround = {
    ground, admin,
    server: await startServer({ ground }),
    newRound: () => makeRound(admin, at),
    async signedIn(who) {
      const visitor = new Visitor(it.server.baseURL)
      const { status } = await visitor.signIn(`${who}@story.example`, STORY_PASSWORD)
      if (status !== 200) throw new Error(`${who} could not sign in: ${status}`)
      return visitor
    },
    async end() {
      await it.server.stop()
      await admin.end()
      await ground.remove()
    },
  }
  return it
}
