import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  date,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  real,
  text,
  timestamp,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import type { Check, RecipeDocument } from '#recipe';

/**
 * Every table. One schema for PGlite and PostgreSQL. Instants are `timestamptz` with milliseconds (so that a Date compares equal on both),
 * due dates are calendar dates in the team's time zone. Migrations are generated from this file into `drizzle/` and never edited after release.
 */
const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date', precision: 3 });
const createdAt = () => instant('created_at').notNull().defaultNow();
const updatedAt = () => instant('updated_at').notNull().defaultNow();
const oneOf = (column: string, values: readonly string[]) =>
  sql.raw(`"${column}" in (${values.map((v) => `'${v}'`).join(', ')})`);

// Accounts: names and columns of better-auth's core tables, ids are text.

export const user = pgTable(
  'user',
  {
    id: text('id').primaryKey(),
    name: text('name').notNull(),
    email: text('email').notNull().unique(),
    emailVerified: boolean('email_verified').notNull().default(false),
    image: text('image'),
    role: text('role', { enum: ['reader', 'author', 'editor', 'admin'] })
      .notNull()
      .default('reader'),
    deactivatedAt: instant('deactivated_at'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
  },
  () => [check('user_role', oneOf('role', ['reader', 'author', 'editor', 'admin']))],
);

export const session = pgTable(
  'session',
  {
    id: text('id').primaryKey(),
    token: text('token').notNull().unique(),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'cascade' }),
    expiresAt: instant('expires_at').notNull(),
    ipAddress: text('ip_address'),
    userAgent: text('user_agent'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
  },
  (t) => [index('session_user').on(t.userId)],
);

export const account = pgTable(
  'account',
  {
    id: text('id').primaryKey(),
    accountId: text('account_id').notNull(),
    providerId: text('provider_id').notNull(),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'cascade' }),
    accessToken: text('access_token'),
    refreshToken: text('refresh_token'),
    idToken: text('id_token'),
    accessTokenExpiresAt: instant('access_token_expires_at'),
    refreshTokenExpiresAt: instant('refresh_token_expires_at'),
    scope: text('scope'),
    password: text('password'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
  },
  (t) => [index('account_user').on(t.userId)],
);

export const verification = pgTable(
  'verification',
  {
    id: text('id').primaryKey(),
    identifier: text('identifier').notNull(),
    value: text('value').notNull(),
    expiresAt: instant('expires_at').notNull(),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
  },
  (t) => [index('verification_identifier').on(t.identifier)],
);

/** Set-up, invitation and password links that we make ourselves: only the token's SHA-256 is stored. */
export const link = pgTable(
  'link',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    kind: text('kind', { enum: ['set-up', 'invitation', 'password'] }).notNull(),
    tokenHash: text('token_hash').notNull().unique(),
    invitationId: uuid('invitation_id').references(() => invitation.id, { onDelete: 'cascade' }),
    userId: text('user_id').references(() => user.id, { onDelete: 'cascade' }),
    /** Null: made for a mail, or by the server's own command. */
    madeBy: text('made_by').references(() => user.id, { onDelete: 'set null' }),
    expiresAt: instant('expires_at').notNull(),
    usedAt: instant('used_at'),
    createdAt: createdAt(),
  },
  () => [check('link_kind', oneOf('kind', ['set-up', 'invitation', 'password']))],
);

export const invitation = pgTable(
  'invitation',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    email: text('email').notNull(),
    role: text('role', { enum: ['reader', 'author', 'editor', 'admin'] }).notNull(),
    invitedBy: text('invited_by')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
    sentAt: instant('sent_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
    acceptedAt: instant('accepted_at'),
    revokedAt: instant('revoked_at'),
    createdAt: createdAt(),
  },
  (t) => [
    check('invitation_role', oneOf('role', ['reader', 'author', 'editor', 'admin'])),
    uniqueIndex('invitation_open_email')
      .on(sql`lower(${t.email})`)
      .where(sql`${t.acceptedAt} is null and ${t.revokedAt} is null`),
  ],
);

