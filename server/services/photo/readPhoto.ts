import { photoIsTheirs } from '../../database/queries/photo'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { useStorage } from '../../storage/storage'
import { notFound } from '../failure'
import { photoKey, thumbnailKey } from './storePhoto'

/** A photo's bytes, or its thumbnail's, for somebody who may see its job. */
export async function readPhoto(who: Session, digest: string, small: boolean): Promise<Buffer> {
  const theirs = who.organisationId !== null && await withSession(who, tx => photoIsTheirs(tx, digest))
  const bytes = theirs ? await useStorage().get((small ? thumbnailKey : photoKey)(who.organisationId!, digest)) : null
  if (!bytes) throw notFound('photo')
  return bytes
}
