-- Questions to the authority: staff see and write those of their organisation. Crew and clients have no part in them.
do $$
declare t text;
begin
  foreach t in array array['question','question_sheet','question_event'] loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
    execute format('create policy owner_all on %I to smoothside_owner using (true) with check (true)', t);
    execute format('revoke all on %I from public', t);
    execute format('create policy staff_own on %I to smoothside_staff using (organisation_id = app_organisation()) with check (organisation_id = app_organisation())', t);
    execute format('grant select, insert on %I to smoothside_staff', t);
  end loop;
  -- What was put to somebody, and what is known of how far it got, is only ever added.
  foreach t in array array['question_sheet','question_event'] loop
    execute format('create trigger %1$s_only_added before update or delete on %1$I for each row execute function refuse_change()', t);
    execute format('create trigger %1$s_never_emptied before truncate on %1$I for each statement execute function refuse_change()', t);
  end loop;
end $$;
--> statement-breakpoint
grant update (state, sheet_id, answer, answered_by, answered_at) on question to smoothside_staff;
--> statement-breakpoint
-- An answer is a decision of the authority: it is printed in records, so it stands as it was written down.
create function refuse_answered_change() returns trigger language plpgsql as $$ begin
  if old.state = 'answered' then raise exception 'question % is answered', old.id using errcode = '42501'; end if;
  return new;
end $$;
--> statement-breakpoint
create trigger question_answered before update on question for each row execute function refuse_answered_change();
--> statement-breakpoint
create trigger question_never_deleted before delete on question for each row execute function refuse_change();
