import type { ClientInput, ClientRow, ContactInput, SiteInput, SiteRow } from '../../../shared/api/site'
import type { Tx } from '../withSession'

export async function listClients(tx: Tx): Promise<ClientRow[]> {
  return (await tx.client.query<ClientRow>(
    `select c.id, c.name, c.address,
            coalesce((select json_agg(json_build_object('id', k.id, 'accountId', k.account_id, 'name', k.name, 'email', k.email, 'phone', k.phone, 'title', k.title, 'accepts', k.accepts, 'mailbox', k.mailbox) order by k.name)
               from contact k where k.organisation_id = c.organisation_id and k.client_id = c.id and k.ended_at is null), '[]') as contacts,
            coalesce((select json_agg(json_build_object('id', s.id, 'name', s.name) order by s.name) from site s where s.organisation_id = c.organisation_id and s.client_id = c.id), '[]') as sites
       from client c where c.organisation_id = app_organisation() order by lower(c.name)`)).rows
}

/** Writes a client; the same id again changes it. */
export async function putClient(tx: Tx, client: ClientInput): Promise<void> {
  await tx.client.query('insert into client (organisation_id, id, name, address) values (app_organisation(), $1, $2, $3) on conflict (organisation_id, id) do update set name = excluded.name, address = excluded.address', [client.id, client.name, client.address])
}

export async function clientIsTheirs(tx: Tx, clientId: string): Promise<boolean> {
  return (await tx.client.query('select from client where organisation_id = app_organisation() and id = $1', [clientId])).rowCount === 1
}

export async function putContact(tx: Tx, clientId: string, contact: ContactInput): Promise<void> {
  await tx.client.query(
    `insert into contact (organisation_id, id, client_id, name, email, phone, title, accepts, mailbox) values (app_organisation(), $1, $2, $3, $4, $5, $6, $7, $8)
     on conflict (organisation_id, id) do update set name = excluded.name, email = excluded.email, phone = excluded.phone, title = excluded.title, accepts = excluded.accepts, mailbox = excluded.mailbox,
       account_id = case when contact.email = excluded.email then contact.account_id end, ended_at = null`,
    [contact.id, clientId, contact.name, contact.email, contact.phone, contact.title, contact.accepts, contact.mailbox])
}

export async function endContact(tx: Tx, clientId: string, contactId: string): Promise<boolean> {
  return (await tx.client.query('update contact set ended_at = now() where organisation_id = app_organisation() and client_id = $1 and id = $2 and ended_at is null', [clientId, contactId])).rowCount === 1
}

export async function listSites(tx: Tx): Promise<SiteRow[]> {
  return (await tx.client.query<SiteRow>(
    `select s.id, s.client_id as "clientId", s.name, s.address, s.time_zone as "timeZone", s.authority_id as "authorityId", c.name as "clientName", a.name as "authorityName",
            (select count(*)::int from job j where j.organisation_id = s.organisation_id and j.site_id = s.id) as jobs
       from site s join client c on c.organisation_id = s.organisation_id and c.id = s.client_id
       left join authority a on a.organisation_id = s.organisation_id and a.id = s.authority_id
      where s.organisation_id = app_organisation() order by lower(s.name)`)).rows
}

export async function putSite(tx: Tx, site: SiteInput): Promise<void> {
  await tx.client.query(
    `insert into site (organisation_id, id, client_id, name, address, time_zone, authority_id) values (app_organisation(), $1, $2, $3, $4, $5, $6)
     on conflict (organisation_id, id) do update set name = excluded.name, address = excluded.address, time_zone = excluded.time_zone, authority_id = excluded.authority_id`,
    [site.id, site.clientId, site.name, site.address, site.timeZone, site.authorityId])
}

export async function listAuthorities(tx: Tx): Promise<{ id: string, name: string }[]> {
  return (await tx.client.query<{ id: string, name: string }>('select id, name from authority where organisation_id = app_organisation() order by lower(name)')).rows
}

export async function insertAuthority(tx: Tx, authority: { id: string, name: string }): Promise<void> {
  await tx.client.query('insert into authority (organisation_id, id, name) values (app_organisation(), $1, $2) on conflict (organisation_id, id) do nothing', [authority.id, authority.name])
}
