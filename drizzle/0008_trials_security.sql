-- Trial calculations: staff see and add those of their organisation. Crew and clients have no part in them; nobody changes one.
alter table trial enable row level security;
--> statement-breakpoint
alter table trial force row level security;
--> statement-breakpoint
create policy owner_all on trial to smoothside_owner using (true) with check (true);
--> statement-breakpoint
revoke all on trial from public;
--> statement-breakpoint
create policy staff_own on trial to smoothside_staff using (organisation_id = app_organisation()) with check (organisation_id = app_organisation());
--> statement-breakpoint
grant select, insert on trial to smoothside_staff;
--> statement-breakpoint
create trigger trial_only_added before update or delete on trial for each row execute function refuse_change();
--> statement-breakpoint
create trigger trial_never_emptied before truncate on trial for each statement execute function refuse_change();
