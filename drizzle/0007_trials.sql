CREATE TABLE "trial" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"element_id" uuid NOT NULL,
	"trial" jsonb NOT NULL,
	"written_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "trial_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
ALTER TABLE "trial" ADD CONSTRAINT "trial_written_by_account_id_fk" FOREIGN KEY ("written_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "trial" ADD CONSTRAINT "trial_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "trial" ADD CONSTRAINT "trial_organisation_id_element_id_element_organisation_id_id_fk" FOREIGN KEY ("organisation_id","element_id") REFERENCES "public"."element"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "trial_job" ON "trial" USING btree ("organisation_id","job_id","created_at");