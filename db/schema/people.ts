import { sql } from 'drizzle-orm';
import { check, index, integer, primaryKey, sqliteTable, text } from 'drizzle-orm/sqlite-core';

export const users = sqliteTable('users', {
  id: text('id').primaryKey(),
  /** Trimmed, lower case. */
  email: text('email').notNull().unique(),
  name: text('name').notNull(),
  /** argon2id in PHC form; null until an invitation was taken up, and for demo people. */
  passwordHash: text('password_hash'),
  isDemo: integer('is_demo', { mode: 'boolean' }).notNull().default(false),
  createdAtMs: integer('created_at_ms').notNull(),
  lastSeenAtMs: integer('last_seen_at_ms'),
});

export const userRoles = sqliteTable(
  'user_roles',
  {
    userId: text('user_id')
      .notNull()
      .references(() => users.id),
    role: text('role', { enum: ['author', 'reviewer', 'operator', 'admin'] }).notNull(),
    grantedAtMs: integer('granted_at_ms').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.userId, t.role] }),
    check('user_roles_role', sql`${t.role} in ('author', 'reviewer', 'operator', 'admin')`),
  ],
);

export const sessions = sqliteTable(
  'sessions',
  {
    /** Hex SHA-256 of the secret in the cookie; the secret itself is stored nowhere. */
    id: text('id').primaryKey(),
    userId: text('user_id')
      .notNull()
      .references(() => users.id),
    /** Seconds, as the session library writes them: the absolute end. Idleness is judged by lastSeenAtMs. */
    expiresAt: integer('expires_at_sec').notNull(),
    /** Names the session in lists and when ending it by hand. */
    publicId: text('public_id').notNull().unique(),
    createdAtMs: integer('created_at_ms').notNull(),
    lastSeenAtMs: integer('last_seen_at_ms').notNull(),
    userAgent: text('user_agent').notNull(),
  },
  (t) => [index('sessions_user').on(t.userId)],
);

export const oneTimeLinks = sqliteTable(
  'one_time_links',
  {
    id: text('id').primaryKey(),
    /** Hex SHA-256 of the 256-bit token; the token is shown once. */
    tokenHash: text('token_hash').notNull().unique(),
    kind: text('kind', { enum: ['invite', 'reset'] }).notNull(),
    userId: text('user_id')
      .notNull()
      .references(() => users.id),
    createdBy: text('created_by')
      .notNull()
      .references(() => users.id),
    createdAtMs: integer('created_at_ms').notNull(),
    expiresAtMs: integer('expires_at_ms').notNull(),
    usedAtMs: integer('used_at_ms'),
    /** Set where a newer link or an admin took it back. */
    revokedAtMs: integer('revoked_at_ms'),
  },
  (t) => [
    index('one_time_links_user').on(t.userId),
    check('one_time_links_kind', sql`${t.kind} in ('invite', 'reset')`),
  ],
);

/** Append-only. Who did what to which object; detail never holds a secret. */
export const audit = sqliteTable(
  'audit',
  {
    seq: integer('seq').primaryKey({ autoIncrement: true }),
    atMs: integer('at_ms').notNull(),
    /** Null for acts of the installation itself and of strangers. */
    personId: text('person_id').references(() => users.id),
    act: text('act').notNull(),
    objectKind: text('object_kind').notNull(),
    objectId: text('object_id'),
    /** How the object was called then, for a reader. */
    objectLabel: text('object_label').notNull(),
    detailJson: text('detail_json').notNull().default('{}'),
    requestId: text('request_id'),
  },
  (t) => [index('audit_at').on(t.atMs), index('audit_person').on(t.personId), index('audit_act').on(t.act)],
);

/** One row: what this data directory is. */
export const installation = sqliteTable(
  'installation',
  {
    id: integer('id').primaryKey(),
    kind: text('kind', { enum: ['team', 'demo'] }).notNull(),
    createdAtMs: integer('created_at_ms').notNull(),
    /** Hex SHA-256 of the first-run code in force; null once used. */
    firstRunCodeHash: text('first_run_code_hash'),
    /** Set when the whole demo team stands, so that a start cut half-way goes on. */
    demoReadyAtMs: integer('demo_ready_at_ms'),
  },
  (t) => [check('installation_single', sql`${t.id} = 1`)],
);

/** Answers kept for a retry with the same Idempotency-Key, per person and endpoint. */
export const idempotencyKeys = sqliteTable(
  'idempotency_keys',
  {
    personId: text('person_id')
      .notNull()
      .references(() => users.id),
    endpoint: text('endpoint').notNull(),
    key: text('key').notNull(),
    /** Hex SHA-256 of the path and the body: another request with the same key is refused. */
    requestDigest: text('request_digest').notNull(),
    /** The id of what was made (a revision, a pack job …); the service answers from it afresh. */
    resultId: text('result_id').notNull(),
    createdAtMs: integer('created_at_ms').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.personId, t.endpoint, t.key] }),
    index('idempotency_keys_created').on(t.createdAtMs),
  ],
);