/** Failed sign-ins by what is counted (`account:…`, `account-address:…`, `address:…`); successes clear, never count. */
export const signInFailure = pgTable('sign_in_failure', {
  key: text('key').primaryKey(),
  count: integer('count').notNull(),
  lastAt: instant('last_at').notNull(),
});

/** Browsers that have signed in to an account before, by the hash of a long-lived cookie: never locked out by others' failures. */
export const knownBrowser = pgTable(
  'known_browser',
  {
    tokenHash: text('token_hash').notNull(),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'cascade' }),
    lastAt: instant('last_at').notNull(),
  },
  (t) => [primaryKey({ columns: [t.tokenHash, t.userId] })],
);

// The team

/** One row, id 1. */
export const team = pgTable(
  'team',
  {
    id: integer('id').primaryKey().default(1),
    name: text('name').notNull().default(''),
    timeZone: text('time_zone').notNull().default('UTC'),
    allowSelfSignOff: boolean('allow_self_sign_off').notNull().default(false),
    backupNote: text('backup_note').notNull().default(''),
    mailNote: text('mail_note').notNull().default(''),
    hazardVolts: real('hazard_volts').notNull().default(42.4),
    purposes: jsonb('purposes').$type<readonly string[]>().notNull().default([]),
    topics: jsonb('topics').$type<readonly string[]>().notNull().default([]),
    addressConfirmed: boolean('address_confirmed').notNull().default(false),
    timeZoneConfirmed: boolean('time_zone_confirmed').notNull().default(false),
    starterOpened: boolean('starter_opened').notNull().default(false),
    startingPutAway: boolean('starting_put_away').notNull().default(false),
    updatedAt: updatedAt(),
  },
  (t) => [
    check('team_one_row', sql`${t.id} = 1`),
    check('team_hazard_volts', sql`${t.hazardVolts} > 0 and ${t.hazardVolts} <= 42.4001`),
  ],
);

/** The outbox. No token ever stands here: a link is made when a mail goes out, or by a named act. */
export const mail = pgTable(
  'mail',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    kind: text('kind').notNull(),
    recipient: text('recipient').notNull(),
    subject: text('subject').notNull(),
    body: text('body').notNull(),
    invitationId: uuid('invitation_id').references(() => invitation.id, { onDelete: 'cascade' }),
    userId: text('user_id').references(() => user.id, { onDelete: 'cascade' }),
    state: text('state', { enum: ['captured', 'sent', 'failed'] })
      .notNull()
      .default('captured'),
    createdAt: createdAt(),
  },
  () => [check('mail_state', oneOf('state', ['captured', 'sent', 'failed']))],
);

/** Told to one person at the next visit, until marked as read. */
export const notice = pgTable(
  'notice',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'cascade' }),
    kind: text('kind').notNull(),
    text: text('text').notNull(),
    seenAt: instant('seen_at'),
    createdAt: createdAt(),
  },
  (t) => [index('notice_user').on(t.userId)],
);

/** One line for each act, written in its transaction. Names are copied: the log outlives what it speaks of. */
export const auditEvent = pgTable(
  'audit_event',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    at: instant('at').notNull(),
    userId: text('user_id').references(() => user.id, { onDelete: 'set null' }),
    byName: text('by_name').notNull(),
    act: text('act').notNull(),
    about: text('about').notNull(),
    detail: text('detail').notNull().default(''),
  },
  (t) => [index('audit_event_at').on(t.at)],
);

/** First answers of changing requests, kept for 24 hours. */
export const requestAnswer = pgTable(
  'request_answer',
  {
    /** Person's id, or `anyone:` and a hash of the link that was used. */
    person: text('person').notNull(),
    requestId: text('request_id').notNull(),
    route: text('route').notNull(),
    answer: jsonb('answer').$type<unknown>().notNull(),
    createdAt: createdAt(),
  },
  (t) => [primaryKey({ columns: [t.person, t.requestId] }), index('request_answer_created').on(t.createdAt)],
);

