import { sql } from 'drizzle-orm'
import { bigint, check, index, integer, jsonb, pgTable, primaryKey, text, timestamp, unique, uuid, varchar } from 'drizzle-orm/pg-core'

const id = () => uuid('id').primaryKey().defaultRandom()
const moment = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' })
const created = () => moment('created_at').notNull().defaultNow()

export const users = pgTable('users', {
  id: id(),
  /** Lower case. */
  email: text('email').notNull().unique(),
  name: text('name').notNull(),
  passwordHash: text('password_hash').notNull(),
  role: text('role', { enum: ['member', 'admin'] }).notNull().default('member'),
  /** null: the address is not confirmed yet. */
  confirmedAt: moment('confirmed_at'),
  createdAt: created(),
})

/** The sealed cookie names a row here; without it the cookie is worth nothing, so that a session can be ended from outside. */
export const sessions = pgTable('sessions', {
  id: id(),
  userId: uuid('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
  createdAt: created(),
  expiresAt: moment('expires_at').notNull(),
  endedAt: moment('ended_at'),
}, table => [index('sessions_user').on(table.userId)])

/** Links sent by mail. Only the hash is kept; `payload` holds what a registration asked for until it is confirmed. */
export const tokens = pgTable('tokens', {
  id: id(),
  userId: uuid('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
  kind: text('kind', { enum: ['confirm', 'reset'] }).notNull(),
  /** SHA-256, hexadecimal. */
  hash: text('hash').notNull().unique(),
  payload: jsonb('payload').$type<{ readonly name: string, readonly passwordHash: string }>(),
  expiresAt: moment('expires_at').notNull(),
  usedAt: moment('used_at'),
  createdAt: created(),
}, table => [index('tokens_user').on(table.userId, table.kind)])

/** The local mailbox: what would have been sent, where no mail server is set. */
export const mail = pgTable('mail', {
  id: id(),
  recipient: text('recipient').notNull(),
  subject: text('subject').notNull(),
  text: text('text').notNull(),
  html: text('html').notNull(),
  sentAt: moment('sent_at').notNull().defaultNow(),
}, table => [index('mail_sent').on(table.sentAt)])

/** Title, strings, capos and bars repeat what the score says, for the folio's list; the log is the truth. */
export const arrangements = pgTable('arrangements', {
  id: id(),
  title: text('title').notNull(),
  strings: jsonb('strings').notNull(),
  capos: jsonb('capos').notNull(),
  bars: integer('bars').notNull(),
  state: text('state', { enum: ['draft', 'ready'] }).notNull().default('draft'),
  revision: integer('revision').notNull().default(0),
  createdAt: created(),
  changedAt: moment('changed_at').notNull().defaultNow(),
  /** Deleted things are kept, so that deleting can be undone. */
  deletedAt: moment('deleted_at'),
})

export const members = pgTable('members', {
  arrangementId: uuid('arrangement_id').notNull().references(() => arrangements.id, { onDelete: 'cascade' }),
  userId: uuid('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
  role: text('role', { enum: ['arranger', 'co-arranger', 'collaborator', 'performer', 'publisher'] }).notNull(),
  addedAt: moment('added_at').notNull().defaultNow(),
}, table => [primaryKey({ columns: [table.arrangementId, table.userId] }), index('members_user').on(table.userId)])

/** Tunings that people keep for themselves. What they sound like tells which arrangements are in them. */
export const tunings = pgTable('tunings', {
  id: id(),
  ownerId: uuid('owner_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
  name: text('name').notNull(),
  notes: text('notes').notNull(),
  strings: jsonb('strings').notNull(),
  createdAt: created(),
  changedAt: moment('changed_at').notNull().defaultNow(),
  /** Kept, so that deleting can be undone. */
  deletedAt: moment('deleted_at'),
}, table => [index('tunings_owner').on(table.ownerId)])

/** The log: every save is one revision. Rows are added, never changed. */
export const revisions = pgTable('revisions', {
  arrangementId: uuid('arrangement_id').notNull().references(() => arrangements.id, { onDelete: 'cascade' }),
  revision: integer('revision').notNull(),
  clientId: varchar('client_id', { length: 64 }).notNull(),
  seq: integer('seq').notNull(),
  authorId: uuid('author_id').references(() => users.id, { onDelete: 'set null' }),
  transactions: jsonb('transactions').notNull(),
  savedAt: moment('saved_at').notNull().defaultNow(),
}, table => [
  primaryKey({ columns: [table.arrangementId, table.revision] }),
  unique('revisions_client_seq').on(table.arrangementId, table.clientId, table.seq),
  check('revisions_positive', sql`${table.revision} > 0`),
])

/** The whole score at some revisions, so that opening need not replay the log from the start. Revision 0 is how it began. */
export const snapshots = pgTable('snapshots', {
  arrangementId: uuid('arrangement_id').notNull().references(() => arrangements.id, { onDelete: 'cascade' }),
  revision: integer('revision').notNull(),
  score: jsonb('score').notNull(),
  takenAt: moment('taken_at').notNull().defaultNow(),
}, table => [primaryKey({ columns: [table.arrangementId, table.revision] })])

/** As rate-limiter-flexible's RateLimiterPostgres wants it. Keys are hashed. */
export const rateLimits = pgTable('rate_limits', {
  key: varchar('key', { length: 255 }).primaryKey(),
  points: integer('points').notNull().default(0),
  expire: bigint('expire', { mode: 'number' }),
})

/** What the installation remembers of itself: that the demo was laid out. */
export const settings = pgTable('settings', { key: text('key').primaryKey(), value: jsonb('value').notNull() })
