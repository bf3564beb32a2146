import type { Tx } from '../withSession'

export async function jobIsTheirs(tx: Tx, jobId: string): Promise<boolean> {
  return (await tx.client.query('select from job where organisation_id = app_organisation() and id = $1', [jobId])).rowCount === 1
}

export async function insertPhoto(tx: Tx, photo: { digest: string, jobId: string, bytes: number, width: number, height: number, sentBy: string }): Promise<void> {
  await tx.client.query('insert into photo (organisation_id, digest, job_id, bytes, width, height, sent_by) values (app_organisation(), $1, $2, $3, $4, $5, $6) on conflict do nothing',
    [photo.digest, photo.jobId, photo.bytes, photo.width, photo.height, photo.sentBy])
}

export async function photoIsTheirs(tx: Tx, digest: string): Promise<boolean> {
  return (await tx.client.query('select from photo where organisation_id = app_organisation() and digest = $1 and erased_at is null limit 1', [digest])).rowCount === 1
}

/** Whether that picture was erased in this organisation, in whichever job. */
export async function photoIsErased(tx: Tx, digest: string): Promise<boolean> {
  return (await tx.client.query('select from photo where organisation_id = app_organisation() and digest = $1 and erased_at is not null limit 1', [digest])).rowCount === 1
}
