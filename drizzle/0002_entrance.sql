-- Look-ups before an organisation is known: sign-in, session, link, public check, and the installation's log. Each is a function of the owner with a
-- fixed search path; the app role may call these and nothing else before it takes a standing. Tested like routes: tests/database/entrance.spec.ts.
create schema entrance;
--> statement-breakpoint
revoke all on schema entrance from public;
--> statement-breakpoint
grant usage on schema entrance to smoothside_app, smoothside_staff, smoothside_crew, smoothside_client;
--> statement-breakpoint
create function entrance.account_for_sign_in(an_email text) returns table (id uuid, password_hash text)
language sql security definer set search_path = public, pg_temp as $$
  select a.id, a.password_hash from account a where a.email = lower(an_email)
$$;
--> statement-breakpoint
-- Every organisation that a person may act in, and the client's standing where a contact names them.
create function entrance.standings_of(an_account uuid) returns table (standing text, organisation_id uuid, organisation_name text, role text)
language sql security definer set search_path = public, pg_temp as $$
  select case m.role when 'crew' then 'crew' else 'staff' end, o.id, o.name, m.role
    from membership m join organisation o on o.id = m.organisation_id where m.account_id = an_account and m.ended_at is null
  union all
  select 'client', null, (select string_agg(distinct cl.name, ', ') from contact c join client cl on cl.organisation_id = c.organisation_id and cl.id = c.client_id
    where c.account_id = an_account and c.ended_at is null), null
   where exists (select 1 from contact c where c.account_id = an_account and c.ended_at is null)
  order by 1 desc, 3
$$;
--> statement-breakpoint
create function entrance.session_open(a_hash text, an_account uuid, an_organisation uuid, a_standing text, expires timestamptz) returns void
language sql security definer set search_path = public, pg_temp as $$
  insert into session (token_hash, account_id, organisation_id, standing, expires_at) values (a_hash, an_account, an_organisation, a_standing, expires)
$$;
--> statement-breakpoint
-- Who a session is, or no row: ended, expired, membership or contact ended, organisation not theirs.
create function entrance.session_of(a_hash text) returns table (account_id uuid, email text, name text, language text, standing text, role text, organisation_id uuid, organisation_name text)
language plpgsql security definer set search_path = public, pg_temp as $$
begin
  update session s set seen_at = now() where s.token_hash = a_hash and s.seen_at < now() - interval '5 minutes';
  return query
    select a.id, a.email, a.name, a.language, s.standing, m.role, o.id, o.name
      from session s join account a on a.id = s.account_id
      left join membership m on m.account_id = s.account_id and m.organisation_id = s.organisation_id and m.ended_at is null
      left join organisation o on o.id = m.organisation_id
     where s.token_hash = a_hash and s.expires_at > now()
       and case s.standing when 'client' then exists (select 1 from contact c where c.account_id = s.account_id and c.ended_at is null)
           when 'crew' then m.role = 'crew' else m.role is not null and m.role <> 'crew' end;
end $$;
--> statement-breakpoint
create function entrance.session_end(a_hash text) returns void
language sql security definer set search_path = public, pg_temp as $$ delete from session where token_hash = a_hash $$;
--> statement-breakpoint
create function entrance.session_end_all(an_account uuid) returns void
language sql security definer set search_path = public, pg_temp as $$ delete from session where account_id = an_account $$;
--> statement-breakpoint
-- The account of an e-mail, made when there is none; the name and language stand only for a new one.
create function entrance.account_make(an_id uuid, an_email text, a_name text, a_language text) returns uuid
language plpgsql security definer set search_path = public, pg_temp as $$
declare found uuid;
begin
  insert into account (id, email, name, language) values (an_id, lower(an_email), a_name, a_language) on conflict (email) do nothing;
  select id into found from account where email = lower(an_email);
  return found;
end $$;
--> statement-breakpoint
create function entrance.account_change(an_account uuid, a_hash text, a_name text, a_language text) returns void
language sql security definer set search_path = public, pg_temp as $$
  update account set password_hash = coalesce(a_hash, password_hash), name = coalesce(a_name, name), language = coalesce(a_language, language) where id = an_account
$$;
--> statement-breakpoint
create function entrance.link_make(a_hash text, a_purpose text, an_account uuid, an_organisation uuid, a_contact uuid, a_record uuid, a_role text, an_email text, expires timestamptz) returns void
language sql security definer set search_path = public, pg_temp as $$
  insert into link (token_hash, purpose, account_id, organisation_id, contact_id, record_id, role, email, expires_at)
  values (a_hash, a_purpose, an_account, an_organisation, a_contact, a_record, a_role, lower(an_email), expires)
