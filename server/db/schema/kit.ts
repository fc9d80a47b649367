import {
  index,
  integer,
  primaryKey,
  real,
  sqliteTable,
  sqliteView,
  text,
  uniqueIndex,
} from 'drizzle-orm/sqlite-core'
import {
  FAULT_SEVERITIES,
  HYGIENE_STATES,
  ITEM_EVENTS,
  ITEM_STATUSES,
  KIND_CATEGORIES,
} from '#shared/kit/vocabulary'
import { createdAt, day, flag, id, instant, updatedAt, version } from './columns.ts'
import { members } from './people.ts'

export const kinds = sqliteTable(
  'kinds',
  {
    id: id(),
    name: text('name').notNull(),
    category: text('category', { enum: KIND_CATEGORIES }).notNull(),
    description: text('description').notNull().default(''),
    capacityLitres: real('capacity_litres'),
    turnaroundDays: integer('turnaround_days').notNull(),
    maxLoanDays: integer('max_loan_days').notNull(),
    maxAheadDays: integer('max_ahead_days').notNull(),
    maxPerMember: integer('max_per_member').notNull(),
    selfApproving: flag('self_approving').notNull().default(false),
    needsInduction: flag('needs_induction').notNull().default(false),
    /** Null: an induction does not run out. */
    inductionMonths: integer('induction_months'),
    /** How a member gets one. */
    inductionNote: text('induction_note').notNull().default(''),
    needsSanitised: flag('needs_sanitised').notNull().default(false),
    /** How long a sanitising of these lasts. */
    sanitisedHours: integer('sanitised_hours').notNull().default(24),
    maxFillTemperatureC: real('max_fill_temperature_c'),
    /** Hydrometers only: the temperature they are marked for. */
    markedForTemperatureC: real('marked_for_temperature_c'),
    /** How often each is to be checked in water; null: never. */
    calibrationMonths: integer('calibration_months'),
    wildOnly: flag('wild_only').notNull().default(false),
    cautions: text('cautions', { mode: 'json' }).$type<string[]>().notNull().default([]),
    /** Null while it can be booked. */
    retiredAt: instant('retired_at'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [uniqueIndex('kinds_name').on(t.name), index('kinds_category').on(t.category, t.name)],
)

export const items = sqliteTable(
  'items',
  {
    id: id(),
    /** On the item itself; letter case does not matter. */
    tag: text('tag').notNull(),
    kindId: text('kind_id')
      .notNull()
      .references(() => kinds.id),
    status: text('status', { enum: ITEM_STATUSES }).notNull().default('in-service'),
    hygiene: text('hygiene', { enum: HYGIENE_STATES }).notNull().default('dirty'),
    /** Null unless sanitised. */
    sanitisedUntil: instant('sanitised_until'),
    /** Met wild or mixed cultures; kept apart. */
    wild: flag('wild').notNull().default(false),
    shelf: text('shelf'),
    note: text('note').notNull().default(''),
    /** Added to every reading taken with it; null: never checked. */
    calibrationOffsetSg: real('calibration_offset_sg'),
    /** Of the water it was checked in. */
    calibrationTemperatureC: real('calibration_temperature_c'),
    calibratedOn: day('calibrated_on'),
    calibratedBy: text('calibrated_by').references(() => members.id),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [
    uniqueIndex('items_tag').on(t.tag),
    index('items_kind').on(t.kindId, t.tag),
    index('items_calibrated_by').on(t.calibratedBy),
  ],
)

/** In service and without an open blocking fault: `isServiceable` of shared/kit/serviceable, in SQL. */
export const serviceableItems = sqliteView('serviceable_items', {
  id: text('id').notNull(),
  kindId: text('kind_id').notNull(),
  wild: flag('wild').notNull(),
}).existing()

export const faults = sqliteTable(
  'faults',
  {
    id: id(),
    itemId: text('item_id')
      .notNull()
      .references(() => items.id),
    summary: text('summary').notNull(),
    /** Takes the item out of service until it is resolved. */
    blocking: flag('blocking').notNull(),
    severity: text('severity', { enum: FAULT_SEVERITIES }).notNull(),
    reportedBy: text('reported_by')
      .notNull()
      .references(() => members.id),
    reportedAt: instant('reported_at').notNull(),
    resolvedBy: text('resolved_by').references(() => members.id),
    /** Null while open. */
    resolvedAt: instant('resolved_at'),
    /** What was done about it. */
    note: text('note'),
  },
  (t) => [
    index('faults_item').on(t.itemId, t.reportedAt),
    index('faults_reported_by').on(t.reportedBy),
    index('faults_resolved_by').on(t.resolvedBy),
  ],
)

/** Only added to. */
export const hygieneRecords = sqliteTable(
  'hygiene_records',
  {
    id: id(),
    itemId: text('item_id')
      .notNull()
      .references(() => items.id),
    state: text('state', { enum: HYGIENE_STATES }).notNull(),
    agent: text('agent'),
    /** In words, as the label gives it. */
    concentration: text('concentration'),
    contactMinutes: real('contact_minutes'),
    validUntil: instant('valid_until'),
    note: text('note'),
    recordedBy: text('recorded_by')
      .notNull()
      .references(() => members.id),
    recordedAt: instant('recorded_at').notNull(),
  },
  (t) => [
    index('hygiene_records_item').on(t.itemId, t.recordedAt),
    index('hygiene_records_recorded_by').on(t.recordedBy),
  ],
)

/** Checks of a hydrometer in plain water; only added to. */
export const calibrations = sqliteTable(
  'calibrations',
  {
    id: id(),
    itemId: text('item_id')
      .notNull()
      .references(() => items.id),
    waterReadingSg: real('water_reading_sg').notNull(),
    waterTemperatureC: real('water_temperature_c').notNull(),
    offsetSg: real('offset_sg').notNull(),
    calibratedBy: text('calibrated_by')
      .notNull()
      .references(() => members.id),
    calibratedAt: instant('calibrated_at').notNull(),
  },
  (t) => [
    index('calibrations_item').on(t.itemId, t.calibratedAt),
    index('calibrations_calibrated_by').on(t.calibratedBy),
  ],
)

export const inductions = sqliteTable(
  'inductions',
  {
    memberId: text('member_id')
      .notNull()
      .references(() => members.id, { onDelete: 'cascade' }),
    kindId: text('kind_id')
      .notNull()
      .references(() => kinds.id),
    givenBy: text('given_by')
      .notNull()
      .references(() => members.id),
    givenOn: day('given_on').notNull(),
    /** The last day it counts; null: it does not run out. */
    expiresOn: day('expires_on'),
  },
  (t) => [
    primaryKey({ columns: [t.memberId, t.kindId] }),
    index('inductions_kind').on(t.kindId),
    index('inductions_given_by').on(t.givenBy),
  ],
)

/** Everything that happened to an item, in order; only added to. */
export const itemEvents = sqliteTable(
  'item_events',
  {
    id: integer('id').primaryKey(),
    itemId: text('item_id')
      .notNull()
      .references(() => items.id),
    event: text('event', { enum: ITEM_EVENTS }).notNull(),
    /** Who did it; null: the house itself. */
    actorId: text('actor_id').references(() => members.id),
    /** Whose loan it was; shown to stewards only. */
    borrowerId: text('borrower_id').references(() => members.id),
    /** The fault, record, photo or loan it is about. */
    aboutId: text('about_id'),
    detail: text('detail', { mode: 'json' })
      .$type<Record<string, string | number | boolean | null>>()
      .notNull()
      .default({}),
    happenedAt: instant('happened_at').notNull(),
  },
  (t) => [
    index('item_events_item').on(t.itemId, t.id),
    index('item_events_actor').on(t.actorId),
    index('item_events_borrower').on(t.borrowerId),
  ],
)

export const itemPhotos = sqliteTable(
  'item_photos',
  {
    id: id(),
    itemId: text('item_id')
      .notNull()
      .references(() => items.id),
    /** Random; says nothing about what was uploaded. */
    fileName: text('file_name').notNull(),
    widthPx: integer('width_px').notNull(),
    heightPx: integer('height_px').notNull(),
    fullBytes: integer('full_bytes').notNull(),
    thumbBytes: integer('thumb_bytes').notNull(),
    addedBy: text('added_by')
      .notNull()
      .references(() => members.id),
    addedAt: instant('added_at').notNull(),
  },
  (t) => [
    index('item_photos_item').on(t.itemId, t.addedAt),
    index('item_photos_added_by').on(t.addedBy),
    uniqueIndex('item_photos_file').on(t.fileName),
  ],
)
