import { sql } from 'drizzle-orm';
import { check, index, integer, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import { benchProfileVersions } from './benches.ts';
import { users } from './people.ts';
import { editions, revisions } from './waveforms.ts';

/** A finished, proven pack of one revision (as an edition, or as a draft) and one profile version. Stored bytes may be shared by packKey. */
export const packs = sqliteTable(
  'packs',
  {
    id: text('id').primaryKey(),
    /** Hex SHA-256. */
    packKey: text('pack_key').notNull(),
    revisionId: text('revision_id')
      .notNull()
      .references(() => revisions.id),
    /** Null: a draft's pack. */
    editionId: text('edition_id').references(() => editions.id),
    profileVersionId: text('profile_version_id')
      .notNull()
      .references(() => benchProfileVersions.id),
    /** What a download is called. */
    fileName: text('file_name').notNull(),
    /** Where the bytes lie, below DATA_DIR. */
    storedPath: text('stored_path').notNull(),
    fileBytes: integer('file_bytes').notNull(),
    /** Hex SHA-256 of the zip, and of its vector. */
    fileSha256: text('file_sha256').notNull(),
    vectorSha256: text('vector_sha256').notNull(),
    manifestJson: text('manifest_json').notNull(),
    madeBy: text('made_by')
      .notNull()
      .references(() => users.id),
    madeAtMs: integer('made_at_ms').notNull(),
  },
  (t) => [
    uniqueIndex('packs_edition').on(t.editionId, t.profileVersionId, t.packKey),
    index('packs_revision').on(t.revisionId),
    index('packs_key').on(t.packKey),
    index('packs_vector').on(t.vectorSha256),
  ],
);

export const packJobs = sqliteTable(
  'pack_jobs',
  {
    id: text('id').primaryKey(),
    packKey: text('pack_key').notNull(),
    revisionId: text('revision_id')
      .notNull()
      .references(() => revisions.id),
    editionId: text('edition_id').references(() => editions.id),
    profileVersionId: text('profile_version_id')
      .notNull()
      .references(() => benchProfileVersions.id),
    askedBy: text('asked_by')
      .notNull()
      .references(() => users.id),
    state: text('state', { enum: ['waiting', 'running', 'done', 'failed', 'cancelled'] }).notNull(),
    step: text('step'),
    doneRatio: real('done_ratio').notNull().default(0),
    problemCode: text('problem_code'),
    problemDetail: text('problem_detail'),
    packId: text('pack_id').references(() => packs.id),
    /** How often it was begun: a job that a killed server left running starts anew once, then fails. */
    starts: integer('starts').notNull().default(0),
    createdAtMs: integer('created_at_ms').notNull(),
    startedAtMs: integer('started_at_ms'),
    endedAtMs: integer('ended_at_ms'),
  },
  (t) => [
    index('pack_jobs_state').on(t.state, t.createdAtMs),
    index('pack_jobs_person').on(t.askedBy),
    check('pack_jobs_state_known', sql`${t.state} in ('waiting', 'running', 'done', 'failed', 'cancelled')`),
  ],
);

/** Append-only. Limits entered at the bench for another device; the pack's own card stays as it was reviewed. */
export const deviceCards = sqliteTable(
  'device_cards',
  {
    id: text('id').primaryKey(),
    packId: text('pack_id')
      .notNull()
      .references(() => packs.id),
    deviceName: text('device_name').notNull(),
    /** The overriding intent: outputRmsDbm, lossDb, devicePeakLimitDbm, deviceMeanLimitDbm, levelToleranceDb. */
    intentJson: text('intent_json').notNull(),
    enteredBy: text('entered_by')
      .notNull()
      .references(() => users.id),
    enteredAtMs: integer('entered_at_ms').notNull(),
  },
  (t) => [index('device_cards_pack').on(t.packId, t.enteredAtMs)],
);
