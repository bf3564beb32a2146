-- Instruments: whoever is in the field sees those of their organisation, staff add them. None is changed but to end it, none is removed.
alter table instrument enable row level security;
--> statement-breakpoint
alter table instrument force row level security;
--> statement-breakpoint
create policy owner_all on instrument to smoothside_owner using (true) with check (true);
--> statement-breakpoint
revoke all on instrument from public;
--> statement-breakpoint
create policy staff_own on instrument to smoothside_staff using (organisation_id = app_organisation()) with check (organisation_id = app_organisation());
--> statement-breakpoint
create policy crew_own on instrument for select to smoothside_crew using (organisation_id = app_organisation());
--> statement-breakpoint
grant select, insert, update (ended_at) on instrument to smoothside_staff;
--> statement-breakpoint
grant select on instrument to smoothside_crew;
