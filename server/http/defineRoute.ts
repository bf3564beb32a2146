import type { EventHandler, H3Event } from 'h3'
import { defineEventHandler, getQuery, getRouterParams, setResponseHeader } from 'h3'
import type { z } from 'zod'
import type { Permission } from '../../shared/permission/permission'
import { may } from '../../shared/permission/permission'
import { Failure } from '../services/failure'
import { checked, readChecked } from './readChecked'
import { readSession, type SignedIn } from './session'

type Schema = z.ZodTypeAny
interface Spec<P extends Schema, Q extends Schema, B extends Schema> {
  /** Row of shared/permission; 'public' for the few that need nobody signed in. */
  permission: Permission | 'public'
  params?: P
  query?: Q
  body?: B
  /** Largest body in bytes; 1 MB unless told. */
  maxBytes?: number
  /** The service looks at each text of the body itself (entries), so that a bad one holds up no good one. */
  anyText?: boolean
}
interface Call<P extends Schema, Q extends Schema, B extends Schema, S> {
  event: H3Event
  session: S
  params: z.infer<P>
  query: z.infer<Q>
  body: z.infer<B>
}

/**
 * A route: who may, what input, then one service call. Every input is checked strictly; what is unknown is refused with pointers.
 * Answers are private and not stored by anything on the way.
 */
export function defineRoute<P extends Schema = z.ZodUndefined, Q extends Schema = z.ZodUndefined, B extends Schema = z.ZodUndefined, const K extends Permission | 'public' = Permission>(
  spec: Spec<P, Q, B> & { permission: K },
  answer: (call: Call<P, Q, B, K extends 'public' ? SignedIn | null : SignedIn>) => unknown,
): EventHandler {
  return defineEventHandler(async (event) => {
    setResponseHeader(event, 'cache-control', 'private, no-store')
    const session = spec.permission === 'public' ? null : await readSession(event)
    if (spec.permission !== 'public') {
      if (!session) throw new Failure('signInNeeded', 'Sign in first: this session has ended or there was none.')
      const actor = session.standing === 'client' ? 'client' : session.role!
      if (!may(actor, spec.permission as Permission)) throw new Failure('notAllowed', 'Your role may not do this. Ask the administrator of your organisation.')
    }
    const params = spec.params ? checked(spec.params, getRouterParams(event, { decode: true }), '/path', 'notFound') : undefined
    const query = spec.query ? checked(spec.query, getQuery(event), '/query') : undefined
    const body = spec.body ? await readChecked(event, spec.body, spec.maxBytes, spec.anyText) : undefined
    return await answer({ event, session: session as never, params, query, body })
  })
}
