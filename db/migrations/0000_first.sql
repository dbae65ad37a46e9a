CREATE TYPE "public"."edition_state" AS ENUM('draft', 'open', 'closed');--> statement-breakpoint
CREATE TYPE "public"."making" AS ENUM('to_print', 'printed', 'signed', 'packed', 'dispatched', 'delivered', 'spoiled', 'lost', 'returned', 'destroyed');--> statement-breakpoint
CREATE TYPE "public"."number_order" AS ENUM('lowest_free', 'buyer_may_ask');--> statement-breakpoint
CREATE TYPE "public"."placement" AS ENUM('in_hand', 'held', 'set_aside', 'sold', 'coming_back', 'given', 'kept', 'consigned', 'retired');--> statement-breakpoint
CREATE TYPE "public"."returned_number" AS ENUM('in_hand', 'retired');--> statement-breakpoint
CREATE TYPE "public"."returned_price" AS ENUM('own', 'next');--> statement-breakpoint
CREATE TYPE "public"."run" AS ENUM('numbered', 'ap', 'pp', 'hc', 'bat', 'exhibition');--> statement-breakpoint
CREATE TYPE "public"."delivery_method" AS ENUM('delivery', 'collection', 'handed_over');--> statement-breakpoint
CREATE TYPE "public"."line_state" AS ENUM('held', 'sold', 'offered', 'released', 'refunded');--> statement-breakpoint
CREATE TYPE "public"."order_channel" AS ENUM('shop', 'studio');--> statement-breakpoint
CREATE TYPE "public"."order_state" AS ENUM('awaiting_payment', 'paid', 'cancelled', 'expired');--> statement-breakpoint
CREATE TYPE "public"."payment_method" AS ENUM('card', 'transfer', 'cash');--> statement-breakpoint
CREATE TYPE "public"."payment_session_state" AS ENUM('opening', 'open', 'complete', 'expired', 'failed');--> statement-breakpoint
CREATE TYPE "public"."refund_state" AS ENUM('pending', 'succeeded', 'failed');--> statement-breakpoint
CREATE TYPE "public"."party_kind" AS ENUM('person', 'firm');--> statement-breakpoint
CREATE TYPE "public"."role" AS ENUM('photographer', 'assistant', 'printer', 'stockist', 'bookkeeper', 'collector');--> statement-breakpoint
CREATE TYPE "public"."token_purpose" AS ENUM('verify_email', 'reset_password');--> statement-breakpoint
CREATE TYPE "public"."date_precision" AS ENUM('unknown', 'year', 'month', 'day', 'instant');--> statement-breakpoint
CREATE TYPE "public"."print_state" AS ENUM('draft', 'published', 'withdrawn');--> statement-breakpoint
CREATE TYPE "public"."proof_format" AS ENUM('avif', 'webp', 'jpeg');--> statement-breakpoint
CREATE TYPE "public"."proof_state" AS ENUM('waiting', 'working', 'ready', 'failed');--> statement-breakpoint
CREATE TYPE "public"."scan_state" AS ENUM('expected', 'checking', 'ready', 'refused');--> statement-breakpoint
CREATE TYPE "public"."tax_kind" AS ENUM('standard', 'reduced_art');--> statement-breakpoint
CREATE TYPE "public"."email_state" AS ENUM('waiting', 'sending', 'sent', 'failed');--> statement-breakpoint
CREATE TABLE "copies" (
	"id" uuid PRIMARY KEY NOT NULL,
	"edition_id" uuid NOT NULL,
	"run" "run" NOT NULL,
	"number" integer NOT NULL,
	"placement" "placement" DEFAULT 'in_hand' NOT NULL,
	"format_id" uuid,
	"order_line_id" uuid,
	"owner_party_id" uuid,
	"check_code" text,
	CONSTRAINT "copies_checkCode_unique" UNIQUE("check_code"),
	CONSTRAINT "copy_number" UNIQUE("edition_id","run","number"),
	CONSTRAINT "copy_of_edition" UNIQUE("id","edition_id"),
	CONSTRAINT "copy_number_positive" CHECK ("copies"."number" >= 1),
	CONSTRAINT "copy_held_by_line" CHECK ("copies"."placement" not in ('held') or ("copies"."order_line_id" is not null and "copies"."format_id" is not null)),
	CONSTRAINT "copy_in_hand_is_free" CHECK ("copies"."placement" <> 'in_hand' or "copies"."order_line_id" is null)
);
--> statement-breakpoint
CREATE TABLE "editions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"print_id" uuid NOT NULL,
	"state" "edition_state" DEFAULT 'draft' NOT NULL,
	"limit" integer NOT NULL,
	"artists_proofs" integer DEFAULT 0 NOT NULL,
	"printers_proofs" integer DEFAULT 0 NOT NULL,
	"hors_commerce" integer DEFAULT 0 NOT NULL,
	"bon_a_tirer" integer DEFAULT 0 NOT NULL,
	"exhibition_copies" integer DEFAULT 0 NOT NULL,
	"number_order" "number_order" DEFAULT 'lowest_free' NOT NULL,
	"returned_number" "returned_number" DEFAULT 'in_hand' NOT NULL,
	"returned_price" "returned_price" DEFAULT 'own' NOT NULL,
	"further_editions" text DEFAULT '' NOT NULL,
	"release_at" timestamp with time zone,
	"opened_at" timestamp with time zone,
	"closed_at" timestamp with time zone,
	"first_issued_at" timestamp with time zone,
	"position" integer DEFAULT 0 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "edition_limit" CHECK ("editions"."limit" between 1 and 10000),
	CONSTRAINT "edition_proofs" CHECK (least("editions"."artists_proofs", "editions"."printers_proofs", "editions"."hors_commerce", "editions"."bon_a_tirer", "editions"."exhibition_copies") >= 0),
	CONSTRAINT "edition_bat_is_one" CHECK ("editions"."bon_a_tirer" <= 1),
	CONSTRAINT "edition_open_is_dated" CHECK ("editions"."state" = 'draft' or ("editions"."opened_at" is not null and "editions"."release_at" is not null)),
	CONSTRAINT "edition_closed_is_dated" CHECK (("editions"."state" = 'closed') = ("editions"."closed_at" is not null))
);
--> statement-breakpoint
CREATE TABLE "formats" (
	"id" uuid PRIMARY KEY NOT NULL,
	"edition_id" uuid NOT NULL,
	"position" integer DEFAULT 0 NOT NULL,
	"paper_id" uuid NOT NULL,
	"process" text NOT NULL,
	"image_width_mm" integer NOT NULL,
	"image_height_mm" integer NOT NULL,
	"sheet_width_mm" integer NOT NULL,
	"sheet_height_mm" integer NOT NULL,
	CONSTRAINT "format_position" UNIQUE("edition_id","position"),
	CONSTRAINT "format_of_edition" UNIQUE("id","edition_id"),
	CONSTRAINT "format_image_positive" CHECK ("formats"."image_width_mm" > 0 and "formats"."image_height_mm" > 0),
	CONSTRAINT "format_image_on_sheet" CHECK ("formats"."image_width_mm" <= "formats"."sheet_width_mm" and "formats"."image_height_mm" <= "formats"."sheet_height_mm")
);
--> statement-breakpoint
CREATE TABLE "holds" (
	"id" uuid PRIMARY KEY NOT NULL,
	"copy_id" uuid NOT NULL,
	"order_line_id" uuid NOT NULL,
	"held_at" timestamp with time zone DEFAULT now() NOT NULL,
	"until" timestamp with time zone NOT NULL,
	"ended_at" timestamp with time zone,
	"ended_as" text,
	CONSTRAINT "hold_end" CHECK (("holds"."ended_at" is null) = ("holds"."ended_as" is null))
);
--> statement-breakpoint
CREATE TABLE "ledger_entries" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "ledger_entries_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"edition_id" uuid NOT NULL,
	"line" integer NOT NULL,
	"kind" text NOT NULL,
	"copy_id" uuid,
	"sheet_id" uuid,
	"actor" text NOT NULL,
	"happened_at" timestamp with time zone,
	"happened_precision" date_precision NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"body" text NOT NULL,
	"commitment" text,
	"corrects" bigint,
	CONSTRAINT "ledger_line" UNIQUE("edition_id","line"),
	CONSTRAINT "ledger_when" CHECK (("ledger_entries"."happened_precision" = 'unknown') = ("ledger_entries"."happened_at" is null))
);
--> statement-breakpoint
CREATE TABLE "ledger_private" (
	"entry_id" bigint PRIMARY KEY NOT NULL,
	"salt" text,
	"body" jsonb,
	"erased_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "number_offers" (
	"id" uuid PRIMARY KEY NOT NULL,
	"order_line_id" uuid NOT NULL,
	"copy_id" uuid NOT NULL,
	"offered_at" timestamp with time zone DEFAULT now() NOT NULL,
	"until" timestamp with time zone NOT NULL,
	"decided_at" timestamp with time zone,
	"decision" text,
	"decided_by" uuid
);
--> statement-breakpoint
CREATE TABLE "price_steps" (
	"id" uuid PRIMARY KEY NOT NULL,
	"format_id" uuid NOT NULL,
	"from_number" integer NOT NULL,
	"to_number" integer NOT NULL,
	"amount" bigint NOT NULL,
	"currency" text NOT NULL,
	"valid_from" timestamp with time zone DEFAULT now() NOT NULL,
	"superseded_at" timestamp with time zone,
	CONSTRAINT "price_step_order" CHECK ("price_steps"."from_number" between 1 and "price_steps"."to_number"),
	CONSTRAINT "price_step_positive" CHECK ("price_steps"."amount" > 0),
	CONSTRAINT "price_step_currency" CHECK ("price_steps"."currency" ~ '^[A-Z]{3}$')
);
--> statement-breakpoint
CREATE TABLE "sheets" (
	"id" uuid PRIMARY KEY NOT NULL,
	"copy_id" uuid NOT NULL,
	"print_picture_id" uuid NOT NULL,
	"serial" integer NOT NULL,
	"making" "making" DEFAULT 'to_print' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "sheet_serial" UNIQUE("copy_id","print_picture_id","serial")
);
--> statement-breakpoint
CREATE TABLE "dispatches" (
	"id" uuid PRIMARY KEY NOT NULL,
	"order_id" uuid NOT NULL,
	"carrier" text NOT NULL,
	"reference" text DEFAULT '' NOT NULL,
	"sent_at" timestamp with time zone NOT NULL,
	"delivered_at" timestamp with time zone,
	"recorded_by" uuid,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "order_events" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "order_events_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"order_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"detail" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"account_id" uuid,
	"visible_to_buyer" boolean DEFAULT false NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "order_lines" (
	"id" uuid PRIMARY KEY NOT NULL,
	"order_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"state" "line_state" DEFAULT 'held' NOT NULL,
	"edition_id" uuid NOT NULL,
	"format_id" uuid NOT NULL,
	"copy_id" uuid NOT NULL,
	"ladder_amount" bigint NOT NULL,
	"reduction_amount" bigint DEFAULT 0 NOT NULL,
	"reduction_reason" text,
	"amount" bigint NOT NULL,
	"net" bigint NOT NULL,
	"tax" bigint NOT NULL,
	"tax_snapshot" jsonb NOT NULL,
	"currency" text NOT NULL,
	CONSTRAINT "order_line_position" UNIQUE("order_id","position"),
	CONSTRAINT "order_line_sum" CHECK ("order_lines"."net" + "order_lines"."tax" = "order_lines"."amount"),
	CONSTRAINT "order_line_reduction" CHECK ("order_lines"."reduction_amount" between 0 and "order_lines"."ladder_amount"),
	CONSTRAINT "order_line_reduction_reason" CHECK ("order_lines"."reduction_amount" = 0 or "order_lines"."reduction_reason" is not null)
);
--> statement-breakpoint
CREATE TABLE "orders" (
	"id" uuid PRIMARY KEY NOT NULL,
	"number" integer GENERATED ALWAYS AS IDENTITY (sequence name "orders_number_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 2147483647 START WITH 1001 CACHE 1),
	"state" "order_state" DEFAULT 'awaiting_payment' NOT NULL,
	"channel" "order_channel" DEFAULT 'shop' NOT NULL,
	"submission_key" text NOT NULL,
	"buyer_party_id" uuid NOT NULL,
	"account_id" uuid,
	"email" text,
	"language" text DEFAULT 'en' NOT NULL,
	"delivery_method" "delivery_method" NOT NULL,
	"delivery_address" jsonb,
	"delivery_country" text NOT NULL,
	"currency" text NOT NULL,
	"delivery_amount" bigint DEFAULT 0 NOT NULL,
	"delivery_net" bigint DEFAULT 0 NOT NULL,
	"delivery_tax" bigint DEFAULT 0 NOT NULL,
	"delivery_tax_snapshot" jsonb,
	"delivery_days_from" integer,
	"delivery_days_to" integer,
	"total_amount" bigint NOT NULL,
	"total_tax" bigint NOT NULL,
	"buyer_note" text DEFAULT '' NOT NULL,
	"studio_note" text DEFAULT '' NOT NULL,
	"token_seed" text NOT NULL,
	"token_hash" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"hold_until" timestamp with time zone,
	"prices_accepted_at" timestamp with time zone,
	"paid_at" timestamp with time zone,
	"ended_at" timestamp with time zone,
	"attention" text,
	CONSTRAINT "orders_number_unique" UNIQUE("number"),
	CONSTRAINT "orders_submissionKey_unique" UNIQUE("submission_key"),
	CONSTRAINT "orders_tokenHash_unique" UNIQUE("token_hash"),
	CONSTRAINT "order_amounts" CHECK ("orders"."delivery_amount" >= 0 and "orders"."total_amount" >= 0 and "orders"."total_tax" >= 0),
	CONSTRAINT "order_delivery_sum" CHECK ("orders"."delivery_net" + "orders"."delivery_tax" = "orders"."delivery_amount"),
	CONSTRAINT "order_paid_is_dated" CHECK ("orders"."state" <> 'paid' or "orders"."paid_at" is not null),
	CONSTRAINT "order_address" CHECK ("orders"."delivery_method" <> 'delivery' or "orders"."delivery_address" is not null)
);
--> statement-breakpoint
CREATE TABLE "payment_sessions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"order_id" uuid NOT NULL,
	"attempt" integer NOT NULL,
	"state" "payment_session_state" DEFAULT 'opening' NOT NULL,
	"idempotency_key" text NOT NULL,
	"stripe_session_id" text,
	"method" "payment_method" DEFAULT 'card' NOT NULL,
	"amount" bigint NOT NULL,
	"currency" text NOT NULL,
	"url" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "payment_sessions_idempotencyKey_unique" UNIQUE("idempotency_key"),
	CONSTRAINT "payment_sessions_stripeSessionId_unique" UNIQUE("stripe_session_id"),
	CONSTRAINT "payment_session_attempt" UNIQUE("order_id","attempt")
);
--> statement-breakpoint
CREATE TABLE "payments" (
	"id" uuid PRIMARY KEY NOT NULL,
	"order_id" uuid NOT NULL,
	"payment_session_id" uuid,
	"method" "payment_method" NOT NULL,
	"amount" bigint NOT NULL,
	"currency" text NOT NULL,
	"reference" text NOT NULL,
	"received_at" timestamp with time zone NOT NULL,
	"recorded_at" timestamp with time zone DEFAULT now() NOT NULL,
	"recorded_by" uuid,
	CONSTRAINT "payments_paymentSessionId_unique" UNIQUE("payment_session_id"),
	CONSTRAINT "payment_positive" CHECK ("payments"."amount" > 0)
);
--> statement-breakpoint
CREATE TABLE "refunds" (
	"id" uuid PRIMARY KEY NOT NULL,
	"order_id" uuid NOT NULL,
	"order_line_id" uuid,
	"payment_id" uuid NOT NULL,
	"state" "refund_state" DEFAULT 'pending' NOT NULL,
	"method" "payment_method" NOT NULL,
	"amount" bigint NOT NULL,
	"currency" text NOT NULL,
	"net" bigint NOT NULL,
	"tax" bigint NOT NULL,
	"reason" text NOT NULL,
	"idempotency_key" text NOT NULL,
	"reference" text,
	"failure" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"settled_at" timestamp with time zone,
	"created_by" uuid,
	CONSTRAINT "refunds_idempotencyKey_unique" UNIQUE("idempotency_key"),
	CONSTRAINT "refund_positive" CHECK ("refunds"."amount" > 0),
	CONSTRAINT "refund_sum" CHECK ("refunds"."net" + "refunds"."tax" = "refunds"."amount")
);
--> statement-breakpoint
CREATE TABLE "account_roles" (
	"account_id" uuid NOT NULL,
	"role" "role" NOT NULL,
	"granted_by" uuid,
	"granted_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "account_roles_account_id_role_pk" PRIMARY KEY("account_id","role")
);
--> statement-breakpoint
CREATE TABLE "account_tokens" (
	"id" uuid PRIMARY KEY NOT NULL,
	"account_id" uuid NOT NULL,
	"purpose" "token_purpose" NOT NULL,
	"token_seed" text NOT NULL,
	"token_hash" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"used_at" timestamp with time zone,
	CONSTRAINT "account_tokens_tokenHash_unique" UNIQUE("token_hash")
);
--> statement-breakpoint
CREATE TABLE "accounts" (
	"id" uuid PRIMARY KEY NOT NULL,
	"party_id" uuid NOT NULL,
	"email" text NOT NULL,
	"password_hash" text,
	"email_verified_at" timestamp with time zone,
	"disabled_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "invitations" (
	"id" uuid PRIMARY KEY NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"role" "role" NOT NULL,
	"party_id" uuid,
	"invited_by" uuid NOT NULL,
	"token_seed" text NOT NULL,
	"token_hash" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"accepted_at" timestamp with time zone,
	"withdrawn_at" timestamp with time zone,
	CONSTRAINT "invitations_tokenHash_unique" UNIQUE("token_hash"),
	CONSTRAINT "invitation_email" CHECK (position('@' in "invitations"."email") > 1)
);
--> statement-breakpoint
CREATE TABLE "parties" (
	"id" uuid PRIMARY KEY NOT NULL,
	"kind" "party_kind" DEFAULT 'person' NOT NULL,
	"name" text NOT NULL,
	"email" text,
	"telephone" text,
	"address" jsonb,
	"notes" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"id" uuid PRIMARY KEY NOT NULL,
	"secret_hash" text NOT NULL,
	"account_id" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_seen_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	CONSTRAINT "sessions_secretHash_unique" UNIQUE("secret_hash")
);
--> statement-breakpoint
CREATE TABLE "studio" (
	"only" boolean PRIMARY KEY DEFAULT true NOT NULL,
	"name" text NOT NULL,
	"photographer" text NOT NULL,
	"signature" text NOT NULL,
	"email" text NOT NULL,
	"telephone" text DEFAULT '' NOT NULL,
	"address" jsonb NOT NULL,
	"country" text NOT NULL,
	"zone" text NOT NULL,
	"zone_name" text DEFAULT '' NOT NULL,
	"currency" text NOT NULL,
	"statement" text DEFAULT '' NOT NULL,
	"hold_minutes" integer DEFAULT 10 NOT NULL,
	"pixel_limit_megapixels" integer DEFAULT 200 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "studio_only_one" CHECK ("studio"."only"),
	CONSTRAINT "studio_currency" CHECK ("studio"."currency" ~ '^[A-Z]{3}$')
);
--> statement-breakpoint
CREATE TABLE "frames" (
	"id" uuid PRIMARY KEY NOT NULL,
	"roll_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"label" text NOT NULL,
	"exposure" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"chosen" boolean DEFAULT false NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "frame_position" UNIQUE("roll_id","position"),
	CONSTRAINT "frame_position_positive" CHECK ("frames"."position" >= 1)
);
--> statement-breakpoint
CREATE TABLE "print_pictures" (
	"id" uuid PRIMARY KEY NOT NULL,
	"print_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"frame_id" uuid NOT NULL,
	"scan_id" uuid NOT NULL,
	"crop" jsonb DEFAULT '{"x":0,"y":0,"width":1000000,"height":1000000}'::jsonb NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"proof_state" "proof_state" DEFAULT 'waiting' NOT NULL,
	"proof_failure" text,
	CONSTRAINT "print_picture_position" UNIQUE("print_id","position"),
	CONSTRAINT "print_picture_frame" UNIQUE("print_id","frame_id")
);
--> statement-breakpoint
CREATE TABLE "prints" (
	"id" uuid PRIMARY KEY NOT NULL,
	"slug" text NOT NULL,
	"title" text NOT NULL,
	"year" integer,
	"series_id" uuid,
	"statement" text DEFAULT '' NOT NULL,
	"state" "print_state" DEFAULT 'draft' NOT NULL,
	"shown_before_release" boolean DEFAULT false NOT NULL,
	"proofs_public_at" timestamp with time zone,
	"position" integer DEFAULT 0 NOT NULL,
	"published_at" timestamp with time zone,
	"withdrawn_at" timestamp with time zone,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "prints_slug_unique" UNIQUE("slug"),
	CONSTRAINT "print_slug" CHECK ("prints"."slug" ~ '^[a-z0-9]+(-[a-z0-9]+)*$'),
	CONSTRAINT "print_year" CHECK ("prints"."year" is null or "prints"."year" between 1826 and 2200)
);
--> statement-breakpoint
CREATE TABLE "proofs" (
	"id" uuid PRIMARY KEY NOT NULL,
	"scan_id" uuid NOT NULL,
	"print_picture_id" uuid,
	"format" "proof_format" NOT NULL,
	"width" integer NOT NULL,
	"height" integer NOT NULL,
	"bytes" integer NOT NULL,
	"sha256" text NOT NULL,
	"object_key" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "rolls" (
	"id" uuid PRIMARY KEY NOT NULL,
	"number" integer NOT NULL,
	"film_format" text NOT NULL,
	"camera" text DEFAULT '' NOT NULL,
	"film" text DEFAULT '' NOT NULL,
	"exposed_on" date,
	"exposed_precision" date_precision DEFAULT 'unknown' NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"created_by" uuid,
	CONSTRAINT "rolls_number_unique" UNIQUE("number")
);
--> statement-breakpoint
CREATE TABLE "scans" (
	"id" uuid PRIMARY KEY NOT NULL,
	"frame_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"state" "scan_state" DEFAULT 'expected' NOT NULL,
	"refused_reason" text,
	"file_name" text NOT NULL,
	"object_key" text NOT NULL,
	"declared_bytes" bigint NOT NULL,
	"bytes" bigint,
	"sha256" text,
	"media_type" text,
	"width" integer,
	"height" integer,
	"bit_depth" integer,
	"channels" integer,
	"colour_space" text,
	"pixels_per_inch" integer,
	"proof_state" "proof_state" DEFAULT 'waiting' NOT NULL,
	"proof_failure" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"uploaded_at" timestamp with time zone,
	"checked_at" timestamp with time zone,
	CONSTRAINT "scans_objectKey_unique" UNIQUE("object_key"),
	CONSTRAINT "scan_version" UNIQUE("frame_id","version"),
	CONSTRAINT "scan_refusal_has_reason" CHECK (("scans"."state" = 'refused') = ("scans"."refused_reason" is not null)),
	CONSTRAINT "scan_ready_is_known" CHECK ("scans"."state" <> 'ready' or ("scans"."sha256" is not null and "scans"."width" > 0 and "scans"."height" > 0 and "scans"."bytes" > 0))
);
--> statement-breakpoint
CREATE TABLE "series" (
	"id" uuid PRIMARY KEY NOT NULL,
	"slug" text NOT NULL,
	"title" text NOT NULL,
	"statement" text DEFAULT '' NOT NULL,
	"position" integer DEFAULT 0 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "series_slug_unique" UNIQUE("slug")
);
--> statement-breakpoint
CREATE TABLE "delivery_rates" (
	"id" uuid PRIMARY KEY NOT NULL,
	"zone" text NOT NULL,
	"countries" text[] NOT NULL,
	"up_to_grams" integer NOT NULL,
	"amount" bigint NOT NULL,
	"currency" text NOT NULL,
	"days_from" integer NOT NULL,
	"days_to" integer NOT NULL,
	"valid_from" date NOT NULL,
	"valid_to" date,
	"example" boolean DEFAULT false NOT NULL,
	CONSTRAINT "delivery_days" CHECK ("delivery_rates"."days_from" between 0 and "delivery_rates"."days_to"),
	CONSTRAINT "delivery_amount" CHECK ("delivery_rates"."amount" >= 0)
);
--> statement-breakpoint
CREATE TABLE "papers" (
	"id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"base" text DEFAULT '' NOT NULL,
	"surface" text DEFAULT '' NOT NULL,
	"grammage" integer NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"white_l" double precision,
	"white_a" double precision,
	"white_b" double precision,
	"maximum_density" double precision,
	"measured" boolean DEFAULT false NOT NULL,
	"retired" boolean DEFAULT false NOT NULL,
	"position" integer DEFAULT 0 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "paper_grammage" CHECK ("papers"."grammage" between 20 and 2000)
);
--> statement-breakpoint
CREATE TABLE "tax_rates" (
	"id" uuid PRIMARY KEY NOT NULL,
	"country" text NOT NULL,
	"kind" "tax_kind" NOT NULL,
	"basis_points" integer NOT NULL,
	"valid_from" date NOT NULL,
	"valid_to" date,
	"source" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "vat_registrations" (
	"id" uuid PRIMARY KEY NOT NULL,
	"country" text NOT NULL,
	"number" text NOT NULL,
	"valid_from" date NOT NULL,
	"valid_to" date
);
--> statement-breakpoint
CREATE TABLE "emails" (
	"id" uuid PRIMARY KEY NOT NULL,
	"kind" text NOT NULL,
	"dedupe_key" text NOT NULL,
	"recipient" text NOT NULL,
	"language" text DEFAULT 'en' NOT NULL,
	"payload" jsonb NOT NULL,
	"message_id" text NOT NULL,
	"state" "email_state" DEFAULT 'waiting' NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"failure" text,
	"order_id" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"sent_at" timestamp with time zone,
	CONSTRAINT "emails_messageId_unique" UNIQUE("message_id")
);
--> statement-breakpoint
CREATE TABLE "rate_limits" (
	"key" text PRIMARY KEY NOT NULL,
	"points" integer DEFAULT 0 NOT NULL,
	"expire" bigint
);
--> statement-breakpoint
CREATE TABLE "setup_codes" (
	"code_hash" text PRIMARY KEY NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"used_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "webhook_events" (
	"id" text PRIMARY KEY NOT NULL,
	"kind" text NOT NULL,
	"object_id" text,
	"received_at" timestamp with time zone DEFAULT now() NOT NULL,
	"handled_at" timestamp with time zone
);
--> statement-breakpoint
ALTER TABLE "copies" ADD CONSTRAINT "copies_edition_id_editions_id_fk" FOREIGN KEY ("edition_id") REFERENCES "public"."editions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "copies" ADD CONSTRAINT "copies_order_line_id_order_lines_id_fk" FOREIGN KEY ("order_line_id") REFERENCES "public"."order_lines"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "copies" ADD CONSTRAINT "copies_owner_party_id_parties_id_fk" FOREIGN KEY ("owner_party_id") REFERENCES "public"."parties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "copies" ADD CONSTRAINT "copy_format" FOREIGN KEY ("format_id","edition_id") REFERENCES "public"."formats"("id","edition_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "editions" ADD CONSTRAINT "editions_print_id_prints_id_fk" FOREIGN KEY ("print_id") REFERENCES "public"."prints"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "formats" ADD CONSTRAINT "formats_edition_id_editions_id_fk" FOREIGN KEY ("edition_id") REFERENCES "public"."editions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "formats" ADD CONSTRAINT "formats_paper_id_papers_id_fk" FOREIGN KEY ("paper_id") REFERENCES "public"."papers"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "holds" ADD CONSTRAINT "holds_copy_id_copies_id_fk" FOREIGN KEY ("copy_id") REFERENCES "public"."copies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "holds" ADD CONSTRAINT "holds_order_line_id_order_lines_id_fk" FOREIGN KEY ("order_line_id") REFERENCES "public"."order_lines"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_entries" ADD CONSTRAINT "ledger_entries_edition_id_editions_id_fk" FOREIGN KEY ("edition_id") REFERENCES "public"."editions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_entries" ADD CONSTRAINT "ledger_entries_sheet_id_sheets_id_fk" FOREIGN KEY ("sheet_id") REFERENCES "public"."sheets"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_entries" ADD CONSTRAINT "ledger_entries_corrects_ledger_entries_id_fk" FOREIGN KEY ("corrects") REFERENCES "public"."ledger_entries"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_entries" ADD CONSTRAINT "ledger_copy" FOREIGN KEY ("copy_id","edition_id") REFERENCES "public"."copies"("id","edition_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "ledger_private" ADD CONSTRAINT "ledger_private_entry_id_ledger_entries_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."ledger_entries"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "number_offers" ADD CONSTRAINT "number_offers_order_line_id_order_lines_id_fk" FOREIGN KEY ("order_line_id") REFERENCES "public"."order_lines"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "number_offers" ADD CONSTRAINT "number_offers_copy_id_copies_id_fk" FOREIGN KEY ("copy_id") REFERENCES "public"."copies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "number_offers" ADD CONSTRAINT "number_offers_decided_by_accounts_id_fk" FOREIGN KEY ("decided_by") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "price_steps" ADD CONSTRAINT "price_steps_format_id_formats_id_fk" FOREIGN KEY ("format_id") REFERENCES "public"."formats"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sheets" ADD CONSTRAINT "sheets_copy_id_copies_id_fk" FOREIGN KEY ("copy_id") REFERENCES "public"."copies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sheets" ADD CONSTRAINT "sheets_print_picture_id_print_pictures_id_fk" FOREIGN KEY ("print_picture_id") REFERENCES "public"."print_pictures"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "dispatches" ADD CONSTRAINT "dispatches_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "dispatches" ADD CONSTRAINT "dispatches_recorded_by_accounts_id_fk" FOREIGN KEY ("recorded_by") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "order_events" ADD CONSTRAINT "order_events_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "order_events" ADD CONSTRAINT "order_events_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "order_lines" ADD CONSTRAINT "order_lines_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "order_lines" ADD CONSTRAINT "order_lines_edition_id_editions_id_fk" FOREIGN KEY ("edition_id") REFERENCES "public"."editions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "order_lines" ADD CONSTRAINT "order_lines_format_id_formats_id_fk" FOREIGN KEY ("format_id") REFERENCES "public"."formats"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "order_lines" ADD CONSTRAINT "order_lines_copy_id_copies_id_fk" FOREIGN KEY ("copy_id") REFERENCES "public"."copies"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "orders" ADD CONSTRAINT "orders_buyer_party_id_parties_id_fk" FOREIGN KEY ("buyer_party_id") REFERENCES "public"."parties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "orders" ADD CONSTRAINT "orders_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "payment_sessions" ADD CONSTRAINT "payment_sessions_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "payments" ADD CONSTRAINT "payments_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "payments" ADD CONSTRAINT "payments_payment_session_id_payment_sessions_id_fk" FOREIGN KEY ("payment_session_id") REFERENCES "public"."payment_sessions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "payments" ADD CONSTRAINT "payments_recorded_by_accounts_id_fk" FOREIGN KEY ("recorded_by") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "refunds" ADD CONSTRAINT "refunds_order_id_orders_id_fk" FOREIGN KEY ("order_id") REFERENCES "public"."orders"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "refunds" ADD CONSTRAINT "refunds_order_line_id_order_lines_id_fk" FOREIGN KEY ("order_line_id") REFERENCES "public"."order_lines"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "refunds" ADD CONSTRAINT "refunds_payment_id_payments_id_fk" FOREIGN KEY ("payment_id") REFERENCES "public"."payments"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "refunds" ADD CONSTRAINT "refunds_created_by_accounts_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "account_roles" ADD CONSTRAINT "account_roles_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "account_roles" ADD CONSTRAINT "account_roles_granted_by_accounts_id_fk" FOREIGN KEY ("granted_by") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "account_tokens" ADD CONSTRAINT "account_tokens_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "accounts" ADD CONSTRAINT "accounts_party_id_parties_id_fk" FOREIGN KEY ("party_id") REFERENCES "public"."parties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_party_id_parties_id_fk" FOREIGN KEY ("party_id") REFERENCES "public"."parties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitations" ADD CONSTRAINT "invitations_invited_by_accounts_id_fk" FOREIGN KEY ("invited_by") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_account_id_accounts_id_fk" FOREIGN KEY ("account_id") REFERENCES "public"."accounts"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "frames" ADD CONSTRAINT "frames_roll_id_rolls_id_fk" FOREIGN KEY ("roll_id") REFERENCES "public"."rolls"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "print_pictures" ADD CONSTRAINT "print_pictures_print_id_prints_id_fk" FOREIGN KEY ("print_id") REFERENCES "public"."prints"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "print_pictures" ADD CONSTRAINT "print_pictures_frame_id_frames_id_fk" FOREIGN KEY ("frame_id") REFERENCES "public"."frames"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "print_pictures" ADD CONSTRAINT "print_pictures_scan_id_scans_id_fk" FOREIGN KEY ("scan_id") REFERENCES "public"."scans"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "prints" ADD CONSTRAINT "prints_series_id_series_id_fk" FOREIGN KEY ("series_id") REFERENCES "public"."series"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "proofs" ADD CONSTRAINT "proofs_scan_id_scans_id_fk" FOREIGN KEY ("scan_id") REFERENCES "public"."scans"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "proofs" ADD CONSTRAINT "proofs_print_picture_id_print_pictures_id_fk" FOREIGN KEY ("print_picture_id") REFERENCES "public"."print_pictures"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rolls" ADD CONSTRAINT "rolls_created_by_accounts_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."accounts"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scans" ADD CONSTRAINT "scans_frame_id_frames_id_fk" FOREIGN KEY ("frame_id") REFERENCES "public"."frames"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "copy_of_line" ON "copies" USING btree ("order_line_id") WHERE "copies"."placement" in ('held', 'sold');--> statement-breakpoint
CREATE INDEX "copies_edition_placement" ON "copies" USING btree ("edition_id","placement");--> statement-breakpoint
CREATE INDEX "editions_print" ON "editions" USING btree ("print_id");--> statement-breakpoint
CREATE UNIQUE INDEX "hold_live_copy" ON "holds" USING btree ("copy_id") WHERE "holds"."ended_at" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "hold_live_line" ON "holds" USING btree ("order_line_id") WHERE "holds"."ended_at" is null;--> statement-breakpoint
CREATE INDEX "ledger_copy_entries" ON "ledger_entries" USING btree ("copy_id");--> statement-breakpoint
CREATE INDEX "ledger_recorded" ON "ledger_entries" USING btree ("recorded_at");--> statement-breakpoint
CREATE UNIQUE INDEX "offer_live_line" ON "number_offers" USING btree ("order_line_id") WHERE "number_offers"."decided_at" is null;--> statement-breakpoint
CREATE INDEX "price_steps_format" ON "price_steps" USING btree ("format_id");--> statement-breakpoint
CREATE UNIQUE INDEX "sheet_live" ON "sheets" USING btree ("copy_id","print_picture_id") WHERE "sheets"."making" not in ('spoiled', 'destroyed');--> statement-breakpoint
CREATE INDEX "sheets_making" ON "sheets" USING btree ("making");--> statement-breakpoint
CREATE INDEX "dispatches_order" ON "dispatches" USING btree ("order_id");--> statement-breakpoint
CREATE INDEX "order_events_order" ON "order_events" USING btree ("order_id","at");--> statement-breakpoint
CREATE UNIQUE INDEX "order_line_live_copy" ON "order_lines" USING btree ("copy_id") WHERE "order_lines"."state" in ('held', 'sold');--> statement-breakpoint
CREATE INDEX "order_lines_edition" ON "order_lines" USING btree ("edition_id");--> statement-breakpoint
CREATE INDEX "orders_state" ON "orders" USING btree ("state","created_at");--> statement-breakpoint
CREATE INDEX "orders_email" ON "orders" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "orders_buyer" ON "orders" USING btree ("buyer_party_id");--> statement-breakpoint
CREATE INDEX "orders_account" ON "orders" USING btree ("account_id");--> statement-breakpoint
CREATE UNIQUE INDEX "payment_session_live" ON "payment_sessions" USING btree ("order_id") WHERE "payment_sessions"."state" in ('opening', 'open');--> statement-breakpoint
CREATE UNIQUE INDEX "payment_card_reference" ON "payments" USING btree ("reference") WHERE "payments"."method" = 'card';--> statement-breakpoint
CREATE INDEX "payments_order" ON "payments" USING btree ("order_id");--> statement-breakpoint
CREATE INDEX "refunds_order" ON "refunds" USING btree ("order_id");--> statement-breakpoint
CREATE INDEX "account_tokens_account" ON "account_tokens" USING btree ("account_id","purpose");--> statement-breakpoint
CREATE UNIQUE INDEX "accounts_email" ON "accounts" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "accounts_party" ON "accounts" USING btree ("party_id");--> statement-breakpoint
CREATE INDEX "parties_email" ON "parties" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "parties_name" ON "parties" USING btree (lower("name"));--> statement-breakpoint
CREATE INDEX "sessions_account" ON "sessions" USING btree ("account_id");--> statement-breakpoint
CREATE INDEX "print_pictures_frame" ON "print_pictures" USING btree ("frame_id");--> statement-breakpoint
CREATE INDEX "prints_series" ON "prints" USING btree ("series_id");--> statement-breakpoint
CREATE UNIQUE INDEX "proof_of_print" ON "proofs" USING btree ("print_picture_id","format","width") WHERE "proofs"."print_picture_id" is not null;--> statement-breakpoint
CREATE UNIQUE INDEX "proof_of_scan" ON "proofs" USING btree ("scan_id","format","width") WHERE "proofs"."print_picture_id" is null;--> statement-breakpoint
CREATE UNIQUE INDEX "email_owed_once" ON "emails" USING btree ("dedupe_key");--> statement-breakpoint
CREATE INDEX "emails_state" ON "emails" USING btree ("state");--> statement-breakpoint
CREATE INDEX "emails_order" ON "emails" USING btree ("order_id");--> statement-breakpoint
CREATE INDEX "webhook_events_object" ON "webhook_events" USING btree ("object_id");