$$;
--> statement-breakpoint
create function entrance.link_of(a_hash text) returns table (purpose text, email text, name text, organisation_name text, role text, has_password boolean, state text)
language sql security definer set search_path = public, pg_temp as $$
  select l.purpose, l.email, coalesce(a.name, c.name, ''), coalesce(o.name, ''), l.role, a.password_hash is not null,
         case when l.redeemed_at is not null then 'redeemed' when l.expires_at <= now() then 'expired' else 'open' end
    from link l left join account a on a.id = l.account_id left join organisation o on o.id = l.organisation_id
    left join contact c on c.organisation_id = l.organisation_id and c.id = l.contact_id
   where l.token_hash = a_hash
$$;
--> statement-breakpoint
-- Redeems once. A contact's link may be used again until it expires, so that a click lost on the way does no harm: it only opens what was sent to that person.
create function entrance.link_redeem(a_hash text) returns table (purpose text, account_id uuid, organisation_id uuid, contact_id uuid, record_id uuid, role text, email text)
language sql security definer set search_path = public, pg_temp as $$
  update link l set redeemed_at = coalesce(l.redeemed_at, now())
   where l.token_hash = a_hash and l.expires_at > now() and (l.redeemed_at is null or l.purpose = 'contact')
     and (l.purpose <> 'contact' or exists (select 1 from contact c where c.organisation_id = l.organisation_id and c.id = l.contact_id and c.ended_at is null))
  returning l.purpose, l.account_id, l.organisation_id, l.contact_id, l.record_id, l.role, l.email
$$;
--> statement-breakpoint
create function entrance.contact_take(an_organisation uuid, a_contact uuid, an_account uuid) returns void
language sql security definer set search_path = public, pg_temp as $$
  update contact set account_id = an_account where organisation_id = an_organisation and id = a_contact and not mailbox and (account_id is null or account_id = an_account)
$$;
--> statement-breakpoint
-- All contacts that carry the e-mail of a person who has proved it (by a link to that very address, or in the demo).
create function entrance.contacts_take(an_email text, an_account uuid) returns void
language sql security definer set search_path = public, pg_temp as $$
  update contact set account_id = an_account where email = lower(an_email) and not mailbox and account_id is null
$$;
--> statement-breakpoint
create function entrance.membership_take(an_organisation uuid, an_account uuid, a_role text) returns void
language sql security definer set search_path = public, pg_temp as $$
  insert into membership (organisation_id, account_id, role) values (an_organisation, an_account, a_role)
  on conflict (organisation_id, account_id) do update set role = excluded.role, ended_at = null
$$;
--> statement-breakpoint
create function entrance.organisation_make(an_id uuid, a_name text, a_code text, a_zone text, a_system text, a_language text) returns void
language sql security definer set search_path = public, pg_temp as $$
  insert into organisation (id, name, code, time_zone, system, language) values (an_id, a_name, a_code, a_zone, a_system, a_language)
$$;
--> statement-breakpoint
-- The public check: a record by its code or by one of its digests. It tells what stands on the paper and what became of it, never what is in it.
create function entrance.record_of(a_key text) returns table (id uuid, organisation_id uuid, organisation_name text, code text, scope text, standing text, sealed_at timestamptz,
  document_digest text, range_digest text, file_digest text, leaf bigint, root_certificate text, replaced jsonb)
language sql security definer set search_path = public, pg_temp as $$
  select r.id, r.organisation_id, o.name, r.code, r.scope, r.standing, r.sealed_at, r.document_digest, r.range_digest, r.file_digest, r.leaf,
         (select k.root from signing_key k where k.organisation_id = r.organisation_id order by k.created_at limit 1),
         (select jsonb_agg(jsonb_build_object('tag', e.tag, 'by', n.code, 'at', n.sealed_at) order by e.tag) from record_element e
            join record n on n.organisation_id = e.organisation_id and n.id = e.replaced_by where e.organisation_id = r.organisation_id and e.record_id = r.id)
    from record r join organisation o on o.id = r.organisation_id
   where r.sealing = 'sealed' and (r.code = upper(a_key) or r.document_digest = lower(a_key) or r.range_digest = lower(a_key) or r.file_digest = lower(a_key))
$$;
--> statement-breakpoint
create function entrance.acceptance_of(a_digest text) returns table (organisation_id uuid, organisation_name text, record_code text, meaning text, created_at timestamptz, leaf bigint)
language sql security definer set search_path = public, pg_temp as $$
  select a.organisation_id, o.name, r.code, a.meaning, a.created_at, a.leaf from acceptance a
    join record r on r.organisation_id = a.organisation_id and r.id = a.record_id join organisation o on o.id = a.organisation_id where a.file_digest = lower(a_digest)
