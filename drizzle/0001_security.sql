-- Tenancy (contracts.md 6): row-level security on every table, one database role a standing, look-ups before an organisation is known as functions.
-- Three roles, and not three policies joined by OR on one role: an OR with the client's subqueries would keep the staff's lists off their indexes.
create function app_organisation() returns uuid language sql stable parallel safe as $$ select nullif(current_setting('app.organisation_id', true), '')::uuid $$;
--> statement-breakpoint
create function app_account() returns uuid language sql stable parallel safe as $$ select nullif(current_setting('app.account_id', true), '')::uuid $$;
--> statement-breakpoint
do $$
declare t text;
begin
  for t in select c.relname from pg_class c join pg_namespace n on n.oid = c.relnamespace where n.nspname = 'public' and c.relkind = 'r' loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
    execute format('create policy owner_all on %I to smoothside_owner using (true) with check (true)', t);
    execute format('revoke all on %I from public', t);
  end loop;
end $$;
--> statement-breakpoint
-- Staff: everything of the organisation that they act in.
do $$
declare t text;
begin
  foreach t in array array['membership','client','contact','audit_row','authority','site','element','provision','job','job_given','line_version','basis','round','round_device',
    'entry','entry_aside','round_state','check_state','deficiency_state','photo','signing_key','record','record_element','transmittal','recipient','delivery_event','acceptance'] loop
    execute format('create policy staff_own on %I to smoothside_staff using (organisation_id = app_organisation()) with check (organisation_id = app_organisation())', t);
    execute format('grant select, insert on %I to smoothside_staff', t);
  end loop;
  foreach t in array array['membership','client','contact','site','element','provision','job','round','round_device','round_state','check_state','deficiency_state','photo','signing_key','record','record_element'] loop
    execute format('grant update on %I to smoothside_staff', t);
  end loop;
end $$;
--> statement-breakpoint
grant delete on job_given, check_state, deficiency_state, round_state, entry_aside to smoothside_staff;
--> statement-breakpoint
create policy staff_own on organisation to smoothside_staff using (id = app_organisation()) with check (id = app_organisation());
--> statement-breakpoint
grant select, update on organisation to smoothside_staff;
--> statement-breakpoint
create policy staff_people on account for select to smoothside_staff using (
  id = app_account()
  or exists (select 1 from membership m where m.organisation_id = app_organisation() and m.account_id = account.id)
  or exists (select 1 from contact c where c.organisation_id = app_organisation() and c.account_id = account.id));
--> statement-breakpoint
grant select (id, email, name, language) on account to smoothside_staff;
--> statement-breakpoint
-- Crew: jobs that were given to them, and what hangs on those.
create policy crew_own on membership for select to smoothside_crew using (organisation_id = app_organisation());
--> statement-breakpoint
create policy crew_own on organisation for select to smoothside_crew using (id = app_organisation());
--> statement-breakpoint
create policy crew_people on account for select to smoothside_crew using (exists (select 1 from membership m where m.organisation_id = app_organisation() and m.account_id = account.id));
--> statement-breakpoint
create policy crew_given on job_given for select to smoothside_crew using (organisation_id = app_organisation() and account_id = app_account());
--> statement-breakpoint
create policy crew_given on job to smoothside_crew using (organisation_id = app_organisation() and exists (select 1 from job_given g where g.organisation_id = job.organisation_id and g.job_id = job.id));
--> statement-breakpoint
create policy crew_given on site for select to smoothside_crew using (organisation_id = app_organisation() and exists (select 1 from job j where j.organisation_id = site.organisation_id and j.site_id = site.id));
--> statement-breakpoint
create policy crew_given on client for select to smoothside_crew using (organisation_id = app_organisation() and exists (select 1 from job j where j.organisation_id = client.organisation_id and j.client_id = client.id));
--> statement-breakpoint
do $$
declare t text;
begin
  foreach t in array array['line_version','basis','round','entry','deficiency_state','photo'] loop
    execute format('create policy crew_given on %1$I to smoothside_crew using (organisation_id = app_organisation() and exists (select 1 from job_given g where g.organisation_id = %1$I.organisation_id and g.job_id = %1$I.job_id)) with check (organisation_id = app_organisation() and exists (select 1 from job_given g where g.organisation_id = %1$I.organisation_id and g.job_id = %1$I.job_id))', t);
  end loop;
  foreach t in array array['round_device','entry_aside','round_state','check_state'] loop
    execute format('create policy crew_given on %1$I to smoothside_crew using (organisation_id = app_organisation() and exists (select 1 from round r where r.organisation_id = %1$I.organisation_id and r.id = %1$I.round_id)) with check (organisation_id = app_organisation() and exists (select 1 from round r where r.organisation_id = %1$I.organisation_id and r.id = %1$I.round_id))', t);
  end loop;
