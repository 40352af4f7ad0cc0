CREATE TABLE "board_events" (
	"shop_id" uuid NOT NULL,
	"seq" bigint NOT NULL,
	"kind" text NOT NULL,
	"event" jsonb NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "board_events_shop_id_seq_pk" PRIMARY KEY("shop_id","seq")
);
--> statement-breakpoint
CREATE TABLE "command_log" (
	"shop_id" uuid NOT NULL,
	"command_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"body_sha256" text NOT NULL,
	"status" integer NOT NULL,
	"result" jsonb NOT NULL,
	"seq" bigint,
	"person_id" uuid,
	"device_id" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "command_log_shop_id_command_id_pk" PRIMARY KEY("shop_id","command_id")
);
--> statement-breakpoint
CREATE TABLE "day_numbers" (
	"shop_id" uuid NOT NULL,
	"day" date NOT NULL,
	"last" integer DEFAULT 0 NOT NULL,
	CONSTRAINT "day_numbers_shop_id_day_pk" PRIMARY KEY("shop_id","day")
);
--> statement-breakpoint
CREATE TABLE "session" (
	"sid" text PRIMARY KEY NOT NULL,
	"sess" jsonb NOT NULL,
	"expire" timestamp with time zone NOT NULL,
	"person_id" uuid GENERATED ALWAYS AS (((sess->'passport'->>'user'))::uuid) STORED
);
--> statement-breakpoint
CREATE TABLE "setup_codes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"code_sha256" "bytea" NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"used_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "shop_sequences" (
	"shop_id" uuid PRIMARY KEY NOT NULL,
	"seq" bigint DEFAULT 0 NOT NULL,
	"last_fitting_number" integer DEFAULT 0 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "shop_texts" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"locale" text NOT NULL,
	"version" integer NOT NULL,
	"body" text NOT NULL,
	"sha256" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"reviewed_by" uuid,
	"reviewed_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "shops" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"zone" text NOT NULL,
	"locale" text DEFAULT 'en' NOT NULL,
	"age_of_majority" integer DEFAULT 18 NOT NULL,
	"promise_minutes" integer DEFAULT 20 NOT NULL,
	"near_mass_kg" integer DEFAULT 2 NOT NULL,
	"near_height_cm" integer DEFAULT 3 NOT NULL,
	"claim_ages_minutes" integer DEFAULT 30 NOT NULL,
	"demo" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "sites" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"name" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "table_approvals" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"edition" text NOT NULL,
	"rules_version" text NOT NULL,
	"compared_with" text NOT NULL,
	"approved" boolean NOT NULL,
	"person_id" uuid NOT NULL,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "devices" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"name" text NOT NULL,
	"station" text NOT NULL,
	"token_sha256" "bytea" NOT NULL,
	"enrolled_by" uuid NOT NULL,
	"enrolled_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revoked_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"shop_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"roles" text[] NOT NULL,
	"pin_hash" text,
	"pin_tries" integer DEFAULT 0 NOT NULL,
	"ended_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_shop_id_person_id_pk" PRIMARY KEY("shop_id","person_id")
);
--> statement-breakpoint
CREATE TABLE "office_changes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"subject_id" uuid NOT NULL,
	"fields" text[] NOT NULL,
	"person_id" uuid,
	"device_id" uuid,
	"command_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"locale" text DEFAULT 'en' NOT NULL,
	"disabled_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "binding_model_approvals" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"binding_model_id" uuid NOT NULL,
	"content_sha256" text NOT NULL,
	"person_id" uuid NOT NULL,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "binding_models" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"name" text NOT NULL,
	"track" jsonb NOT NULL,
	"accepts" text[] NOT NULL,
	"refuses" text[] NOT NULL,
	"brake_mm" integer,
	"manual_document" text DEFAULT '' NOT NULL,
	"manual_edition" text DEFAULT '' NOT NULL,
	"manual_page" text DEFAULT '' NOT NULL,
	"window_note" text DEFAULT '' NOT NULL,
	"window_picture" "bytea",
	"window_picture_type" text,
	"content_sha256" text DEFAULT '' NOT NULL,
	"version" integer DEFAULT 1 NOT NULL,
	"blocked_at" timestamp with time zone,
	"blocked_reason" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "boots" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"code" text NOT NULL,
	"state" text DEFAULT 'commissioning' NOT NULL,
	"state_since" timestamp with time zone DEFAULT now() NOT NULL,
	"home_site_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"rack_place" text,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"model" text NOT NULL,
	"mondo" integer NOT NULL,
	"sole_length_mm" integer NOT NULL,
	"sole_type" text NOT NULL,
	"season" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "labels" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"text" text NOT NULL,
	"item_kind" text NOT NULL,
	"item_id" uuid NOT NULL,
	"side" text NOT NULL,
	"since" timestamp with time zone DEFAULT now() NOT NULL,
	"until" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "lifecycle_edges" (
	"from_state" text NOT NULL,
	"to_state" text NOT NULL,
	CONSTRAINT "lifecycle_edges_from_state_to_state_pk" PRIMARY KEY("from_state","to_state")
);
--> statement-breakpoint
CREATE TABLE "preset_changes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"ski_id" uuid NOT NULL,
	"preset_toe" integer,
	"preset_heel" integer,
	"preset_turns" double precision,
	"preset_version" integer NOT NULL,
	"toe_correction" double precision NOT NULL,
	"heel_correction" double precision NOT NULL,
	"reason" text NOT NULL,
	"fitting_id" uuid,
	"person_id" uuid,
	"device_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "ski_models" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"name" text NOT NULL,
	"waist_mm" integer NOT NULL,
	"offset_mm" double precision DEFAULT 0 NOT NULL,
	"junior" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "ski_pairs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"code" text NOT NULL,
	"state" text DEFAULT 'commissioning' NOT NULL,
	"state_since" timestamp with time zone DEFAULT now() NOT NULL,
	"home_site_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"rack_place" text,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"ski_model_id" uuid NOT NULL,
	"binding_model_id" uuid NOT NULL,
	"length_cm" integer NOT NULL,
	"season" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "skis" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"ski_pair_id" uuid NOT NULL,
	"side" text NOT NULL,
	"preset_toe" integer,
	"preset_heel" integer,
	"preset_turns" double precision,
	"preset_read_at" timestamp with time zone,
	"preset_version" integer DEFAULT 0 NOT NULL,
	"toe_correction" double precision DEFAULT 0 NOT NULL,
	"heel_correction" double precision DEFAULT 0 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "state_changes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"item_kind" text NOT NULL,
	"item_id" uuid NOT NULL,
	"from_state" text NOT NULL,
	"to_state" text NOT NULL,
	"site_id" uuid NOT NULL,
	"rack_place" text,
	"reason" text,
	"subject_id" uuid,
	"undoes_id" uuid,
	"person_id" uuid,
	"device_id" uuid,
	"command_id" uuid,
	"item_seq" bigint DEFAULT 0 NOT NULL,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "door_links" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"token_sha256" "bytea" NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "fitting_inputs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"renter_id" uuid NOT NULL,
	"salt" "bytea" NOT NULL,
	"mass" jsonb NOT NULL,
	"mass_source" text NOT NULL,
	"mass_by" uuid,
	"height" jsonb NOT NULL,
	"height_source" text NOT NULL,
	"height_by" uuid,
	"age" integer NOT NULL,
	"skier_type" text NOT NULL,
	"request" integer DEFAULT 0 NOT NULL,
	"request_signature" "bytea",
	"request_signed_name" text,
	"request_signed_at" timestamp with time zone,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "form_links" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"token_sha256" "bytea" NOT NULL,
	"draft" jsonb,
	"draft_version" integer DEFAULT 0 NOT NULL,
	"rental_id" uuid,
	"submitted_at" timestamp with time zone,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "own_boots" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"rental_id" uuid NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"sole_length_mm" integer NOT NULL,
	"sole_type" text NOT NULL,
	"wear" text NOT NULL,
	"judged_by" uuid NOT NULL,
	"second_look_by" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "rental_items" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"rental_id" uuid NOT NULL,
	"fitting_id" uuid NOT NULL,
	"item_kind" text NOT NULL,
	"item_id" uuid NOT NULL,
	"side" text NOT NULL,
	"out_at" timestamp with time zone NOT NULL,
	"back_at" timestamp with time zone,
	"return_id" uuid
);
--> statement-breakpoint
CREATE TABLE "rentals" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"renter_id" uuid NOT NULL,
	"day" date NOT NULL,
	"number" integer NOT NULL,
	"state" text NOT NULL,
	"starts_on" date NOT NULL,
	"ends_on" date NOT NULL,
	"own_boots" boolean DEFAULT false NOT NULL,
	"shoe" jsonb,
	"wishes" text DEFAULT '' NOT NULL,
	"arrived_at" timestamp with time zone NOT NULL,
	"promised_at" timestamp with time zone NOT NULL,
	"taken_by" uuid,
	"taken_at" timestamp with time zone,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "renters" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"first_name" text NOT NULL,
	"last_name" text NOT NULL,
	"email" text,
	"phone" text,
	"locale" text DEFAULT 'en' NOT NULL,
	"birth_date" date,
	"guardian_name" text,
	"guardian_relation" text,
	"guardian_phone" text,
	"current_inputs_id" uuid,
	"version" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "fitting_decisions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"rental_id" uuid NOT NULL,
	"fitting_id" uuid,
	"ski_pair_id" uuid,
	"ski_id" uuid,
	"boots_id" uuid,
	"own_boots_id" uuid,
	"kind" text NOT NULL,
	"reason" text NOT NULL,
	"rows" integer,
	"value" double precision,
	"reading" jsonb,
	"person_id" uuid NOT NULL,
	"second_person_id" uuid,
	"device_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "fitting_record_parts" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"record_id" uuid NOT NULL,
	"ski_id" uuid NOT NULL,
	"side" text NOT NULL,
	"label" text NOT NULL,
	"target_toe_value" double precision NOT NULL,
	"target_heel_value" double precision NOT NULL,
	"reading" jsonb NOT NULL,
	"verdict" text NOT NULL,
	"decision_id" uuid,
	"preset_version" integer NOT NULL,
	"read_by" uuid NOT NULL,
	"read_at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "fitting_records" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"fitting_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"renter_id" uuid NOT NULL,
	"inputs_commitment" text NOT NULL,
	"inputs_hash" text NOT NULL,
	"edition" text NOT NULL,
	"rules_version" text NOT NULL,
	"approved" boolean NOT NULL,
	"row" text NOT NULL,
	"value" double precision NOT NULL,
	"sideways" boolean NOT NULL,
	"twist_nm" integer NOT NULL,
	"forward_lean_nm" integer NOT NULL,
	"row_steps" jsonb NOT NULL,
	"ski_pair_id" uuid NOT NULL,
	"ski_pair_code" text NOT NULL,
	"binding_model_id" uuid NOT NULL,
	"binding_model_name" text NOT NULL,
	"binding_content_sha256" text NOT NULL,
	"boots_id" uuid,
	"boots_code" text,
	"boots_owner" text NOT NULL,
	"sole_length_mm" integer NOT NULL,
	"sole_type" text NOT NULL,
	"target_toe" integer NOT NULL,
	"target_heel" integer NOT NULL,
	"target_turns" double precision,
	"decision_ids" uuid[] NOT NULL,
	"corrects_id" uuid,
	"correction_reason" text,
	"signed_by" uuid NOT NULL,
	"signed_device_id" uuid,
	"signed_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "fittings" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"rental_id" uuid NOT NULL,
	"renter_id" uuid NOT NULL,
	"inputs_id" uuid,
	"ski_pair_id" uuid NOT NULL,
	"boots_id" uuid,
	"own_boots_id" uuid,
	"state" text DEFAULT 'claimed' NOT NULL,
	"sole_length_mm" integer NOT NULL,
	"release" jsonb NOT NULL,
	"value" double precision NOT NULL,
	"track" jsonb NOT NULL,
	"targets" jsonb NOT NULL,
	"edition" text NOT NULL,
	"rules_version" text NOT NULL,
	"approved" boolean NOT NULL,
	"decision_ids" uuid[] DEFAULT '{}'::uuid[] NOT NULL,
	"basis" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"inputs_hash" text DEFAULT '' NOT NULL,
	"promised_at" timestamp with time zone NOT NULL,
	"claimed_by" uuid NOT NULL,
	"claimed_device_id" uuid,
	"claimed_at" timestamp with time zone NOT NULL,
	"held_by" uuid,
	"held_device_id" uuid,
	"held_since" timestamp with time zone,
	"record_id" uuid,
	"prepared_at" timestamp with time zone,
	"ended_at" timestamp with time zone,
	"end_reason" text,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "hand_overs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"fitting_id" uuid NOT NULL,
	"record_id" uuid NOT NULL,
	"rental_id" uuid NOT NULL,
	"signature_sha256" text NOT NULL,
	"signed_as" text NOT NULL,
	"text_id" uuid NOT NULL,
	"text_version" integer NOT NULL,
	"text_sha256" text NOT NULL,
	"sole_length_read_mm" integer,
	"person_id" uuid NOT NULL,
	"device_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "signatures" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"renter_id" uuid NOT NULL,
	"hand_over_id" uuid NOT NULL,
	"picture" "bytea" NOT NULL,
	"signed_name" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "ski_readings" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"fitting_id" uuid NOT NULL,
	"ski_id" uuid NOT NULL,
	"side" text NOT NULL,
	"reading" jsonb NOT NULL,
	"verdict" text NOT NULL,
	"decision_id" uuid,
	"preset_version" integer NOT NULL,
	"person_id" uuid NOT NULL,
	"device_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "ticket_holds" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"fitting_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"device_id" uuid,
	"took_over_from" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "call_back_steps" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"call_back_id" uuid NOT NULL,
	"step" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"person_id" uuid NOT NULL,
	"device_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "call_backs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"fitting_id" uuid NOT NULL,
	"rental_id" uuid NOT NULL,
	"record_id" uuid,
	"cause" text NOT NULL,
	"detail" text DEFAULT '' NOT NULL,
	"opened_by" uuid,
	"opened_at" timestamp with time zone NOT NULL,
	"last_step" text,
	"last_step_at" timestamp with time zone,
	"closed_at" timestamp with time zone,
	"step_count" integer DEFAULT 0 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "erasures" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"renter_id" uuid NOT NULL,
	"reason" text NOT NULL,
	"person_id" uuid,
	"erased_at" timestamp with time zone DEFAULT now() NOT NULL,
	"inputs_erased" integer NOT NULL
);
--> statement-breakpoint
CREATE TABLE "inspections" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"item_kind" text NOT NULL,
	"item_id" uuid NOT NULL,
	"checks" jsonb NOT NULL,
	"verdict" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"person_id" uuid NOT NULL,
	"device_id" uuid,
	"command_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "quarantines" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"item_kind" text NOT NULL,
	"item_id" uuid NOT NULL,
	"reason" text NOT NULL,
	"owner_id" uuid NOT NULL,
	"review_on" date NOT NULL,
	"opened_by" uuid,
	"opened_at" timestamp with time zone NOT NULL,
	"released_by" uuid,
	"released_at" timestamp with time zone,
	"released_to" text,
	"release_reason" text
);
--> statement-breakpoint
CREATE TABLE "returns" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"shop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"item_kind" text NOT NULL,
	"item_id" uuid NOT NULL,
	"side" text NOT NULL,
	"rental_id" uuid,
	"state_before" text,
	"sole_length_read_mm" integer,
	"person_id" uuid,
	"device_id" uuid,
	"command_id" uuid,
	"occurred_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "board_events" ADD CONSTRAINT "board_events_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "command_log" ADD CONSTRAINT "command_log_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "day_numbers" ADD CONSTRAINT "day_numbers_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "shop_sequences" ADD CONSTRAINT "shop_sequences_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "shop_texts" ADD CONSTRAINT "shop_texts_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sites" ADD CONSTRAINT "sites_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "table_approvals" ADD CONSTRAINT "table_approvals_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "devices" ADD CONSTRAINT "devices_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "devices" ADD CONSTRAINT "devices_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "devices" ADD CONSTRAINT "devices_enrolled_by_people_id_fk" FOREIGN KEY ("enrolled_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "office_changes" ADD CONSTRAINT "office_changes_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "binding_model_approvals" ADD CONSTRAINT "binding_model_approvals_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "binding_model_approvals" ADD CONSTRAINT "binding_model_approvals_binding_model_id_binding_models_id_fk" FOREIGN KEY ("binding_model_id") REFERENCES "public"."binding_models"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "binding_model_approvals" ADD CONSTRAINT "binding_model_approvals_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "binding_models" ADD CONSTRAINT "binding_models_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "boots" ADD CONSTRAINT "boots_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "boots" ADD CONSTRAINT "boots_home_site_id_sites_id_fk" FOREIGN KEY ("home_site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "boots" ADD CONSTRAINT "boots_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "labels" ADD CONSTRAINT "labels_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "preset_changes" ADD CONSTRAINT "preset_changes_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "preset_changes" ADD CONSTRAINT "preset_changes_ski_id_skis_id_fk" FOREIGN KEY ("ski_id") REFERENCES "public"."skis"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "preset_changes" ADD CONSTRAINT "preset_changes_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_models" ADD CONSTRAINT "ski_models_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_pairs" ADD CONSTRAINT "ski_pairs_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_pairs" ADD CONSTRAINT "ski_pairs_home_site_id_sites_id_fk" FOREIGN KEY ("home_site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_pairs" ADD CONSTRAINT "ski_pairs_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_pairs" ADD CONSTRAINT "ski_pairs_ski_model_id_ski_models_id_fk" FOREIGN KEY ("ski_model_id") REFERENCES "public"."ski_models"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_pairs" ADD CONSTRAINT "ski_pairs_binding_model_id_binding_models_id_fk" FOREIGN KEY ("binding_model_id") REFERENCES "public"."binding_models"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "skis" ADD CONSTRAINT "skis_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "skis" ADD CONSTRAINT "skis_ski_pair_id_ski_pairs_id_fk" FOREIGN KEY ("ski_pair_id") REFERENCES "public"."ski_pairs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "state_changes" ADD CONSTRAINT "state_changes_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "state_changes" ADD CONSTRAINT "state_changes_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "state_changes" ADD CONSTRAINT "state_changes_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "door_links" ADD CONSTRAINT "door_links_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "door_links" ADD CONSTRAINT "door_links_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "door_links" ADD CONSTRAINT "door_links_created_by_people_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_inputs" ADD CONSTRAINT "fitting_inputs_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_inputs" ADD CONSTRAINT "fitting_inputs_renter_id_renters_id_fk" FOREIGN KEY ("renter_id") REFERENCES "public"."renters"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_inputs" ADD CONSTRAINT "fitting_inputs_mass_by_people_id_fk" FOREIGN KEY ("mass_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_inputs" ADD CONSTRAINT "fitting_inputs_height_by_people_id_fk" FOREIGN KEY ("height_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_inputs" ADD CONSTRAINT "fitting_inputs_created_by_people_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "form_links" ADD CONSTRAINT "form_links_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "form_links" ADD CONSTRAINT "form_links_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "form_links" ADD CONSTRAINT "form_links_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "own_boots" ADD CONSTRAINT "own_boots_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "own_boots" ADD CONSTRAINT "own_boots_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "own_boots" ADD CONSTRAINT "own_boots_judged_by_people_id_fk" FOREIGN KEY ("judged_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "own_boots" ADD CONSTRAINT "own_boots_second_look_by_people_id_fk" FOREIGN KEY ("second_look_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rental_items" ADD CONSTRAINT "rental_items_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rental_items" ADD CONSTRAINT "rental_items_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rentals" ADD CONSTRAINT "rentals_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rentals" ADD CONSTRAINT "rentals_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rentals" ADD CONSTRAINT "rentals_renter_id_renters_id_fk" FOREIGN KEY ("renter_id") REFERENCES "public"."renters"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rentals" ADD CONSTRAINT "rentals_taken_by_people_id_fk" FOREIGN KEY ("taken_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "renters" ADD CONSTRAINT "renters_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_decisions" ADD CONSTRAINT "fitting_decisions_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_decisions" ADD CONSTRAINT "fitting_decisions_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_decisions" ADD CONSTRAINT "fitting_decisions_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_decisions" ADD CONSTRAINT "fitting_decisions_second_person_id_people_id_fk" FOREIGN KEY ("second_person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_record_parts" ADD CONSTRAINT "fitting_record_parts_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_record_parts" ADD CONSTRAINT "fitting_record_parts_record_id_fitting_records_id_fk" FOREIGN KEY ("record_id") REFERENCES "public"."fitting_records"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_record_parts" ADD CONSTRAINT "fitting_record_parts_ski_id_skis_id_fk" FOREIGN KEY ("ski_id") REFERENCES "public"."skis"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_record_parts" ADD CONSTRAINT "fitting_record_parts_read_by_people_id_fk" FOREIGN KEY ("read_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_records" ADD CONSTRAINT "fitting_records_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_records" ADD CONSTRAINT "fitting_records_fitting_id_fittings_id_fk" FOREIGN KEY ("fitting_id") REFERENCES "public"."fittings"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fitting_records" ADD CONSTRAINT "fitting_records_signed_by_people_id_fk" FOREIGN KEY ("signed_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_renter_id_renters_id_fk" FOREIGN KEY ("renter_id") REFERENCES "public"."renters"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_inputs_id_fitting_inputs_id_fk" FOREIGN KEY ("inputs_id") REFERENCES "public"."fitting_inputs"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_ski_pair_id_ski_pairs_id_fk" FOREIGN KEY ("ski_pair_id") REFERENCES "public"."ski_pairs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_boots_id_boots_id_fk" FOREIGN KEY ("boots_id") REFERENCES "public"."boots"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_own_boots_id_own_boots_id_fk" FOREIGN KEY ("own_boots_id") REFERENCES "public"."own_boots"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_claimed_by_people_id_fk" FOREIGN KEY ("claimed_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_claimed_device_id_devices_id_fk" FOREIGN KEY ("claimed_device_id") REFERENCES "public"."devices"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_held_by_people_id_fk" FOREIGN KEY ("held_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fittings" ADD CONSTRAINT "fittings_held_device_id_devices_id_fk" FOREIGN KEY ("held_device_id") REFERENCES "public"."devices"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "hand_overs" ADD CONSTRAINT "hand_overs_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "hand_overs" ADD CONSTRAINT "hand_overs_fitting_id_fittings_id_fk" FOREIGN KEY ("fitting_id") REFERENCES "public"."fittings"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "hand_overs" ADD CONSTRAINT "hand_overs_record_id_fitting_records_id_fk" FOREIGN KEY ("record_id") REFERENCES "public"."fitting_records"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "hand_overs" ADD CONSTRAINT "hand_overs_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "hand_overs" ADD CONSTRAINT "hand_overs_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "signatures" ADD CONSTRAINT "signatures_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "signatures" ADD CONSTRAINT "signatures_renter_id_renters_id_fk" FOREIGN KEY ("renter_id") REFERENCES "public"."renters"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "signatures" ADD CONSTRAINT "signatures_hand_over_id_hand_overs_id_fk" FOREIGN KEY ("hand_over_id") REFERENCES "public"."hand_overs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_readings" ADD CONSTRAINT "ski_readings_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_readings" ADD CONSTRAINT "ski_readings_fitting_id_fittings_id_fk" FOREIGN KEY ("fitting_id") REFERENCES "public"."fittings"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_readings" ADD CONSTRAINT "ski_readings_ski_id_skis_id_fk" FOREIGN KEY ("ski_id") REFERENCES "public"."skis"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_readings" ADD CONSTRAINT "ski_readings_decision_id_fitting_decisions_id_fk" FOREIGN KEY ("decision_id") REFERENCES "public"."fitting_decisions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ski_readings" ADD CONSTRAINT "ski_readings_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ticket_holds" ADD CONSTRAINT "ticket_holds_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ticket_holds" ADD CONSTRAINT "ticket_holds_fitting_id_fittings_id_fk" FOREIGN KEY ("fitting_id") REFERENCES "public"."fittings"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ticket_holds" ADD CONSTRAINT "ticket_holds_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ticket_holds" ADD CONSTRAINT "ticket_holds_took_over_from_people_id_fk" FOREIGN KEY ("took_over_from") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_back_steps" ADD CONSTRAINT "call_back_steps_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_back_steps" ADD CONSTRAINT "call_back_steps_call_back_id_call_backs_id_fk" FOREIGN KEY ("call_back_id") REFERENCES "public"."call_backs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_back_steps" ADD CONSTRAINT "call_back_steps_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_backs" ADD CONSTRAINT "call_backs_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_backs" ADD CONSTRAINT "call_backs_fitting_id_fittings_id_fk" FOREIGN KEY ("fitting_id") REFERENCES "public"."fittings"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_backs" ADD CONSTRAINT "call_backs_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_backs" ADD CONSTRAINT "call_backs_record_id_fitting_records_id_fk" FOREIGN KEY ("record_id") REFERENCES "public"."fitting_records"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "call_backs" ADD CONSTRAINT "call_backs_opened_by_people_id_fk" FOREIGN KEY ("opened_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "inspections" ADD CONSTRAINT "inspections_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "inspections" ADD CONSTRAINT "inspections_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "quarantines" ADD CONSTRAINT "quarantines_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "quarantines" ADD CONSTRAINT "quarantines_owner_id_people_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "quarantines" ADD CONSTRAINT "quarantines_opened_by_people_id_fk" FOREIGN KEY ("opened_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "quarantines" ADD CONSTRAINT "quarantines_released_by_people_id_fk" FOREIGN KEY ("released_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "returns" ADD CONSTRAINT "returns_shop_id_shops_id_fk" FOREIGN KEY ("shop_id") REFERENCES "public"."shops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "returns" ADD CONSTRAINT "returns_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "returns" ADD CONSTRAINT "returns_rental_id_rentals_id_fk" FOREIGN KEY ("rental_id") REFERENCES "public"."rentals"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "returns" ADD CONSTRAINT "returns_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "board_events_age" ON "board_events" USING btree ("recorded_at");--> statement-breakpoint
CREATE INDEX "command_log_age" ON "command_log" USING btree ("recorded_at");--> statement-breakpoint
CREATE INDEX "session_expire" ON "session" USING btree ("expire");--> statement-breakpoint
CREATE INDEX "session_person" ON "session" USING btree ("person_id");--> statement-breakpoint
CREATE UNIQUE INDEX "shop_texts_version" ON "shop_texts" USING btree ("shop_id","kind","locale","version");--> statement-breakpoint
CREATE UNIQUE INDEX "sites_name" ON "sites" USING btree ("shop_id","name");--> statement-breakpoint
CREATE INDEX "table_approvals_latest" ON "table_approvals" USING btree ("shop_id","edition","recorded_at");--> statement-breakpoint
CREATE UNIQUE INDEX "devices_token" ON "devices" USING btree ("token_sha256");--> statement-breakpoint
CREATE INDEX "devices_shop" ON "devices" USING btree ("shop_id","name");--> statement-breakpoint
CREATE INDEX "office_changes_subject" ON "office_changes" USING btree ("shop_id","subject_id","recorded_at");--> statement-breakpoint
CREATE UNIQUE INDEX "people_email" ON "people" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "binding_model_approvals_model" ON "binding_model_approvals" USING btree ("binding_model_id","content_sha256");--> statement-breakpoint
CREATE UNIQUE INDEX "binding_models_name" ON "binding_models" USING btree ("shop_id","name");--> statement-breakpoint
CREATE UNIQUE INDEX "boots_code" ON "boots" USING btree ("shop_id","code");--> statement-breakpoint
CREATE INDEX "boots_state" ON "boots" USING btree ("shop_id","state","code");--> statement-breakpoint
CREATE INDEX "boots_sole" ON "boots" USING btree ("shop_id","sole_length_mm");--> statement-breakpoint
CREATE UNIQUE INDEX "labels_text" ON "labels" USING btree ("shop_id","text") WHERE "labels"."until" is null;--> statement-breakpoint
CREATE INDEX "labels_item" ON "labels" USING btree ("item_id");--> statement-breakpoint
CREATE INDEX "preset_changes_ski" ON "preset_changes" USING btree ("ski_id","preset_version");--> statement-breakpoint
CREATE UNIQUE INDEX "ski_models_name" ON "ski_models" USING btree ("shop_id","name");--> statement-breakpoint
CREATE UNIQUE INDEX "ski_pairs_code" ON "ski_pairs" USING btree ("shop_id","code");--> statement-breakpoint
CREATE INDEX "ski_pairs_state" ON "ski_pairs" USING btree ("shop_id","state","code");--> statement-breakpoint
CREATE INDEX "ski_pairs_binding" ON "ski_pairs" USING btree ("shop_id","binding_model_id","state");--> statement-breakpoint
CREATE UNIQUE INDEX "skis_side" ON "skis" USING btree ("ski_pair_id","side");--> statement-breakpoint
CREATE UNIQUE INDEX "state_changes_item" ON "state_changes" USING btree ("item_id","item_seq");--> statement-breakpoint
CREATE INDEX "state_changes_shop" ON "state_changes" USING btree ("shop_id","recorded_at");--> statement-breakpoint
CREATE UNIQUE INDEX "door_links_token" ON "door_links" USING btree ("token_sha256");--> statement-breakpoint
CREATE INDEX "fitting_inputs_renter" ON "fitting_inputs" USING btree ("renter_id","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "form_links_token" ON "form_links" USING btree ("token_sha256");--> statement-breakpoint
CREATE INDEX "form_links_rental" ON "form_links" USING btree ("rental_id");--> statement-breakpoint
CREATE INDEX "own_boots_rental" ON "own_boots" USING btree ("rental_id","recorded_at");--> statement-breakpoint
CREATE UNIQUE INDEX "rental_items_out" ON "rental_items" USING btree ("item_id","side") WHERE "rental_items"."back_at" is null;--> statement-breakpoint
CREATE INDEX "rental_items_rental" ON "rental_items" USING btree ("rental_id");--> statement-breakpoint
CREATE UNIQUE INDEX "rentals_number" ON "rentals" USING btree ("shop_id","day","number");--> statement-breakpoint
CREATE INDEX "rentals_state" ON "rentals" USING btree ("shop_id","state","promised_at");--> statement-breakpoint
CREATE INDEX "rentals_renter" ON "rentals" USING btree ("renter_id");--> statement-breakpoint
CREATE INDEX "renters_shop" ON "renters" USING btree ("shop_id","last_name");--> statement-breakpoint
CREATE INDEX "fitting_decisions_rental" ON "fitting_decisions" USING btree ("rental_id","recorded_at");--> statement-breakpoint
CREATE UNIQUE INDEX "fitting_record_parts_side" ON "fitting_record_parts" USING btree ("record_id","side");--> statement-breakpoint
CREATE INDEX "fitting_records_fitting" ON "fitting_records" USING btree ("fitting_id");--> statement-breakpoint
CREATE INDEX "fitting_records_pair" ON "fitting_records" USING btree ("ski_pair_id","signed_at");--> statement-breakpoint
CREATE UNIQUE INDEX "fitting_records_corrects" ON "fitting_records" USING btree ("corrects_id");--> statement-breakpoint
CREATE UNIQUE INDEX "fittings_number" ON "fittings" USING btree ("shop_id","number");--> statement-breakpoint
CREATE UNIQUE INDEX "fittings_open_ski_pair" ON "fittings" USING btree ("ski_pair_id") WHERE "fittings"."state" in ('claimed', 'prepared');--> statement-breakpoint
CREATE UNIQUE INDEX "fittings_open_boots" ON "fittings" USING btree ("boots_id") WHERE "fittings"."state" in ('claimed', 'prepared');--> statement-breakpoint
CREATE INDEX "fittings_queue" ON "fittings" USING btree ("shop_id","state","promised_at");--> statement-breakpoint
CREATE INDEX "fittings_rental" ON "fittings" USING btree ("rental_id");--> statement-breakpoint
CREATE INDEX "fittings_renter" ON "fittings" USING btree ("renter_id");--> statement-breakpoint
CREATE UNIQUE INDEX "hand_overs_fitting" ON "hand_overs" USING btree ("fitting_id");--> statement-breakpoint
CREATE INDEX "hand_overs_rental" ON "hand_overs" USING btree ("rental_id");--> statement-breakpoint
CREATE UNIQUE INDEX "signatures_hand_over" ON "signatures" USING btree ("hand_over_id");--> statement-breakpoint
CREATE INDEX "ski_readings_fitting" ON "ski_readings" USING btree ("fitting_id","side","recorded_at");--> statement-breakpoint
CREATE INDEX "ticket_holds_fitting" ON "ticket_holds" USING btree ("fitting_id","recorded_at");--> statement-breakpoint
CREATE INDEX "call_back_steps_call_back" ON "call_back_steps" USING btree ("call_back_id","recorded_at");--> statement-breakpoint
CREATE INDEX "call_backs_open" ON "call_backs" USING btree ("shop_id","closed_at","opened_at");--> statement-breakpoint
CREATE UNIQUE INDEX "call_backs_once" ON "call_backs" USING btree ("fitting_id","cause") WHERE "call_backs"."closed_at" is null;--> statement-breakpoint
CREATE INDEX "inspections_item" ON "inspections" USING btree ("item_id","recorded_at");--> statement-breakpoint
CREATE UNIQUE INDEX "quarantines_open" ON "quarantines" USING btree ("item_id") WHERE "quarantines"."released_at" is null;--> statement-breakpoint
CREATE INDEX "quarantines_review" ON "quarantines" USING btree ("shop_id","review_on");--> statement-breakpoint
CREATE INDEX "returns_item" ON "returns" USING btree ("item_id","recorded_at");--> statement-breakpoint
CREATE INDEX "returns_day" ON "returns" USING btree ("shop_id","recorded_at");