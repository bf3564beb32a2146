-- Run by scripts/migrate.mjs as the superuser of the cluster, before the migrations, again at every start.
-- smoothside_app logs in and owns nothing; in a transaction it becomes one of the three standings (server/database/withSession.ts).
do $$ begin
  if not exists (select 1 from pg_roles where rolname = 'smoothside_staff') then create role smoothside_staff nologin; end if;
  if not exists (select 1 from pg_roles where rolname = 'smoothside_crew') then create role smoothside_crew nologin; end if;
  if not exists (select 1 from pg_roles where rolname = 'smoothside_client') then create role smoothside_client nologin; end if;
end $$;
alter role smoothside_app noinherit;
grant smoothside_staff, smoothside_crew, smoothside_client to smoothside_app;