end $$;
--> statement-breakpoint
grant select on membership, organisation, job_given, job, site, client, line_version, basis, round, entry, entry_aside, deficiency_state, photo, round_device, round_state, check_state to smoothside_crew;
--> statement-breakpoint
grant select (id, name) on account to smoothside_crew;
--> statement-breakpoint
grant insert on entry, entry_aside, photo, round_device, round_state, check_state, deficiency_state to smoothside_crew;
--> statement-breakpoint
grant update on round_device, round_state, check_state, deficiency_state to smoothside_crew;
--> statement-breakpoint
grant update (accepted) on round to smoothside_crew;
--> statement-breakpoint
grant update (state, move_by, move, move_count, move_since, strip, open_tags, held_out) on job to smoothside_crew;
--> statement-breakpoint
grant delete on check_state, deficiency_state, entry_aside to smoothside_crew;
--> statement-breakpoint
-- Clients: what was sent to them as a contact, from every contractor.
create policy client_own on account for select to smoothside_client using (id = app_account());
--> statement-breakpoint
create policy client_own on contact for select to smoothside_client using (account_id = app_account() and ended_at is null);
--> statement-breakpoint
create policy client_own on organisation for select to smoothside_client using (exists (select 1 from contact c where c.organisation_id = organisation.id));
--> statement-breakpoint
create policy client_own on client for select to smoothside_client using (exists (select 1 from contact c where c.organisation_id = client.organisation_id and c.client_id = client.id));
--> statement-breakpoint
create policy client_sent on recipient for select to smoothside_client using (exists (select 1 from contact c where c.organisation_id = recipient.organisation_id and c.id = recipient.contact_id));
--> statement-breakpoint
create policy client_sent on transmittal for select to smoothside_client using (exists (select 1 from recipient r where r.organisation_id = transmittal.organisation_id and r.transmittal_id = transmittal.id));
--> statement-breakpoint
create policy client_sent on record for select to smoothside_client using (sealing = 'sealed' and exists (select 1 from recipient r where r.organisation_id = record.organisation_id and r.record_id = record.id));
--> statement-breakpoint
create policy client_sent on record_element for select to smoothside_client using (exists (select 1 from record r where r.organisation_id = record_element.organisation_id and r.id = record_element.record_id));
--> statement-breakpoint
create policy client_sent on job for select to smoothside_client using (exists (select 1 from record r where r.organisation_id = job.organisation_id and r.job_id = job.id));
--> statement-breakpoint
create policy client_sent on site for select to smoothside_client using (exists (select 1 from job j where j.organisation_id = site.organisation_id and j.site_id = site.id));
--> statement-breakpoint
create policy client_sent on deficiency_state for select to smoothside_client using (state in ('offered', 'endedAccepted') and exists (select 1 from record r where r.organisation_id = deficiency_state.organisation_id and r.job_id = deficiency_state.job_id));
--> statement-breakpoint
create policy client_sent on delivery_event for select to smoothside_client using (exists (select 1 from recipient r where r.organisation_id = delivery_event.organisation_id and r.id = delivery_event.recipient_id));
--> statement-breakpoint
create policy client_writes on delivery_event for insert to smoothside_client with check (kind in ('opened', 'downloaded') and exists (select 1 from recipient r where r.organisation_id = delivery_event.organisation_id and r.id = delivery_event.recipient_id));
--> statement-breakpoint
create policy client_sent on acceptance for select to smoothside_client using (exists (select 1 from record r where r.organisation_id = acceptance.organisation_id and r.id = acceptance.record_id));
--> statement-breakpoint
create policy client_writes on acceptance for insert to smoothside_client with check (
  exists (select 1 from record r where r.organisation_id = acceptance.organisation_id and r.id = acceptance.record_id)
  and exists (select 1 from contact c where c.organisation_id = acceptance.organisation_id and c.id = acceptance.contact_id));
--> statement-breakpoint
grant select (id, email, name, language) on account to smoothside_client;
--> statement-breakpoint
grant select (id, name, code, time_zone, phone) on organisation to smoothside_client;
--> statement-breakpoint
grant select on contact, client, recipient, transmittal, record, record_element, site, deficiency_state, delivery_event, acceptance to smoothside_client;
--> statement-breakpoint
grant select (organisation_id, id, number, site_id, client_id, title, system, language, state) on job to smoothside_client;
--> statement-breakpoint
grant insert on delivery_event, acceptance to smoothside_client;
--> statement-breakpoint
-- What people wrote down, and what was sealed, is only ever added. Privilege forbids it already; the trigger also stops the owner.
create function refuse_change() returns trigger language plpgsql as $$ begin raise exception '% of % is refused: its rows are only ever added', tg_op, tg_table_name using errcode = '42501'; end $$;
--> statement-breakpoint
do $$
declare t text;
begin
  foreach t in array array['entry','line_version','basis','delivery_event','log_leaf','log_head','acceptance','audit_row'] loop
    execute format('create trigger %1$s_only_added before update or delete on %1$I for each row execute function refuse_change()', t);
    execute format('create trigger %1$s_never_emptied before truncate on %1$I for each statement execute function refuse_change()', t);
  end loop;
end $$;
--> statement-breakpoint
-- A sealed record's identity never moves; only what it is worth may.
create function refuse_sealed_change() returns trigger language plpgsql as $$ begin
  if old.sealing = 'sealed' and (new.sealing, new.border, new.code, new.scope, new.document_digest, new.range_digest, new.file_digest, new.leaf, new.sealed_at)
     is distinct from (old.sealing, old.border, old.code, old.scope, old.document_digest, old.range_digest, old.file_digest, old.leaf, old.sealed_at)
  then raise exception 'record % is sealed', old.code using errcode = '42501'; end if;
  return new;
end $$;
--> statement-breakpoint
create trigger record_sealed before update on record for each row execute function refuse_sealed_change();
--> statement-breakpoint
create trigger record_never_deleted before delete on record for each row execute function refuse_change();
