CREATE TABLE "instrument" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"unit" text NOT NULL,
	"uncertainty" bigint NOT NULL,
	"text" text NOT NULL,
	"source" text NOT NULL,
	"checked_on" date,
	"written_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "instrument_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
ALTER TABLE "instrument" ADD CONSTRAINT "instrument_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "instrument" ADD CONSTRAINT "instrument_written_by_account_id_fk" FOREIGN KEY ("written_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "instrument_name" ON "instrument" USING btree ("organisation_id",lower("name")) WHERE ended_at is null;