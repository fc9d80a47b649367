import {
  type AnySQLiteColumn,
  index,
  integer,
  primaryKey,
  real,
  sqliteTable,
  text,
  uniqueIndex,
} from 'drizzle-orm/sqlite-core'
import { DRINK_USES, STORAGES, YEAST_FORMS } from '#shared/brewing/vocabulary'
import { AMOUNT_UNITS, LOT_STATES, OUTCOMES, PACKET_MOVES } from '#shared/yeast/vocabulary'
import { batches } from './batches.ts'
import { createdAt, day, flag, id, instant, updatedAt, version } from './columns.ts'
import { members } from './people.ts'

/** What packets of one strain, form and lot code share: what became of them. A packet without a code is a lot of its own. */
export const yeastLots = sqliteTable(
  'yeast_lots',
  {
    id: id(),
    lotKey: text('lot_key').notNull(),
    strain: text('strain').notNull(),
    form: text('form', { enum: YEAST_FORMS }).notNull(),
    /** Null: not known. */
    lotCode: text('lot_code'),
    state: text('state', { enum: LOT_STATES }).notNull().default('sound'),
    stateSince: instant('state_since'),
    /** The steward who withdrew or cleared it; null while nobody has. */
    decidedBy: text('decided_by').references(() => members.id),
    decisionNote: text('decision_note'),
    /** Failures reported before this are put down to something else. */
    clearedAt: instant('cleared_at'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [uniqueIndex('yeast_lots_key').on(t.lotKey), index('yeast_lots_decided_by').on(t.decidedBy)],
)

/** Amounts are whole thousandths of the packet's unit, so that sums are exact. */
export const packets = sqliteTable(
  'packets',
  {
    id: id(),
    lotId: text('lot_id')
      .notNull()
      .references(() => yeastLots.id),
    ownerId: text('owner_id')
      .notNull()
      .references(() => members.id),
    strain: text('strain').notNull(),
    form: text('form', { enum: YEAST_FORMS }).notNull(),
    use: text('drink_use', { enum: DRINK_USES }).notNull(),
    lotCode: text('lot_code'),
    /** Null: not on the pack; the best-before day then stands in for it. */
    madeOn: day('made_on'),
    /** Null: harvested, so there is none. */
    bestBefore: day('best_before'),
    /** Null: sealed. */
    openedOn: day('opened_on'),
    unit: text('unit', { enum: AMOUNT_UNITS }).notNull(),
    initialMilli: integer('initial_milli').notNull(),
    /** Follows `packet_moves`; a trigger keeps it so. */
    remainingMilli: integer('remaining_milli').notNull(),
    shared: flag('shared').notNull(),
    /** Where in the fridge; null: nobody said. */
    place: text('place'),
    note: text('note').notNull().default(''),
    /** Of its files; null: no photo. */
    photoName: text('photo_name'),
    copiedFromId: text('copied_from_id').references((): AnySQLiteColumn => packets.id, {
      onDelete: 'set null',
    }),
    /** Null while it is kept. */
    discardedAt: instant('discarded_at'),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [
    index('packets_lot').on(t.lotId),
    index('packets_owner').on(t.ownerId, t.createdAt),
    index('packets_copied_from').on(t.copiedFromId),
    index('packets_at_hand').on(t.shared, t.ownerId),
  ],
)

/** Where a packet was kept, from a day on. */
export const packetStorage = sqliteTable(
  'packet_storage',
  {
    packetId: text('packet_id')
      .notNull()
      .references(() => packets.id, { onDelete: 'cascade' }),
    from: day('from_on').notNull(),
    storage: text('storage', { enum: STORAGES }).notNull(),
    recordedBy: text('recorded_by')
      .notNull()
      .references(() => members.id),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.packetId, t.from] }),
    index('packet_storage_recorded_by').on(t.recordedBy),
  ],
)

/** Yeast put into a batch, with what was thought of it at that moment. */
export const pitches = sqliteTable(
  'pitches',
  {
    id: id(),
    packetId: text('packet_id')
      .notNull()
      .references(() => packets.id),
    batchId: text('batch_id')
      .notNull()
      .references(() => batches.id),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id),
    at: instant('at').notNull(),
    unit: text('unit', { enum: AMOUNT_UNITS }).notNull(),
    amountMilli: integer('amount_milli').notNull(),
    /** Null: not measured. */
    mustTemperatureC: real('must_temperature_c'),
    rehydrated: flag('rehydrated').notNull(),
    /** Share the storage model took to be alive, before anything was known of the lot. */
    survival: real('survival').notNull(),
    /** Cells pitched per mL of must, alive or not. */
    cellsPerMl: real('cells_per_ml').notNull(),
    expectedHours: real('expected_hours').notNull(),
    outcomeWantedAt: instant('outcome_wanted_at').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    index('pitches_packet').on(t.packetId, t.at),
    index('pitches_batch').on(t.batchId, t.at),
    index('pitches_member').on(t.memberId, t.outcomeWantedAt),
  ],
)

/** What became of a pitch. Added to, never changed: the last one counts. */
export const pitchOutcomes = sqliteTable(
  'pitch_outcomes',
  {
    id: id(),
    pitchId: text('pitch_id')
      .notNull()
      .references(() => pitches.id),
    ordinal: integer('ordinal').notNull(),
    outcome: text('outcome', { enum: OUTCOMES }).notNull(),
    /** Until it started, or how long it was watched in vain; null: not said. */
    hoursToActivity: real('hours_to_activity'),
    reportedBy: text('reported_by')
      .notNull()
      .references(() => members.id),
    reportedAt: instant('reported_at').notNull(),
  },
  (t) => [
    uniqueIndex('pitch_outcomes_ordinal').on(t.pitchId, t.ordinal),
    index('pitch_outcomes_reported_by').on(t.reportedBy),
  ],
)

/** Every change of what is left. The database refuses a move below nothing. */
export const packetMoves = sqliteTable(
  'packet_moves',
  {
    id: id(),
    packetId: text('packet_id')
      .notNull()
      .references(() => packets.id),
    reason: text('reason', { enum: PACKET_MOVES }).notNull(),
    changeMilli: integer('change_milli').notNull(),
    /** Null unless pitched. */
    pitchId: text('pitch_id').references(() => pitches.id),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id),
    note: text('note').notNull().default(''),
    createdAt: createdAt(),
  },
  (t) => [
    index('packet_moves_packet').on(t.packetId, t.createdAt),
    index('packet_moves_pitch').on(t.pitchId),
    index('packet_moves_member').on(t.memberId),
  ],
)