$$;
--> statement-breakpoint
-- Appends under an advisory lock, as the last statement of the caller's transaction: positions follow the order of commit.
create function entrance.log_append(a_kind text, a_text text, a_hash text, an_organisation uuid, a_record uuid) returns bigint
language plpgsql security definer set search_path = public, pg_temp as $$
declare place bigint;
begin
  perform pg_advisory_xact_lock(734001);
  select coalesce(max(position) + 1, 0) into place from log_leaf;
  insert into log_leaf (position, epoch, kind, text, hash, organisation_id, record_id)
  values (place, (select log_epoch from installation where id = 1), a_kind, a_text, a_hash, an_organisation, a_record);
  return place;
end $$;
--> statement-breakpoint
create function entrance.log_hashes(from_position bigint, to_position bigint) returns table ("position" bigint, hash text)
language sql security definer set search_path = public, pg_temp as $$
  select l.position, l.hash from log_leaf l where l.position >= from_position and l.position < to_position order by l.position
$$;
--> statement-breakpoint
create function entrance.log_size() returns bigint language sql security definer set search_path = public, pg_temp as $$ select coalesce(max(position) + 1, 0) from log_leaf $$;
--> statement-breakpoint
create function entrance.log_head_write(a_size bigint, a_root text, a_text text, a_signature text) returns void
language sql security definer set search_path = public, pg_temp as $$
  insert into log_head (size, epoch, root, text, signature) values (a_size, (select log_epoch from installation where id = 1), a_root, a_text, a_signature) on conflict (size) do nothing
$$;
--> statement-breakpoint
create function entrance.log_head_newest() returns table (size bigint, epoch integer, root text, text text, signature text)
language sql security definer set search_path = public, pg_temp as $$ select h.size, h.epoch, h.root, h.text, h.signature from log_head h order by h.size desc limit 1 $$;
--> statement-breakpoint
create function entrance.installation_of() returns table (store_epoch uuid, log_epoch integer, witness_key text, witness_certificate text, worker_seen_at timestamptz, organisations bigint)
language sql security definer set search_path = public, pg_temp as $$
  select i.store_epoch, i.log_epoch, i.witness_key, i.witness_certificate, i.worker_seen_at, (select count(*) from organisation) from installation i where i.id = 1
$$;
--> statement-breakpoint
-- The witness key is set once and kept: whoever comes second gets the first one's.
create function entrance.witness_set(a_key text, a_certificate text) returns void
language sql security definer set search_path = public, pg_temp as $$
  update installation set witness_key = a_key, witness_certificate = a_certificate where id = 1 and witness_key is null
$$;
--> statement-breakpoint
create function entrance.worker_seen() returns void language sql security definer set search_path = public, pg_temp as $$ update installation set worker_seen_at = now() where id = 1 $$;
--> statement-breakpoint
-- Sealings that a worker died over: taken up again at its next start.
create function entrance.sealings_unfinished() returns table (organisation_id uuid, id uuid)
language sql security definer set search_path = public, pg_temp as $$ select r.organisation_id, r.id from record r where r.sealing <> 'sealed' $$;
--> statement-breakpoint
create function entrance.organisation_ids() returns setof uuid language sql security definer set search_path = public, pg_temp as $$ select id from organisation order by id $$;
--> statement-breakpoint
do $$ declare f regprocedure; begin
  for f in select p.oid::regprocedure from pg_proc p join pg_namespace n on n.oid = p.pronamespace where n.nspname = 'entrance' loop
    execute format('revoke all on function %s from public', f);
    execute format('grant execute on function %s to smoothside_app', f);
  end loop;
end $$;
--> statement-breakpoint
-- Inside a transaction of a standing: only what its own steps need.
grant execute on function entrance.account_make(uuid, text, text, text), entrance.link_make(text, text, uuid, uuid, uuid, uuid, text, text, timestamptz), entrance.session_end_all(uuid) to smoothside_staff;
--> statement-breakpoint
grant execute on function entrance.log_append(text, text, text, uuid, uuid), entrance.log_hashes(bigint, bigint), entrance.log_size(), entrance.log_head_write(bigint, text, text, text) to smoothside_staff, smoothside_client;
--> statement-breakpoint
-- Counters of wrong tries are nobody's: the app role keeps them before it knows who is there.
grant select, insert, update, delete on limiter to smoothside_app;
--> statement-breakpoint
create policy app_counts on limiter to smoothside_app using (true) with check (true);
--> statement-breakpoint
insert into installation (id, store_epoch) values (1, gen_random_uuid());
