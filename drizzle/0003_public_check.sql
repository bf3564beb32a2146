CREATE INDEX "acceptance_file" ON "acceptance" USING btree ("file_digest");--> statement-breakpoint
CREATE INDEX "record_range" ON "record" USING btree ("range_digest");--> statement-breakpoint
CREATE INDEX "record_file" ON "record" USING btree ("file_digest");--> statement-breakpoint
-- What the public check page also needs: how many elements a record speaks of, when its standing changed, the text of a leaf (for whoever holds the file),
-- every root certificate, and an acceptance by the digests of its file.
drop function entrance.record_of(text);
--> statement-breakpoint
create function entrance.record_of(a_key text) returns table (id uuid, organisation_id uuid, organisation_name text, code text, number integer, scope text, standing text, standing_at timestamptz, sealed_at timestamptz,
  document_digest text, range_digest text, file_digest text, leaf bigint, root_certificate text, elements integer, replaced jsonb)
language sql security definer set search_path = public, pg_temp as $$
  select r.id, r.organisation_id, o.name, r.code, r.number, r.scope, r.standing, (select max(l.at) from log_leaf l where l.record_id = r.id and l.kind = r.standing), r.sealed_at,
         r.document_digest, r.range_digest, r.file_digest, r.leaf,
         (select k.root from signing_key k where k.organisation_id = r.organisation_id order by k.created_at limit 1),
         (select count(*)::int from record_element e where e.organisation_id = r.organisation_id and e.record_id = r.id),
         (select jsonb_agg(jsonb_build_object('tag', e.tag, 'by', n.code, 'at', n.sealed_at) order by e.tag) from record_element e
            join record n on n.organisation_id = e.organisation_id and n.id = e.replaced_by where e.organisation_id = r.organisation_id and e.record_id = r.id)
    from record r join organisation o on o.id = r.organisation_id
   where r.sealing = 'sealed' and (r.code = upper(a_key) or r.document_digest = lower(a_key) or r.range_digest = lower(a_key) or r.file_digest = lower(a_key))
$$;
--> statement-breakpoint
-- For whoever holds the file: the leaf's own text, so that they can hash it themselves. The salt in it is theirs to know by then.
create function entrance.log_leaf_text(a_position bigint) returns text
language sql security definer set search_path = public, pg_temp as $$ select l.text from log_leaf l where l.position = a_position $$;
--> statement-breakpoint
-- The roots of every organisation's keys: what a file that somebody brings is held against.
create function entrance.signing_roots() returns setof text
language sql security definer set search_path = public, pg_temp as $$ select distinct k.root from signing_key k $$;
--> statement-breakpoint
do $$ declare f text; begin
  foreach f in array array['record_of(text)', 'log_leaf_text(bigint)', 'signing_roots()'] loop
    execute format('revoke all on function entrance.%s from public', f);
    execute format('grant execute on function entrance.%s to smoothside_app', f);
  end loop;
end $$;
