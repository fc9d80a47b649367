import { sql } from 'drizzle-orm'
import { type AnySQLiteColumn, index, integer, real, sqliteTable, text } from 'drizzle-orm/sqlite-core'
import {
  BATCH_PRIMERS,
  BATCH_STATUSES,
  BATCH_STYLES,
  BOTTLE_KINDS,
  NITROGEN_DEMANDS,
  VISIBILITIES,
  WATER_TREATMENTS,
} from '#shared/batches/vocabulary'
import { createdAt, day, flag, id, instant, updatedAt, version } from './columns.ts'
import { members } from './people.ts'

export const batches = sqliteTable(
  'batches',
  {
    id: id(),
    memberId: text('member_id')
      .notNull()
      .references(() => members.id),
    name: text('name').notNull(),
    style: text('style', { enum: BATCH_STYLES }).notNull(),
    volumeLitres: real('volume_litres').notNull(),
    visibility: text('visibility', { enum: VISIBILITIES }).notNull(),
    status: text('status', { enum: BATCH_STATUSES }).notNull(),
    /** Fermented with wild or mixed cultures: it takes kit that is kept for them. */
    wild: flag('wild').notNull().default(false),
    /** Measured or expected original gravity; null until either is known. */
    og: real('og'),
    expectedFg: real('expected_fg'),
    /** Day 0 of the plan; null until a day is fixed. */
    startOn: day('start_on'),
    pitchedAt: instant('pitched_at'),
    /** When it was drunk up, given away or given up. */
    endedAt: instant('ended_at'),
    notes: text('notes').notNull().default(''),
    waterTreatment: text('water_treatment', { enum: WATER_TREATMENTS }).notNull().default('none'),
    chlorineMgPerLitre: real('chlorine_mg_per_litre'),
    nitrogenDemand: text('nitrogen_demand', { enum: NITROGEN_DEMANDS }).notNull().default('medium'),
    /** The strain in the maker's words; what was pitched is a pitch. */
    yeast: text('yeast'),
    /** The strain's own limit, % by volume; null when not known. */
    tolerancePercent: real('tolerance_percent'),
    bottleKind: text('bottle_kind', { enum: BOTTLE_KINDS }).notNull().default('still-wine'),
    bottleMl: integer('bottle_ml').notNull().default(750),
    /** Null: bottled still. */
    targetVolumesCo2: real('target_volumes_co2'),
    primer: text('primer', { enum: BATCH_PRIMERS }).notNull().default('none'),
    /** Total sulphur dioxide added so far, for the label. */
    sulphiteMgPerLitre: real('sulphite_mg_per_litre').notNull().default(0),
    copiedFromId: text('copied_from_id').references((): AnySQLiteColumn => batches.id, {
      onDelete: 'set null',
    }),
    createdAt: createdAt(),
    updatedAt: updatedAt(),
    version: version(),
  },
  (t) => [
    index('batches_member').on(t.memberId, t.createdAt, t.id),
    index('batches_shared')
      .on(t.createdAt, t.id)
      .where(sql`visibility = 'space'`),
    index('batches_status').on(t.status),
    index('batches_copied_from')
      .on(t.copiedFromId)
      .where(sql`copied_from_id IS NOT NULL`),
  ],
)
