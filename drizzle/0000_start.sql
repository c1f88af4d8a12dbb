CREATE TABLE "account" (
	"id" text PRIMARY KEY NOT NULL,
	"account_id" text NOT NULL,
	"provider_id" text NOT NULL,
	"user_id" text NOT NULL,
	"access_token" text,
	"refresh_token" text,
	"id_token" text,
	"access_token_expires_at" timestamp (3) with time zone,
	"refresh_token_expires_at" timestamp (3) with time zone,
	"scope" text,
	"password" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "audit_event" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"user_id" text,
	"by_name" text NOT NULL,
	"act" text NOT NULL,
	"about" text NOT NULL,
	"detail" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
CREATE TABLE "design" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" text NOT NULL,
	"recipe_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"name" text NOT NULL,
	"project" text DEFAULT '' NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"visibility" text DEFAULT 'team' NOT NULL,
	"inputs" jsonb NOT NULL,
	"shown" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "design_visibility" CHECK ("visibility" in ('team', 'only me'))
);
--> statement-breakpoint
CREATE TABLE "draft" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"recipe_id" uuid NOT NULL,
	"state" text DEFAULT 'draft' NOT NULL,
	"text" text NOT NULL,
	"revision" integer DEFAULT 0 NOT NULL,
	"from_version" integer,
	"owner_id" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"sent_by" text,
	"sent_at" timestamp (3) with time zone,
	"sent_hash" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "draft_state" CHECK ("state" in ('draft', 'in-review', 'published', 'discarded'))
);
--> statement-breakpoint
CREATE TABLE "draft_author" (
	"draft_id" uuid NOT NULL,
	"user_id" text NOT NULL,
	"removed_at" timestamp (3) with time zone,
	CONSTRAINT "draft_author_draft_id_user_id_pk" PRIMARY KEY("draft_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "draft_save" (
	"id" text PRIMARY KEY NOT NULL,
	"draft_id" uuid NOT NULL,
	"user_id" text NOT NULL,
	"base_revision" integer NOT NULL,
	"revision" integer,
	"aside" text,
	"text" text NOT NULL,
	"pinned" boolean DEFAULT false NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "draft_save_aside" CHECK ("draft_save"."aside" is null or "draft_save"."aside" in ('stale', 'in-review', 'published', 'discarded', 'not-allowed'))
);
--> statement-breakpoint
CREATE TABLE "draft_writer" (
	"draft_id" uuid NOT NULL,
	"user_id" text NOT NULL,
	CONSTRAINT "draft_writer_draft_id_user_id_pk" PRIMARY KEY("draft_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "invitation" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"role" text NOT NULL,
	"invited_by" text NOT NULL,
	"sent_at" timestamp (3) with time zone NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"accepted_at" timestamp (3) with time zone,
	"revoked_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "invitation_role" CHECK ("role" in ('reader', 'author', 'editor', 'admin'))
);
--> statement-breakpoint
CREATE TABLE "kept_input" (
	"user_id" text NOT NULL,
	"recipe_id" uuid NOT NULL,
	"calculator" text NOT NULL,
	"fields" jsonb NOT NULL,
	"last_save_id" text NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "kept_input_user_id_recipe_id_calculator_pk" PRIMARY KEY("user_id","recipe_id","calculator")
);
--> statement-breakpoint
CREATE TABLE "known_browser" (
	"token_hash" text NOT NULL,
	"user_id" text NOT NULL,
	"last_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "known_browser_token_hash_user_id_pk" PRIMARY KEY("token_hash","user_id")
);
--> statement-breakpoint
CREATE TABLE "link" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"kind" text NOT NULL,
	"token_hash" text NOT NULL,
	"invitation_id" uuid,
	"user_id" text,
	"made_by" text,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"used_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "link_token_hash_unique" UNIQUE("token_hash"),
	CONSTRAINT "link_kind" CHECK ("kind" in ('set-up', 'invitation', 'password'))
);
--> statement-breakpoint
CREATE TABLE "mail" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"kind" text NOT NULL,
	"recipient" text NOT NULL,
	"subject" text NOT NULL,
	"body" text NOT NULL,
	"invitation_id" uuid,
	"user_id" text,
	"state" text DEFAULT 'captured' NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "mail_state" CHECK ("state" in ('captured', 'sent', 'failed'))
);
--> statement-breakpoint
CREATE TABLE "notice" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"user_id" text NOT NULL,
	"kind" text NOT NULL,
	"text" text NOT NULL,
	"seen_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "recipe" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"slug" text,
	"slug_fixed" boolean DEFAULT false NOT NULL,
	"number" text,
	"origin" text DEFAULT 'team' NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "recipe_slug_unique" UNIQUE("slug"),
	CONSTRAINT "recipe_number_unique" UNIQUE("number"),
	CONSTRAINT "recipe_origin" CHECK ("origin" in ('team', 'supplied'))
);
--> statement-breakpoint
CREATE TABLE "recipe_owner" (
	"recipe_id" uuid NOT NULL,
	"user_id" text NOT NULL,
	CONSTRAINT "recipe_owner_recipe_id_user_id_pk" PRIMARY KEY("recipe_id","user_id")
);
--> statement-breakpoint
CREATE TABLE "recipe_version" (
	"recipe_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"state" text NOT NULL,
	"text" text NOT NULL,
	"text_hash" text NOT NULL,
	"document" jsonb NOT NULL,
	"compiler_version" integer NOT NULL,
	"checks" jsonb NOT NULL,
	"ticks" jsonb NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"signed_by" text,
	"signed_at" timestamp (3) with time zone,
	"self_signed" boolean DEFAULT false NOT NULL,
	"supplied_with" text,
	"published_at" timestamp (3) with time zone NOT NULL,
	"review_due" date,
	CONSTRAINT "recipe_version_recipe_id_version_pk" PRIMARY KEY("recipe_id","version"),
	CONSTRAINT "recipe_version_state" CHECK ("state" in ('published', 'superseded', 'withdrawn'))
);
--> statement-breakpoint
CREATE TABLE "request_answer" (
	"person" text NOT NULL,
	"request_id" text NOT NULL,
	"route" text NOT NULL,
	"answer" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "request_answer_person_request_id_pk" PRIMARY KEY("person","request_id")
);
--> statement-breakpoint
CREATE TABLE "review" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"draft_id" uuid NOT NULL,
	"act" text NOT NULL,
	"user_id" text NOT NULL,
	"revision" integer NOT NULL,
	"text_hash" text NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "review_act" CHECK ("act" in ('sent', 'taken-back', 'sent-back', 'signed-off'))
);
--> statement-breakpoint
CREATE TABLE "session" (
	"id" text PRIMARY KEY NOT NULL,
	"token" text NOT NULL,
	"user_id" text NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"ip_address" text,
	"user_agent" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "session_token_unique" UNIQUE("token")
);
--> statement-breakpoint
CREATE TABLE "sign_in_failure" (
	"key" text PRIMARY KEY NOT NULL,
	"count" integer NOT NULL,
	"last_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "team" (
	"id" integer PRIMARY KEY DEFAULT 1 NOT NULL,
	"name" text DEFAULT '' NOT NULL,
	"time_zone" text DEFAULT 'UTC' NOT NULL,
	"allow_self_sign_off" boolean DEFAULT false NOT NULL,
	"backup_note" text DEFAULT '' NOT NULL,
	"mail_note" text DEFAULT '' NOT NULL,
	"hazard_volts" real DEFAULT 42.4 NOT NULL,
	"purposes" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"topics" jsonb DEFAULT '[]'::jsonb NOT NULL,
	"address_confirmed" boolean DEFAULT false NOT NULL,
	"time_zone_confirmed" boolean DEFAULT false NOT NULL,
	"starter_opened" boolean DEFAULT false NOT NULL,
	"starting_put_away" boolean DEFAULT false NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "team_one_row" CHECK ("team"."id" = 1),
	CONSTRAINT "team_hazard_volts" CHECK ("team"."hazard_volts" > 0 and "team"."hazard_volts" <= 42.4001)
);
--> statement-breakpoint
CREATE TABLE "user" (
	"id" text PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"email" text NOT NULL,
	"email_verified" boolean DEFAULT false NOT NULL,
	"image" text,
	"role" text DEFAULT 'reader' NOT NULL,
	"deactivated_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "user_email_unique" UNIQUE("email"),
	CONSTRAINT "user_role" CHECK ("role" in ('reader', 'author', 'editor', 'admin'))
);
--> statement-breakpoint
CREATE TABLE "verification" (
	"id" text PRIMARY KEY NOT NULL,
	"identifier" text NOT NULL,
	"value" text NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "version_writer" (
	"recipe_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"user_id" text NOT NULL,
	CONSTRAINT "version_writer_recipe_id_version_user_id_pk" PRIMARY KEY("recipe_id","version","user_id")
);
--> statement-breakpoint
ALTER TABLE "account" ADD CONSTRAINT "account_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_event" ADD CONSTRAINT "audit_event_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "design" ADD CONSTRAINT "design_owner_id_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "design" ADD CONSTRAINT "design_recipe_id_recipe_id_fk" FOREIGN KEY ("recipe_id") REFERENCES "public"."recipe"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft" ADD CONSTRAINT "draft_recipe_id_recipe_id_fk" FOREIGN KEY ("recipe_id") REFERENCES "public"."recipe"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft" ADD CONSTRAINT "draft_owner_id_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft" ADD CONSTRAINT "draft_sent_by_user_id_fk" FOREIGN KEY ("sent_by") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft_author" ADD CONSTRAINT "draft_author_draft_id_draft_id_fk" FOREIGN KEY ("draft_id") REFERENCES "public"."draft"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft_author" ADD CONSTRAINT "draft_author_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft_save" ADD CONSTRAINT "draft_save_draft_id_draft_id_fk" FOREIGN KEY ("draft_id") REFERENCES "public"."draft"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft_save" ADD CONSTRAINT "draft_save_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft_writer" ADD CONSTRAINT "draft_writer_draft_id_draft_id_fk" FOREIGN KEY ("draft_id") REFERENCES "public"."draft"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "draft_writer" ADD CONSTRAINT "draft_writer_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "invitation" ADD CONSTRAINT "invitation_invited_by_user_id_fk" FOREIGN KEY ("invited_by") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "kept_input" ADD CONSTRAINT "kept_input_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "kept_input" ADD CONSTRAINT "kept_input_recipe_id_recipe_id_fk" FOREIGN KEY ("recipe_id") REFERENCES "public"."recipe"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "known_browser" ADD CONSTRAINT "known_browser_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "link" ADD CONSTRAINT "link_invitation_id_invitation_id_fk" FOREIGN KEY ("invitation_id") REFERENCES "public"."invitation"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "link" ADD CONSTRAINT "link_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "link" ADD CONSTRAINT "link_made_by_user_id_fk" FOREIGN KEY ("made_by") REFERENCES "public"."user"("id") ON DELETE set null ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mail" ADD CONSTRAINT "mail_invitation_id_invitation_id_fk" FOREIGN KEY ("invitation_id") REFERENCES "public"."invitation"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mail" ADD CONSTRAINT "mail_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notice" ADD CONSTRAINT "notice_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recipe_owner" ADD CONSTRAINT "recipe_owner_recipe_id_recipe_id_fk" FOREIGN KEY ("recipe_id") REFERENCES "public"."recipe"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recipe_owner" ADD CONSTRAINT "recipe_owner_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recipe_version" ADD CONSTRAINT "recipe_version_recipe_id_recipe_id_fk" FOREIGN KEY ("recipe_id") REFERENCES "public"."recipe"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recipe_version" ADD CONSTRAINT "recipe_version_signed_by_user_id_fk" FOREIGN KEY ("signed_by") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_draft_id_draft_id_fk" FOREIGN KEY ("draft_id") REFERENCES "public"."draft"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "review" ADD CONSTRAINT "review_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "version_writer" ADD CONSTRAINT "version_writer_user_id_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."user"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "account_user" ON "account" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "audit_event_at" ON "audit_event" USING btree ("at");--> statement-breakpoint
CREATE INDEX "design_owner" ON "design" USING btree ("owner_id");--> statement-breakpoint
CREATE INDEX "design_recipe" ON "design" USING btree ("recipe_id","version");--> statement-breakpoint
CREATE UNIQUE INDEX "draft_open" ON "draft" USING btree ("recipe_id") WHERE "draft"."state" in ('draft', 'in-review');--> statement-breakpoint
CREATE INDEX "draft_save_draft" ON "draft_save" USING btree ("draft_id","created_at");--> statement-breakpoint
CREATE UNIQUE INDEX "draft_save_revision" ON "draft_save" USING btree ("draft_id","revision");--> statement-breakpoint
CREATE UNIQUE INDEX "invitation_open_email" ON "invitation" USING btree (lower("email")) WHERE "invitation"."accepted_at" is null and "invitation"."revoked_at" is null;--> statement-breakpoint
CREATE INDEX "notice_user" ON "notice" USING btree ("user_id");--> statement-breakpoint
CREATE UNIQUE INDEX "recipe_version_published" ON "recipe_version" USING btree ("recipe_id") WHERE "recipe_version"."state" = 'published';--> statement-breakpoint
CREATE INDEX "request_answer_created" ON "request_answer" USING btree ("created_at");--> statement-breakpoint
CREATE INDEX "review_draft" ON "review" USING btree ("draft_id","at");--> statement-breakpoint
CREATE INDEX "session_user" ON "session" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "verification_identifier" ON "verification" USING btree ("identifier");