import { sql } from 'drizzle-orm';
import { blob, check, foreignKey, index, integer, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import { users } from './people.ts';

export const waveforms = sqliteTable('waveforms', {
  id: text('id').primaryKey(),
  createdBy: text('created_by')
    .notNull()
    .references(() => users.id),
  createdAtMs: integer('created_at_ms').notNull(),
  /** The newest revision on the main line (a side revision is never head). No foreign key: the two rows come in one transaction. */
  headRevisionId: text('head_revision_id').notNull(),
  /** The head's title and time, kept beside it for the list. */
  title: text('title').notNull(),
  changedAtMs: integer('changed_at_ms').notNull(),
});

/** Append-only. Equal contents are stored once, named by their digest. */
export const contents = sqliteTable('contents', {
  /** `sha256:` + hex. */
  digest: text('digest').primaryKey(),
  /** Canonical JSON of `content`, gzip. */
  bytes: blob('bytes', { mode: 'buffer' }).notNull(),
  /** Bytes of the JSON itself. */
  jsonBytes: integer('json_bytes').notNull(),
  createdAtMs: integer('created_at_ms').notNull(),
});

/** A cache: figures measured from a content by one version of the engine. */
export const contentFigures = sqliteTable(
  'content_figures',
  {
    digest: text('digest')
      .notNull()
      .references(() => contents.digest),
    synthVersion: text('synth_version').notNull(),
    figuresJson: text('figures_json').notNull(),
    measuredAtMs: integer('measured_at_ms').notNull(),
  },
  (t) => [uniqueIndex('content_figures_key').on(t.digest, t.synthVersion)],
);

/** Append-only. */
export const revisions = sqliteTable(
  'revisions',
  {
    id: text('id').primaryKey(),
    waveformId: text('waveform_id')
      .notNull()
      .references(() => waveforms.id),
    number: integer('number').notNull(),
    /** May lie in another waveform: a copy or an import names its source. */
    parentId: text('parent_id'),
    /** Saved from a parent that was no longer head: kept, numbered, never head. */
    isSide: integer('is_side', { mode: 'boolean' }).notNull(),
    contentDigest: text('content_digest')
      .notNull()
      .references(() => contents.digest),
    intentDigest: text('intent_digest').notNull(),
    documentDigest: text('document_digest').notNull(),
    title: text('title').notNull(),
    aboutJson: text('about_json').notNull(),
    intentJson: text('intent_json').notNull(),
    authorId: text('author_id')
      .notNull()
      .references(() => users.id),
    createdAtMs: integer('created_at_ms').notNull(),
  },
  (t) => [
    foreignKey({ columns: [t.parentId], foreignColumns: [t.id], name: 'revisions_parent' }),
    uniqueIndex('revisions_number').on(t.waveformId, t.number),
    index('revisions_content').on(t.contentDigest),
  ],
);

/** Append-only. Every transition with person and time; a revision's state is its newest row, draft where there is none. */
export const revisionStates = sqliteTable(
  'revision_states',
  {
    seq: integer('seq').primaryKey({ autoIncrement: true }),
    revisionId: text('revision_id')
      .notNull()
      .references(() => revisions.id),
    state: text('state', { enum: ['draft', 'inReview', 'released', 'withdrawn'] }).notNull(),
    /** What brought it here. */
    act: text('act', { enum: ['saved', 'asked', 'takenBack', 'returned', 'released', 'withdrawn'] }).notNull(),
    /** The note of the asker, the reason of a return or withdrawal. */
    note: text('note').notNull(),
    personId: text('person_id')
      .notNull()
      .references(() => users.id),
    atMs: integer('at_ms').notNull(),
  },
  (t) => [
    index('revision_states_revision').on(t.revisionId, t.seq),
    check('revision_states_state', sql`${t.state} in ('draft', 'inReview', 'released', 'withdrawn')`),
    check('revision_states_act', sql`${t.act} in ('saved', 'asked', 'takenBack', 'returned', 'released', 'withdrawn')`),
  ],
);

export const reviewRequests = sqliteTable(
  'review_requests',
  {
    id: text('id').primaryKey(),
    waveformId: text('waveform_id')
      .notNull()
      .references(() => waveforms.id),
    revisionId: text('revision_id')
      .notNull()
      .references(() => revisions.id),
    note: text('note').notNull(),
    askedBy: text('asked_by')
      .notNull()
      .references(() => users.id),
    askedAtMs: integer('asked_at_ms').notNull(),
    outcome: text('outcome', { enum: ['released', 'returned', 'takenBack'] }),
    closedBy: text('closed_by').references(() => users.id),
    closedAtMs: integer('closed_at_ms'),
    reason: text('reason'),
  },
  (t) => [
    uniqueIndex('review_requests_open')
      .on(t.waveformId)
      .where(sql`${t.outcome} is null`),
    index('review_requests_revision').on(t.revisionId),
    check('review_requests_outcome', sql`${t.outcome} in ('released', 'returned', 'takenBack')`),
  ],
);

/** Append-only. */
export const editions = sqliteTable(
  'editions',
  {
    id: text('id').primaryKey(),
    waveformId: text('waveform_id')
      .notNull()
      .references(() => waveforms.id),
    /** 1, 2, … in its waveform; never reused. */
    number: integer('number').notNull(),
    revisionId: text('revision_id')
      .notNull()
      .unique()
      .references(() => revisions.id),
    /** An edition keeps its own title. */
    title: text('title').notNull(),
    contentDigest: text('content_digest').notNull(),
    releasedBy: text('released_by')
      .notNull()
      .references(() => users.id),
    releasedAtMs: integer('released_at_ms').notNull(),
    note: text('note').notNull(),
  },
  (t) => [uniqueIndex('editions_number').on(t.waveformId, t.number), index('editions_content').on(t.contentDigest)],
);

/** Append-only. For ever: there is no un-withdraw. */
export const withdrawals = sqliteTable('withdrawals', {
  editionId: text('edition_id')
    .primaryKey()
    .references(() => editions.id),
  reason: text('reason').notNull(),
  withdrawnBy: text('withdrawn_by')
    .notNull()
    .references(() => users.id),
  withdrawnAtMs: integer('withdrawn_at_ms').notNull(),
});