// Recipes

export const recipe = pgTable(
  'recipe',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    /** Reserved at sending, fixed at the first publication; null while a new draft has never been sent. */
    slug: text('slug').unique(),
    slugFixed: boolean('slug_fixed').notNull().default(false),
    number: text('number').unique(),
    origin: text('origin', { enum: ['team', 'supplied'] })
      .notNull()
      .default('team'),
    createdAt: createdAt(),
  },
  () => [check('recipe_origin', oneOf('origin', ['team', 'supplied']))],
);

export const recipeOwner = pgTable(
  'recipe_owner',
  {
    recipeId: uuid('recipe_id')
      .notNull()
      .references(() => recipe.id, { onDelete: 'cascade' }),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
  },
  (t) => [primaryKey({ columns: [t.recipeId, t.userId] })],
);

export const draft = pgTable(
  'draft',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    recipeId: uuid('recipe_id')
      .notNull()
      .references(() => recipe.id, { onDelete: 'cascade' }),
    state: text('state', { enum: ['draft', 'in-review', 'published', 'discarded'] })
      .notNull()
      .default('draft'),
    text: text('text').notNull(),
    revision: integer('revision').notNull().default(0),
    /** The published version that this draft changes; null for a new recipe. */
    fromVersion: integer('from_version'),
    ownerId: text('owner_id')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
    note: text('note').notNull().default(''),
    sentBy: text('sent_by').references(() => user.id, { onDelete: 'set null' }),
    sentAt: instant('sent_at'),
    /** SHA-256 of the text that was sent. */
    sentHash: text('sent_hash'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
  },
  (t) => [
    check('draft_state', oneOf('state', ['draft', 'in-review', 'published', 'discarded'])),
    // One open change per recipe.
    uniqueIndex('draft_open').on(t.recipeId).where(sql`${t.state} in ('draft', 'in-review')`),
  ],
);

/** People invited to write a draft, beside its owner. */
export const draftAuthor = pgTable(
  'draft_author',
  {
    draftId: uuid('draft_id')
      .notNull()
      .references(() => draft.id, { onDelete: 'cascade' }),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'cascade' }),
    /** Set when somebody takes the invitation back: what this person still sends is kept to the side, not refused. */
    removedAt: instant('removed_at'),
  },
  (t) => [primaryKey({ columns: [t.draftId, t.userId] })],
);

/** Who changed the text since the last version: they may not sign it off. */
export const draftWriter = pgTable(
  'draft_writer',
  {
    draftId: uuid('draft_id')
      .notNull()
      .references(() => draft.id, { onDelete: 'cascade' }),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
  },
  (t) => [primaryKey({ columns: [t.draftId, t.userId] })],
);

export const draftSave = pgTable(
  'draft_save',
  {
    /** Made by the client: a repeat gets the stored answer. */
    id: text('id').primaryKey(),
    draftId: uuid('draft_id')
      .notNull()
      .references(() => draft.id, { onDelete: 'cascade' }),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
    baseRevision: integer('base_revision').notNull(),
    /** The revision this save became; null when it was stored to the side. */
    revision: integer('revision'),
    /** Why it went to the side; null when it did not. */
    aside: text('aside', { enum: ['stale', 'in-review', 'published', 'discarded', 'not-allowed'] }),
    text: text('text').notNull(),
    /** Kept for good: it was sent, lost a conflict, or is the parent of one. */
    pinned: boolean('pinned').notNull().default(false),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    index('draft_save_draft').on(t.draftId, t.createdAt),
    uniqueIndex('draft_save_revision').on(t.draftId, t.revision),
    check(
      'draft_save_aside',
      sql`${t.aside} is null or ${t.aside} in ('stale', 'in-review', 'published', 'discarded', 'not-allowed')`,
    ),
  ],
);

