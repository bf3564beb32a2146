-- Erasing (contracts.md 2): the office asks, a second person does it, and only through `redact`. Nothing of a job is erased while a hold stands on it.
do $$
declare t text;
begin
  foreach t in array array['erasure', 'job_hold'] loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
    execute format('create policy owner_all on %I to smoothside_owner using (true) with check (true)', t);
    execute format('revoke all on %I from public', t);
    execute format('create policy staff_own on %I to smoothside_staff using (organisation_id = app_organisation()) with check (organisation_id = app_organisation())', t);
    execute format('grant select on %I to smoothside_staff', t);
  end loop;
end $$;
--> statement-breakpoint
grant insert (organisation_id, id, job_id, entry_id, photo, reason, asked_by) on erasure to smoothside_staff;
--> statement-breakpoint
grant update (withdrawn_at) on erasure to smoothside_staff;
--> statement-breakpoint
grant insert (organisation_id, id, job_id, reason, placed_by) on job_hold to smoothside_staff;
--> statement-breakpoint
grant update (lifted_by, lifted_at) on job_hold to smoothside_staff;
--> statement-breakpoint
-- A photo's row is marked as erased by `redact` alone.
revoke update on photo from smoothside_staff;
--> statement-breakpoint
-- Entries are only ever added. The one exception is `redact`, which empties the payload of the entry that it names and changes nothing else of it.
create function refuse_entry_change() returns trigger language plpgsql as $$ begin
  if tg_op = 'UPDATE' and old.id::text = current_setting('app.redacting', true) and new.payload_text is null and new.payload is null
     and to_jsonb(new) - 'payload_text' - 'payload' = to_jsonb(old) - 'payload_text' - 'payload' then return new; end if;
  raise exception '% of % is refused: its rows are only ever added', tg_op, tg_table_name using errcode = '42501';
end $$;
--> statement-breakpoint
drop trigger entry_only_added on entry;
--> statement-breakpoint
create trigger entry_only_added before update or delete on entry for each row execute function refuse_entry_change();
--> statement-breakpoint
-- Empties a payload or marks a picture as erased, as somebody of the office asked and another of the office now says. Envelope, digest and number stay, so that
-- every chain over them stays whole. SM001: asked by the same person, or not of the office; SM002: a hold stands.
create function redact(an_erasure uuid) returns void language plpgsql security definer set search_path = public, pg_temp as $$
declare e erasure%rowtype;
begin
  select * into e from erasure x where x.organisation_id = app_organisation() and x.id = an_erasure and x.done_at is null and x.withdrawn_at is null for update;
  if not found then raise exception 'no such erasure is asked for' using errcode = 'P0002'; end if;
  if app_account() is null or e.asked_by = app_account()
     or not exists (select 1 from membership m where m.organisation_id = e.organisation_id and m.account_id = app_account() and m.ended_at is null and m.role in ('manager', 'administrator'))
  then raise exception 'an erasure is done by a second person of the office' using errcode = 'SM001'; end if;
  if exists (select 1 from job_hold h where h.organisation_id = e.organisation_id and h.lifted_at is null
               and (h.job_id = e.job_id or h.job_id in (select p.job_id from photo p where p.organisation_id = e.organisation_id and p.digest = e.photo)))
  then raise exception 'a hold stands on this job' using errcode = 'SM002'; end if;
  if e.entry_id is not null then
    perform set_config('app.redacting', e.entry_id::text, true);
    update entry set payload_text = null, payload = null where organisation_id = e.organisation_id and id = e.entry_id;
    perform set_config('app.redacting', '', true);
    update entry_aside set payload_text = '' where organisation_id = e.organisation_id and id = e.entry_id;
  end if;
  if e.photo is not null then update photo set erased_at = now() where organisation_id = e.organisation_id and digest = e.photo and erased_at is null; end if;
  update erasure set done_by = app_account(), done_at = now() where organisation_id = e.organisation_id and id = e.id;
end $$;
--> statement-breakpoint
revoke all on function redact(uuid) from public;
--> statement-breakpoint
grant execute on function redact(uuid) to smoothside_staff;
