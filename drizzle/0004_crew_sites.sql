-- A job's page and the list of sites name who enforces numbers there; crew read it at the sites of jobs that were given to them.
create policy crew_given on authority for select to smoothside_crew using (exists (select 1 from site s where s.organisation_id = authority.organisation_id and s.authority_id = authority.id));
--> statement-breakpoint
grant select on authority to smoothside_crew;
