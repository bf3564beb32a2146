CREATE TABLE "account" (
	"id" uuid PRIMARY KEY NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"language" text DEFAULT 'en' NOT NULL,
	"password_hash" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "account_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "audit_row" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"account_id" uuid,
	"act" text NOT NULL,
	"subject" text NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "audit_row_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "client" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "client_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "contact" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"client_id" uuid NOT NULL,
	"account_id" uuid,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"phone" text DEFAULT '' NOT NULL,
	"title" text DEFAULT '' NOT NULL,
	"accepts" boolean DEFAULT false NOT NULL,
	"mailbox" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "contact_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "installation" (
	"id" integer PRIMARY KEY NOT NULL,
	"store_epoch" uuid NOT NULL,
	"log_epoch" integer DEFAULT 1 NOT NULL,
	"witness_key" text,
	"witness_certificate" text,
	"worker_seen_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "link" (
	"token_hash" text PRIMARY KEY NOT NULL,
	"purpose" text NOT NULL,
	"account_id" uuid,
	"organisation_id" uuid,
	"contact_id" uuid,
	"record_id" uuid,
	"role" text,
	"email" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"redeemed_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "membership" (
	"organisation_id" uuid NOT NULL,
	"account_id" uuid NOT NULL,
	"role" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "membership_organisation_id_account_id_pk" PRIMARY KEY("organisation_id","account_id")
);
--> statement-breakpoint
CREATE TABLE "organisation" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"code" text NOT NULL,
	"system" text DEFAULT 'imperial' NOT NULL,
	"language" text DEFAULT 'en' NOT NULL,
	"time_zone" text NOT NULL,
	"phone" text,
	"next_job" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "organisation_code_unique" UNIQUE("code")
);
--> statement-breakpoint
CREATE TABLE "session" (
	"token_hash" text PRIMARY KEY NOT NULL,
	"account_id" uuid NOT NULL,
	"organisation_id" uuid,
	"standing" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "authority" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"name" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "authority_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "basis" (
	"organisation_id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"digest" text NOT NULL,
	"text" text NOT NULL,
	"written_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "basis_organisation_id_job_id_digest_pk" PRIMARY KEY("organisation_id","job_id","digest")
);
--> statement-breakpoint
CREATE TABLE "element" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"tag" text NOT NULL,
	CONSTRAINT "element_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "job" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"number" integer NOT NULL,
	"site_id" uuid NOT NULL,
	"client_id" uuid NOT NULL,
	"title" text NOT NULL,
	"needed_by" date,
	"onsite_name" text DEFAULT '' NOT NULL,
	"onsite_phone" text DEFAULT '' NOT NULL,
	"emergency_name" text DEFAULT '' NOT NULL,
	"emergency_phone" text DEFAULT '' NOT NULL,
	"contract" text DEFAULT '' NOT NULL,
	"permit" text DEFAULT '' NOT NULL,
	"building_code" text DEFAULT '' NOT NULL,
	"gate_tag" text DEFAULT '' NOT NULL,
	"system" text NOT NULL,
	"language" text NOT NULL,
	"checklists" jsonb NOT NULL,
	"state" text DEFAULT 'drawing' NOT NULL,
	"move_by" text DEFAULT 'manager' NOT NULL,
	"move" text DEFAULT 'drawLine' NOT NULL,
	"move_count" integer DEFAULT 0 NOT NULL,
	"move_since" timestamp with time zone DEFAULT now() NOT NULL,
	"strip" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"open_tags" integer DEFAULT 0 NOT NULL,
	"held_out" integer DEFAULT 0 NOT NULL,
	"search_text" text DEFAULT '' NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "job_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "job_number" UNIQUE("organisation_id","number")
);
--> statement-breakpoint
CREATE TABLE "job_given" (
	"organisation_id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"account_id" uuid NOT NULL,
	"given_as" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "job_given_organisation_id_job_id_account_id_pk" PRIMARY KEY("organisation_id","job_id","account_id")
);
--> statement-breakpoint
CREATE TABLE "line_version" (
	"organisation_id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"line" text NOT NULL,
	"written_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "line_version_organisation_id_job_id_version_pk" PRIMARY KEY("organisation_id","job_id","version")
);
--> statement-breakpoint
CREATE TABLE "provision" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"authority_id" uuid,
	"client_id" uuid,
	"setting" text NOT NULL,
	"measurand" text NOT NULL,
	"provision" jsonb NOT NULL,
	"written_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "provision_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "site" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"client_id" uuid NOT NULL,
	"authority_id" uuid,
	"name" text NOT NULL,
	"address" text DEFAULT '' NOT NULL,
	"time_zone" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "site_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "limiter" (
	"key" text PRIMARY KEY NOT NULL,
	"points" integer DEFAULT 0 NOT NULL,
	"expire" bigint
);
--> statement-breakpoint
CREATE TABLE "acceptance" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"record_id" uuid NOT NULL,
	"contact_id" uuid NOT NULL,
	"deficiency_id" uuid,
	"meaning" text NOT NULL,
	"sheet" text NOT NULL,
	"file_digest" text NOT NULL,
	"leaf" bigint NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "acceptance_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "delivery_event" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"recipient_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"detail" text DEFAULT '' NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "delivery_event_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "log_head" (
	"size" bigint PRIMARY KEY NOT NULL,
	"epoch" integer NOT NULL,
	"root" text NOT NULL,
	"text" text NOT NULL,
	"signature" text NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "log_leaf" (
	"position" bigint PRIMARY KEY NOT NULL,
	"epoch" integer NOT NULL,
	"kind" text NOT NULL,
	"text" text NOT NULL,
	"hash" text NOT NULL,
	"organisation_id" uuid,
	"record_id" uuid,
	"at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "recipient" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"transmittal_id" uuid NOT NULL,
	"record_id" uuid NOT NULL,
	"contact_id" uuid NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	CONSTRAINT "recipient_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "recipient_once" UNIQUE("organisation_id","transmittal_id","contact_id")
);
--> statement-breakpoint
CREATE TABLE "record" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"round_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"scope" text NOT NULL,
	"code" text NOT NULL,
	"sealing" text DEFAULT 'frozen' NOT NULL,
	"trouble" text,
	"standing" text DEFAULT 'current' NOT NULL,
	"standing_reason" text,
	"border" integer NOT NULL,
	"over_devices" text,
	"document_digest" text,
	"pdf_digest" text,
	"range_digest" text,
	"file_digest" text,
	"pages" integer,
	"bytes" integer,
	"leaf" bigint,
	"sentence" jsonb,
	"requested_by" uuid NOT NULL,
	"requested_at" timestamp with time zone DEFAULT now() NOT NULL,
	"sealed_at" timestamp with time zone,
	CONSTRAINT "record_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "record_code" UNIQUE("organisation_id","code"),
	CONSTRAINT "record_number" UNIQUE("organisation_id","job_id","number")
);
--> statement-breakpoint
CREATE TABLE "record_element" (
	"organisation_id" uuid NOT NULL,
	"record_id" uuid NOT NULL,
	"element_id" uuid NOT NULL,
	"tag" text NOT NULL,
	"verdict" text NOT NULL,
	"released" text NOT NULL,
	"replaced_by" uuid,
	CONSTRAINT "record_element_organisation_id_record_id_element_id_pk" PRIMARY KEY("organisation_id","record_id","element_id")
);
--> statement-breakpoint
CREATE TABLE "signing_key" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"wrapped_key" text NOT NULL,
	"certificate" text NOT NULL,
	"root" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"retired_at" timestamp with time zone,
	CONSTRAINT "signing_key_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "transmittal" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"record_id" uuid NOT NULL,
	"message" text DEFAULT '' NOT NULL,
	"sent_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "transmittal_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "check_state" (
	"organisation_id" uuid NOT NULL,
	"round_id" uuid NOT NULL,
	"element_id" uuid NOT NULL,
	"check_id" text NOT NULL,
	"face" text NOT NULL,
	"verdict" text NOT NULL,
	"settled" boolean NOT NULL,
	"read_again" boolean NOT NULL,
	CONSTRAINT "check_state_organisation_id_round_id_element_id_check_id_face_pk" PRIMARY KEY("organisation_id","round_id","element_id","check_id","face")
);
--> statement-breakpoint
CREATE TABLE "deficiency_state" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"round_id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"tag" text NOT NULL,
	"element_id" uuid NOT NULL,
	"check_id" text NOT NULL,
	"class" text NOT NULL,
	"state" text NOT NULL,
	"assigned_to" uuid,
	"due" timestamp with time zone,
	"outcome" jsonb NOT NULL,
	CONSTRAINT "deficiency_state_organisation_id_id_pk" PRIMARY KEY("organisation_id","id")
);
--> statement-breakpoint
CREATE TABLE "entry" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"round_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"job_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"author_id" uuid NOT NULL,
	"element_id" uuid,
	"check_id" text,
	"digest" text NOT NULL,
	"envelope_text" text NOT NULL,
	"payload_text" text,
	"payload" jsonb,
	"accepted_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "entry_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "entry_number" UNIQUE("organisation_id","round_id","number")
);
--> statement-breakpoint
CREATE TABLE "entry_aside" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"digest" text NOT NULL,
	"round_id" uuid NOT NULL,
	"why" text NOT NULL,
	"envelope_text" text NOT NULL,
	"payload_text" text NOT NULL,
	"author_id" uuid NOT NULL,
	"received_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "entry_aside_organisation_id_id_digest_pk" PRIMARY KEY("organisation_id","id","digest")
);
--> statement-breakpoint
CREATE TABLE "photo" (
	"organisation_id" uuid NOT NULL,
	"digest" text NOT NULL,
	"job_id" uuid NOT NULL,
	"bytes" integer NOT NULL,
	"width" integer NOT NULL,
	"height" integer NOT NULL,
	"sent_by" uuid NOT NULL,
	"stored_at" timestamp with time zone DEFAULT now() NOT NULL,
	"erased_at" timestamp with time zone,
	CONSTRAINT "photo_organisation_id_digest_pk" PRIMARY KEY("organisation_id","digest")
);
--> statement-breakpoint
CREATE TABLE "round" (
	"organisation_id" uuid NOT NULL,
	"id" uuid NOT NULL,
	"job_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"state" text DEFAULT 'open' NOT NULL,
	"accepted" integer DEFAULT 0 NOT NULL,
	"basis" text NOT NULL,
	"opened_by" uuid NOT NULL,
	"opened_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "round_organisation_id_id_pk" PRIMARY KEY("organisation_id","id"),
	CONSTRAINT "round_number" UNIQUE("organisation_id","job_id","number")
);
--> statement-breakpoint
CREATE TABLE "round_device" (
	"organisation_id" uuid NOT NULL,
	"round_id" uuid NOT NULL,
	"device_id" uuid NOT NULL,
	"account_id" uuid NOT NULL,
	"name" text NOT NULL,
	"letter" text NOT NULL,
	"taken_at" timestamp with time zone DEFAULT now() NOT NULL,
	"empty_at" timestamp with time zone,
	CONSTRAINT "round_device_organisation_id_round_id_device_id_pk" PRIMARY KEY("organisation_id","round_id","device_id"),
	CONSTRAINT "round_device_letter" UNIQUE("organisation_id","round_id","letter")
);
--> statement-breakpoint
CREATE TABLE "round_state" (
	"organisation_id" uuid NOT NULL,
	"round_id" uuid NOT NULL,
	"accepted" integer NOT NULL,
	"outcome" jsonb NOT NULL,
	CONSTRAINT "round_state_organisation_id_round_id_pk" PRIMARY KEY("organisation_id","round_id")
);
--> statement-breakpoint
ALTER TABLE "audit_row" ADD CONSTRAINT "audit_row_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_row" ADD CONSTRAINT "audit_row_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "client" ADD CONSTRAINT "client_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "contact" ADD CONSTRAINT "contact_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "contact" ADD CONSTRAINT "contact_organisation_id_client_id_client_organisation_id_id_fk" FOREIGN KEY ("organisation_id","client_id") REFERENCES "public"."client"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "link" ADD CONSTRAINT "link_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "link" ADD CONSTRAINT "link_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "membership" ADD CONSTRAINT "membership_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "membership" ADD CONSTRAINT "membership_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "authority" ADD CONSTRAINT "authority_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "basis" ADD CONSTRAINT "basis_written_by_account_id_fk" FOREIGN KEY ("written_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "basis" ADD CONSTRAINT "basis_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "element" ADD CONSTRAINT "element_organisation_id_site_id_site_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."site"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job" ADD CONSTRAINT "job_created_by_account_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job" ADD CONSTRAINT "job_organisation_id_site_id_site_organisation_id_id_fk" FOREIGN KEY ("organisation_id","site_id") REFERENCES "public"."site"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job" ADD CONSTRAINT "job_organisation_id_client_id_client_organisation_id_id_fk" FOREIGN KEY ("organisation_id","client_id") REFERENCES "public"."client"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job_given" ADD CONSTRAINT "job_given_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job_given" ADD CONSTRAINT "job_given_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "line_version" ADD CONSTRAINT "line_version_written_by_account_id_fk" FOREIGN KEY ("written_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "line_version" ADD CONSTRAINT "line_version_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "provision" ADD CONSTRAINT "provision_written_by_account_id_fk" FOREIGN KEY ("written_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "provision" ADD CONSTRAINT "provision_organisation_id_authority_id_authority_organisation_id_id_fk" FOREIGN KEY ("organisation_id","authority_id") REFERENCES "public"."authority"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "provision" ADD CONSTRAINT "provision_organisation_id_client_id_client_organisation_id_id_fk" FOREIGN KEY ("organisation_id","client_id") REFERENCES "public"."client"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "site" ADD CONSTRAINT "site_organisation_id_client_id_client_organisation_id_id_fk" FOREIGN KEY ("organisation_id","client_id") REFERENCES "public"."client"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "site" ADD CONSTRAINT "site_organisation_id_authority_id_authority_organisation_id_id_fk" FOREIGN KEY ("organisation_id","authority_id") REFERENCES "public"."authority"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acceptance" ADD CONSTRAINT "acceptance_organisation_id_record_id_record_organisation_id_id_fk" FOREIGN KEY ("organisation_id","record_id") REFERENCES "public"."record"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acceptance" ADD CONSTRAINT "acceptance_organisation_id_contact_id_contact_organisation_id_id_fk" FOREIGN KEY ("organisation_id","contact_id") REFERENCES "public"."contact"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "delivery_event" ADD CONSTRAINT "delivery_event_organisation_id_recipient_id_recipient_organisation_id_id_fk" FOREIGN KEY ("organisation_id","recipient_id") REFERENCES "public"."recipient"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "log_leaf" ADD CONSTRAINT "log_leaf_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recipient" ADD CONSTRAINT "recipient_organisation_id_transmittal_id_transmittal_organisation_id_id_fk" FOREIGN KEY ("organisation_id","transmittal_id") REFERENCES "public"."transmittal"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recipient" ADD CONSTRAINT "recipient_organisation_id_record_id_record_organisation_id_id_fk" FOREIGN KEY ("organisation_id","record_id") REFERENCES "public"."record"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recipient" ADD CONSTRAINT "recipient_organisation_id_contact_id_contact_organisation_id_id_fk" FOREIGN KEY ("organisation_id","contact_id") REFERENCES "public"."contact"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "record" ADD CONSTRAINT "record_requested_by_account_id_fk" FOREIGN KEY ("requested_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "record" ADD CONSTRAINT "record_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "record" ADD CONSTRAINT "record_organisation_id_round_id_round_organisation_id_id_fk" FOREIGN KEY ("organisation_id","round_id") REFERENCES "public"."round"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "record_element" ADD CONSTRAINT "record_element_organisation_id_record_id_record_organisation_id_id_fk" FOREIGN KEY ("organisation_id","record_id") REFERENCES "public"."record"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "signing_key" ADD CONSTRAINT "signing_key_organisation_id_organisation_id_fk" FOREIGN KEY ("organisation_id") REFERENCES "public"."organisation"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "transmittal" ADD CONSTRAINT "transmittal_sent_by_account_id_fk" FOREIGN KEY ("sent_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "transmittal" ADD CONSTRAINT "transmittal_organisation_id_record_id_record_organisation_id_id_fk" FOREIGN KEY ("organisation_id","record_id") REFERENCES "public"."record"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "check_state" ADD CONSTRAINT "check_state_organisation_id_round_id_round_organisation_id_id_fk" FOREIGN KEY ("organisation_id","round_id") REFERENCES "public"."round"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "deficiency_state" ADD CONSTRAINT "deficiency_state_organisation_id_round_id_round_organisation_id_id_fk" FOREIGN KEY ("organisation_id","round_id") REFERENCES "public"."round"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry" ADD CONSTRAINT "entry_organisation_id_round_id_round_organisation_id_id_fk" FOREIGN KEY ("organisation_id","round_id") REFERENCES "public"."round"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_aside" ADD CONSTRAINT "entry_aside_organisation_id_round_id_round_organisation_id_id_fk" FOREIGN KEY ("organisation_id","round_id") REFERENCES "public"."round"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photo" ADD CONSTRAINT "photo_sent_by_account_id_fk" FOREIGN KEY ("sent_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "photo" ADD CONSTRAINT "photo_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "round" ADD CONSTRAINT "round_opened_by_account_id_fk" FOREIGN KEY ("opened_by") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "round" ADD CONSTRAINT "round_organisation_id_job_id_job_organisation_id_id_fk" FOREIGN KEY ("organisation_id","job_id") REFERENCES "public"."job"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "round_device" ADD CONSTRAINT "round_device_account_id_account_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."account"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "round_device" ADD CONSTRAINT "round_device_organisation_id_round_id_round_organisation_id_id_fk" FOREIGN KEY ("organisation_id","round_id") REFERENCES "public"."round"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "round_state" ADD CONSTRAINT "round_state_organisation_id_round_id_round_organisation_id_id_fk" FOREIGN KEY ("organisation_id","round_id") REFERENCES "public"."round"("organisation_id","id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "client_name" ON "client" USING btree ("organisation_id",lower("name"));--> statement-breakpoint
CREATE UNIQUE INDEX "contact_email" ON "contact" USING btree ("organisation_id","client_id","email");--> statement-breakpoint
CREATE INDEX "contact_account" ON "contact" USING btree ("account_id");--> statement-breakpoint
CREATE INDEX "membership_account" ON "membership" USING btree ("account_id");--> statement-breakpoint
CREATE INDEX "session_account" ON "session" USING btree ("account_id");--> statement-breakpoint
CREATE UNIQUE INDEX "authority_name" ON "authority" USING btree ("organisation_id",lower("name"));--> statement-breakpoint
CREATE INDEX "element_site" ON "element" USING btree ("organisation_id","site_id");--> statement-breakpoint
CREATE INDEX "job_needed" ON "job" USING btree ("organisation_id","needed_by","id");--> statement-breakpoint
CREATE INDEX "job_state" ON "job" USING btree ("organisation_id","state","needed_by","id");--> statement-breakpoint
CREATE INDEX "job_site" ON "job" USING btree ("organisation_id","site_id");--> statement-breakpoint
CREATE INDEX "job_given_account" ON "job_given" USING btree ("account_id","organisation_id");--> statement-breakpoint
CREATE INDEX "provision_in_force" ON "provision" USING btree ("organisation_id","measurand") WHERE ended_at is null;--> statement-breakpoint
CREATE INDEX "site_client" ON "site" USING btree ("organisation_id","client_id");--> statement-breakpoint
CREATE INDEX "delivery_recipient" ON "delivery_event" USING btree ("organisation_id","recipient_id");--> statement-breakpoint
CREATE INDEX "log_leaf_record" ON "log_leaf" USING btree ("record_id");--> statement-breakpoint
CREATE INDEX "recipient_contact" ON "recipient" USING btree ("organisation_id","contact_id");--> statement-breakpoint
CREATE INDEX "record_document" ON "record" USING btree ("document_digest");--> statement-breakpoint
CREATE INDEX "record_public_code" ON "record" USING btree ("code");--> statement-breakpoint
CREATE INDEX "deficiency_job" ON "deficiency_state" USING btree ("organisation_id","job_id");--> statement-breakpoint
CREATE INDEX "deficiency_state_assigned" ON "deficiency_state" USING btree ("organisation_id","assigned_to","state");