export const recipeVersion = pgTable(
  'recipe_version',
  {
    recipeId: uuid('recipe_id')
      .notNull()
      .references(() => recipe.id, { onDelete: 'restrict' }),
    version: integer('version').notNull(),
    state: text('state', { enum: ['published', 'superseded', 'withdrawn'] }).notNull(),
    text: text('text').notNull(),
    textHash: text('text_hash').notNull(),
    document: jsonb('document').$type<RecipeDocument>().notNull(),
    compilerVersion: integer('compiler_version').notNull(),
    checks: jsonb('checks').$type<readonly Check[]>().notNull(),
    ticks: jsonb('ticks').$type<readonly string[]>().notNull(),
    note: text('note').notNull().default(''),
    /** Null on supplied versions until an editor of the team signs. */
    signedBy: text('signed_by').references(() => user.id, { onDelete: 'restrict' }),
    signedAt: instant('signed_at'),
    selfSigned: boolean('self_signed').notNull().default(false),
    /** The release that supplied it ("0.1.0"); null for the team's own. */
    suppliedWith: text('supplied_with'),
    publishedAt: instant('published_at').notNull(),
    reviewDue: date('review_due', { mode: 'string' }),
  },
  (t) => [
    primaryKey({ columns: [t.recipeId, t.version] }),
    check('recipe_version_state', oneOf('state', ['published', 'superseded', 'withdrawn'])),
    uniqueIndex('recipe_version_published').on(t.recipeId).where(sql`${t.state} = 'published'`),
  ],
);

export const versionWriter = pgTable(
  'version_writer',
  {
    recipeId: uuid('recipe_id').notNull(),
    version: integer('version').notNull(),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
  },
  (t) => [primaryKey({ columns: [t.recipeId, t.version, t.userId] })],
);

/** What editors decided, and each sending. */
export const review = pgTable(
  'review',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    draftId: uuid('draft_id')
      .notNull()
      .references(() => draft.id, { onDelete: 'cascade' }),
    act: text('act', { enum: ['sent', 'taken-back', 'sent-back', 'signed-off'] }).notNull(),
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
    revision: integer('revision').notNull(),
    textHash: text('text_hash').notNull(),
    note: text('note').notNull().default(''),
    at: instant('at').notNull(),
  },
  (t) => [
    index('review_draft').on(t.draftId, t.at),
    check('review_act', oneOf('act', ['sent', 'taken-back', 'sent-back', 'signed-off'])),
  ],
);

// What readers keep

export const keptInput = pgTable(
  'kept_input',
  {
    userId: text('user_id')
      .notNull()
      .references(() => user.id, { onDelete: 'cascade' }),
    recipeId: uuid('recipe_id')
      .notNull()
      .references(() => recipe.id, { onDelete: 'cascade' }),
    calculator: text('calculator').notNull(),
    /** Field name → what was typed. Names that a version lacks stay. */
    fields: jsonb('fields').$type<Readonly<Record<string, string>>>().notNull(),
    lastSaveId: text('last_save_id').notNull(),
    updatedAt: updatedAt(),
  },
  (t) => [primaryKey({ columns: [t.userId, t.recipeId, t.calculator] })],
);

export const design = pgTable(
  'design',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    ownerId: text('owner_id')
      .notNull()
      .references(() => user.id, { onDelete: 'restrict' }),
    recipeId: uuid('recipe_id')
      .notNull()
      .references(() => recipe.id, { onDelete: 'restrict' }),
    version: integer('version').notNull(),
    name: text('name').notNull(),
    project: text('project').notNull().default(''),
    note: text('note').notNull().default(''),
    visibility: text('visibility', { enum: ['team', 'only me'] })
      .notNull()
      .default('team'),
    inputs: jsonb('inputs').$type<Readonly<Record<string, Readonly<Record<string, string>>>>>().notNull(),
    shown: jsonb('shown').$type<unknown>().notNull(),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
  },
  (t) => [
    index('design_owner').on(t.ownerId),
    index('design_recipe').on(t.recipeId, t.version),
    check('design_visibility', oneOf('visibility', ['team', 'only me'])),
  ],
);
