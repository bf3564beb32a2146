CREATE TABLE "job_hold" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"reason" text NOT NULL,
	"placed_by" uuid NOT NULL,
	"placed_at" timestamp with time zone DEFAULT now() NOT NULL,
	"lifted_by" uuid,
	"lifted_at" timestamp with time zone,
	CONSTRAINT "job_hold_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "erasure" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"entry_id" uuid,
	"photo" text,
	"reason" text NOT NULL,
	"asked_by" uuid NOT NULL,
	"asked_at" timestamp with time zone DEFAULT now() NOT NULL,
	"withdrawn_at" timestamp with time zone,
	"done_by" uuid,
	"done_at" timestamp with time zone,
	CONSTRAINT "erasure_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
ALTER TABLE "job_hold" ADD CONSTRAINT "job_hold_placed_by_account_id_fk" FOREIGN KEY ("placed_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job_hold" ADD CONSTRAINT "job_hold_lifted_by_account_id_fk" FOREIGN KEY ("lifted_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job_hold" ADD CONSTRAINT "job_hold_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "erasure" ADD CONSTRAINT "erasure_asked_by_account_id_fk" FOREIGN KEY ("asked_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "erasure" ADD CONSTRAINT "erasure_done_by_account_id_fk" FOREIGN KEY ("done_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "erasure" ADD CONSTRAINT "erasure_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "erasure" ADD CONSTRAINT "erasure_organisation_id_entry_id_entry_organisation_id_id_fk" FOREIGN KEY ("organisation_id","entry_id") REFERENCES "public"."entry"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "job_hold_one" ON "job_hold" USING btree ("organisation_id","job_id") WHERE lifted_at is null;--> statement-breakpoint
CREATE INDEX "entry_erased" ON "entry" USING btree ("organisation_id","round_id") WHERE payload_text is null;