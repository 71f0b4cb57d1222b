import { integer, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import { users } from './people.ts';

export const benchProfiles = sqliteTable('bench_profiles', {
  id: text('id').primaryKey(),
  createdBy: text('created_by')
    .notNull()
    .references(() => users.id),
  createdAtMs: integer('created_at_ms').notNull(),
  /** The newest version. No foreign key: the two rows come in one transaction. */
  headVersionId: text('head_version_id').notNull(),
});

/** Append-only: a pack names the very version that it was made for. */
export const benchProfileVersions = sqliteTable(
  'bench_profile_versions',
  {
    id: text('id').primaryKey(),
    profileId: text('profile_id')
      .notNull()
      .references(() => benchProfiles.id),
    number: integer('number').notNull(),
    name: text('name').notNull(),
    /** The whole profile file, canonical JSON. */
    profileJson: text('profile_json').notNull(),
    contentDigest: text('content_digest').notNull(),
    /** Of the whole file, about too: part of a packKey. */
    fileDigest: text('file_digest').notNull(),
    savedBy: text('saved_by')
      .notNull()
      .references(() => users.id),
    savedAtMs: integer('saved_at_ms').notNull(),
  },
  (t) => [uniqueIndex('bench_profile_versions_number').on(t.profileId, t.number)],
);
