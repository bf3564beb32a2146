CREATE TABLE "question" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"about" jsonb NOT NULL,
	"words" text NOT NULL,
	"state" text DEFAULT 'open' NOT NULL,
	"written_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"sheet_id" uuid,
	"answer" jsonb,
	"answered_by" uuid,
	"answered_at" timestamp with time zone,
	CONSTRAINT "question_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "question_event" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"sheet_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"detail" text DEFAULT '' NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "question_event_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "question_sheet" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"name" text NOT NULL,
	"email" text,
	"text" text NOT NULL,
	"sent_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "question_sheet_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
ALTER TABLE "question" ADD CONSTRAINT "question_written_by_account_id_fk" FOREIGN KEY ("written_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "question" ADD CONSTRAINT "question_answered_by_account_id_fk" FOREIGN KEY ("answered_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "question" ADD CONSTRAINT "question_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "question" ADD CONSTRAINT "question_organisation_id_sheet_id_question_sheet_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sheet_id") REFERENCES "public"."question_sheet"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "question_event" ADD CONSTRAINT "question_event_organisation_id_sheet_id_question_sheet_organisation_id_id_fk" FOREIGN KEY ("organisation_id","sheet_id") REFERENCES "public"."question_sheet"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "question_sheet" ADD CONSTRAINT "question_sheet_sent_by_account_id_fk" FOREIGN KEY ("sent_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "question_sheet" ADD CONSTRAINT "question_sheet_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "question_job" ON "question" USING btree ("organisation_id","job_id");--> statement-breakpoint
CREATE INDEX "question_event_sheet" ON "question_event" USING btree ("organisation_id","sheet_id");--> statement-breakpoint
CREATE INDEX "question_sheet_job" ON "question_sheet" USING btree ("organisation_id","job_id");