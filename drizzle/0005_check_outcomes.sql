ALTER TABLE "check_state" ADD COLUMN "at" integer DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE "check_state" ADD COLUMN "outcome" jsonb DEFAULT '{}'::jsonb NOT NULL;--> statement-breakpoint
-- What was kept whole so far goes into its rows.
update check_state c set at = x.place - 1, outcome = x.outcome
  from round_state s cross join lateral jsonb_array_elements(s.outcome->'checks') with ordinality x(outcome, place)
 where c.organisation_id = s.organisation_id and c.round_id = s.round_id and c.element_id = (x.outcome->>'element')::uuid and c.check_id = x.outcome->>'check' and c.face = coalesce(x.outcome->>'face', '');
--> statement-breakpoint
update round_state set outcome = outcome - 'checks';
