import type { Ref } from 'vue'
import type { Me } from '#shared/api/account'
import { may } from '#shared/permission/permission'
import { FieldDatabase } from './fieldDatabase'
import { storageFault, FieldFault } from './fieldFault'
import { keepProfile, keptProfile, sameProfile } from './fieldProfile'
import { FieldSender } from './fieldSender'
import { forgetOld } from './fieldStore'
import { serverWire } from './fieldWire'
import { answered } from './outbox'

/** What one person has on this device for one organisation. */
export interface FieldDesk { me: Me, db: FieldDatabase, sender: FieldSender }

/** Why the field pages do not open. `noSignal`: nobody is known on this device yet, and nobody can be asked. */
export type ShutWhy = 'signIn' | 'notYours' | 'noSignal' | 'storageShut'
export type Entered = { state: 'in', desk: FieldDesk } | { state: 'shut', why: ShutWhy }

/** With a profile at hand nobody waits long for a weak signal. */
const PATIENCE = 4000

let open: { me: Me, desk: Promise<FieldDesk> } | null = null

/** Lets the person in whom the server names, or, with no signal, the one who was last here. Field pages ask this before anything else. */
export async function enterField(me: Ref<Me | null>): Promise<Entered> {
  const asked = me.value ?? await whoIsHere()
  if (typeof asked === 'string') return { state: 'shut', why: asked }
  if (!asked.organisation || asked.standing === 'client' || !asked.role || !may(asked.role, 'round.take')) return { state: 'shut', why: 'notYours' }
  me.value = asked
  keepProfile(asked)
  if (!open || !sameProfile(open.me, asked)) open = { me: asked, desk: openDesk(asked) }
  try {
    const desk = await open.desk
    void desk.sender.sendNow()
    return { state: 'in', desk }
  }
  catch (error) {
    open = null
    if (storageFault(error) instanceof FieldFault) return { state: 'shut', why: 'storageShut' }
    throw error
  }
}

async function whoIsHere(): Promise<Me | ShutWhy> {
  const kept = keptProfile()
  const late = new Promise<null>(resolve => kept && setTimeout(() => resolve(null), PATIENCE))
  const reply = await Promise.race([serverWire.me(), late])
  if (reply?.body) return reply.body
  if (reply && answered(reply.status) === 'pause') return 'signIn'
  return kept ?? 'noSignal'
}

async function openDesk(me: Me): Promise<FieldDesk> {
  const db = new FieldDatabase(me.account.id, me.organisation!.id)
  const device = await db.deviceId()
  // Asked without waiting: some browsers ask the person, and a no only means that a full device may clear what is not yet sent.
  void navigator.storage?.persist?.()
  await forgetOld(db, Date.now())
  return { me, db, sender: new FieldSender(db, serverWire, { accountId: me.account.id, organisationId: me.organisation!.id, device, name: deviceName() }) }
}

/** What tells one device from another in a list, as the device names itself: its platform and screen. */
function deviceName(): string {
  const { platform, userAgentData } = navigator as Navigator & { userAgentData?: { platform?: string } }
  return `${userAgentData?.platform || platform || '?'}, ${screen.width} × ${screen.height}`.slice(0, 120)
}
