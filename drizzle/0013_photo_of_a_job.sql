ALTER TABLE "photo" DROP CONSTRAINT "photo_organisation_id_digest_pk";--> statement-breakpoint
ALTER TABLE "check_state" ALTER COLUMN "at" DROP DEFAULT;--> statement-breakpoint
ALTER TABLE "check_state" ALTER COLUMN "outcome" DROP DEFAULT;--> statement-breakpoint
ALTER TABLE "photo" ADD CONSTRAINT "photo_organisation_id_digest_job_id_pk" PRIMARY KEY("organisation_id","digest","job_id");