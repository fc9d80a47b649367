CREATE TABLE batches (
  id TEXT PRIMARY KEY NOT NULL,
  member_id TEXT NOT NULL REFERENCES members (id),
  name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  style TEXT NOT NULL CHECK (style IN ('mead', 'cyser', 'melomel', 'cider', 'wine', 'beer', 'other')),
  volume_litres REAL NOT NULL CHECK (volume_litres BETWEEN 0.1 AND 1000),
  visibility TEXT NOT NULL CHECK (visibility IN ('private', 'space')),
  status TEXT NOT NULL
    CHECK (status IN ('planned', 'fermenting', 'conditioning', 'bottled', 'finished', 'abandoned')),
  wild INTEGER NOT NULL DEFAULT 0 CHECK (wild IN (0, 1)),
  og REAL CHECK (og BETWEEN 0.98 AND 1.2),
  expected_fg REAL CHECK (expected_fg BETWEEN 0.98 AND 1.2),
  start_on TEXT CHECK (start_on IS date(start_on)),
  pitched_at TEXT,
  ended_at TEXT,
  notes TEXT NOT NULL DEFAULT '' CHECK (length(notes) <= 4000),
  water_treatment TEXT NOT NULL DEFAULT 'none' CHECK (water_treatment IN ('none', 'stand', 'sulphite')),
  chlorine_mg_per_litre REAL CHECK (chlorine_mg_per_litre BETWEEN 0 AND 5),
  nitrogen_demand TEXT NOT NULL DEFAULT 'medium' CHECK (nitrogen_demand IN ('low', 'medium', 'high')),
  yeast TEXT CHECK (length(yeast) BETWEEN 1 AND 80),
  tolerance_percent REAL CHECK (tolerance_percent BETWEEN 1 AND 25),
  bottle_kind TEXT NOT NULL DEFAULT 'still-wine'
    CHECK (bottle_kind IN ('beer', 'sparkling', 'still-wine', 'swing-top', 'pet')),
  bottle_ml INTEGER NOT NULL DEFAULT 750 CHECK (bottle_ml BETWEEN 100 AND 20000),
  target_volumes_co2 REAL CHECK (target_volumes_co2 BETWEEN 0 AND 6),
  primer TEXT NOT NULL DEFAULT 'none' CHECK (
    primer IN ('none', 'sucrose', 'glucose', 'glucose-monohydrate', 'dried-malt', 'honey', 'tablets')
  ),
  sulphite_mg_per_litre REAL NOT NULL DEFAULT 0 CHECK (sulphite_mg_per_litre BETWEEN 0 AND 1000),
  copied_from_id TEXT REFERENCES batches (id) ON DELETE SET NULL,
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1)
) STRICT;
--> statement-breakpoint
CREATE INDEX batches_member ON batches (member_id, created_at, id);
--> statement-breakpoint
CREATE INDEX batches_shared ON batches (created_at, id) WHERE visibility = 'space';
--> statement-breakpoint
CREATE INDEX batches_status ON batches (status);
--> statement-breakpoint
CREATE INDEX batches_copied_from ON batches (copied_from_id) WHERE copied_from_id IS NOT NULL;
--> statement-breakpoint
CREATE TABLE recipe_lines (
  id TEXT PRIMARY KEY NOT NULL,
  batch_id TEXT NOT NULL REFERENCES batches (id) ON DELETE CASCADE,
  position INTEGER NOT NULL CHECK (position >= 0),
  stage TEXT NOT NULL CHECK (stage IN ('must', 'feed', 'fining', 'bottling')),
  ingredient_id TEXT REFERENCES ingredients (id),
  name TEXT CHECK (length(name) BETWEEN 1 AND 80),
  unit TEXT NOT NULL CHECK (unit IN ('g', 'ml', 'each')),
  quantity REAL NOT NULL CHECK (quantity > 0 AND quantity <= 1000000),
  per_bottle INTEGER NOT NULL DEFAULT 0 CHECK (per_bottle IN (0, 1)),
  composition TEXT CHECK (composition IS NULL OR json_type(composition) = 'object'),
  allergens TEXT NOT NULL DEFAULT '[]' CHECK (json_type(allergens) = 'array'),
  CHECK ((ingredient_id IS NULL) = (name IS NOT NULL)),
  CHECK (ingredient_id IS NULL OR composition IS NULL),
  CHECK (per_bottle = 0 OR stage = 'bottling')
) STRICT;
--> statement-breakpoint
CREATE INDEX recipe_lines_batch ON recipe_lines (batch_id, position);
--> statement-breakpoint
CREATE INDEX recipe_lines_ingredient ON recipe_lines (ingredient_id) WHERE ingredient_id IS NOT NULL;
--> statement-breakpoint
CREATE TABLE batch_steps (
  id TEXT PRIMARY KEY NOT NULL,
  batch_id TEXT NOT NULL REFERENCES batches (id) ON DELETE CASCADE,
  position INTEGER NOT NULL CHECK (position >= 0),
  kind TEXT NOT NULL CHECK (
    kind IN ('prepare', 'pitch', 'feed', 'rack', 'fine', 'chill', 'bottle', 'condition', 'taste')
  ),
  title TEXT NOT NULL CHECK (length(title) BETWEEN 1 AND 80),
  guidance TEXT NOT NULL DEFAULT '' CHECK (length(guidance) <= 1000),
  day_offset INTEGER NOT NULL CHECK (day_offset BETWEEN 0 AND 730),
  planned_on TEXT CHECK (planned_on IS date(planned_on)),
  done_at TEXT,
  done_note TEXT CHECK (length(done_note) <= 1000),
  CHECK (done_note IS NULL OR done_at IS NOT NULL)
) STRICT;
--> statement-breakpoint
CREATE INDEX batch_steps_batch ON batch_steps (batch_id, position);
--> statement-breakpoint
CREATE INDEX batch_steps_due ON batch_steps (planned_on) WHERE planned_on IS NOT NULL AND done_at IS NULL;
--> statement-breakpoint
CREATE TABLE step_needs (
  id TEXT PRIMARY KEY NOT NULL,
  step_id TEXT NOT NULL REFERENCES batch_steps (id) ON DELETE CASCADE,
  position INTEGER NOT NULL CHECK (position >= 0),
  kind_id TEXT NOT NULL REFERENCES kinds (id),
  from_days INTEGER NOT NULL CHECK (from_days BETWEEN -60 AND 60),
  to_days INTEGER NOT NULL CHECK (to_days BETWEEN -60 AND 366),
  until_step_id TEXT REFERENCES batch_steps (id) ON DELETE SET NULL,
  loan_id TEXT REFERENCES loans (id) ON DELETE SET NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX step_needs_step ON step_needs (step_id, position);
--> statement-breakpoint
CREATE INDEX step_needs_kind ON step_needs (kind_id);
--> statement-breakpoint
CREATE INDEX step_needs_until_step ON step_needs (until_step_id) WHERE until_step_id IS NOT NULL;
--> statement-breakpoint
CREATE INDEX step_needs_loan ON step_needs (loan_id) WHERE loan_id IS NOT NULL;
--> statement-breakpoint
CREATE TABLE readings (
  id TEXT PRIMARY KEY NOT NULL,
  batch_id TEXT NOT NULL REFERENCES batches (id) ON DELETE CASCADE,
  at TEXT NOT NULL,
  gravity REAL NOT NULL CHECK (gravity BETWEEN 0.96 AND 1.2),
  temperature_c REAL NOT NULL CHECK (temperature_c BETWEEN 0 AND 50),
  corrected_gravity REAL NOT NULL CHECK (corrected_gravity BETWEEN 0.95 AND 1.25),
  hydrometer_item_id TEXT REFERENCES items (id),
  offset_sg REAL NOT NULL DEFAULT 0 CHECK (abs(offset_sg) <= 0.02),
  marked_for_temperature_c REAL NOT NULL DEFAULT 20 CHECK (marked_for_temperature_c BETWEEN 10 AND 30),
  ph REAL CHECK (ph BETWEEN 2 AND 8),
  note TEXT CHECK (length(note) <= 500),
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  deleted_at TEXT,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1)
) STRICT;
--> statement-breakpoint
CREATE INDEX readings_batch ON readings (batch_id, at);
--> statement-breakpoint
CREATE INDEX readings_hydrometer ON readings (hydrometer_item_id) WHERE hydrometer_item_id IS NOT NULL;
--> statement-breakpoint
CREATE TABLE reading_changes (
  id INTEGER PRIMARY KEY NOT NULL,
  reading_id TEXT NOT NULL REFERENCES readings (id) ON DELETE CASCADE,
  change TEXT NOT NULL CHECK (change IN ('edited', 'deleted')),
  changed_at TEXT NOT NULL,
  changed_by TEXT NOT NULL REFERENCES members (id),
  before TEXT NOT NULL CHECK (json_type(before) = 'object')
) STRICT;
--> statement-breakpoint
CREATE INDEX reading_changes_reading ON reading_changes (reading_id, id);
--> statement-breakpoint
CREATE INDEX reading_changes_by ON reading_changes (changed_by);
--> statement-breakpoint
CREATE TRIGGER reading_changes_kept BEFORE UPDATE ON reading_changes
BEGIN SELECT RAISE(ABORT, 'HISTORY_IS_KEPT'); END;
--> statement-breakpoint
CREATE TABLE bottlings (
  id TEXT PRIMARY KEY NOT NULL,
  batch_id TEXT NOT NULL REFERENCES batches (id) ON DELETE CASCADE,
  bottled_on TEXT NOT NULL CHECK (bottled_on IS date(bottled_on)),
  bottle_kind TEXT NOT NULL CHECK (bottle_kind IN ('beer', 'sparkling', 'still-wine', 'swing-top', 'pet')),
  bottle_ml INTEGER NOT NULL CHECK (bottle_ml BETWEEN 100 AND 20000),
  bottles INTEGER NOT NULL CHECK (bottles BETWEEN 1 AND 10000),
  primer TEXT NOT NULL CHECK (
    primer IN ('none', 'sucrose', 'glucose', 'glucose-monohydrate', 'dried-malt', 'honey', 'tablets')
  ),
  priming_grams REAL CHECK (priming_grams BETWEEN 0 AND 100000),
  target_volumes_co2 REAL CHECK (target_volumes_co2 BETWEEN 0 AND 6),
  gravity REAL CHECK (gravity BETWEEN 0.95 AND 1.25),
  abv_percent REAL CHECK (abv_percent BETWEEN 0 AND 30),
  ready INTEGER NOT NULL CHECK (ready IN (0, 1)),
  anyway INTEGER NOT NULL CHECK (anyway IN (0, 1)),
  shown TEXT NOT NULL DEFAULT '[]' CHECK (json_type(shown) = 'array'),
  worst_case_volumes REAL NOT NULL CHECK (worst_case_volumes >= 0),
  worst_case_bar REAL NOT NULL CHECK (worst_case_bar >= 0),
  note TEXT CHECK (length(note) <= 1000),
  created_at TEXT NOT NULL,
  CHECK (ready = 1 OR anyway = 1),
  CHECK (primer <> 'none' OR priming_grams IS NULL)
) STRICT;
--> statement-breakpoint
CREATE INDEX bottlings_batch ON bottlings (batch_id, bottled_on);
--> statement-breakpoint
CREATE TABLE tastings (
  id TEXT PRIMARY KEY NOT NULL,
  batch_id TEXT NOT NULL REFERENCES batches (id) ON DELETE CASCADE,
  tasted_on TEXT NOT NULL CHECK (tasted_on IS date(tasted_on)),
  look TEXT NOT NULL DEFAULT '' CHECK (length(look) <= 500),
  nose TEXT NOT NULL DEFAULT '' CHECK (length(nose) <= 500),
  taste TEXT NOT NULL DEFAULT '' CHECK (length(taste) <= 500),
  again TEXT NOT NULL CHECK (again IN ('yes', 'with-changes', 'no')),
  changes TEXT NOT NULL DEFAULT '' CHECK (length(changes) <= 1000),
  created_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX tastings_batch ON tastings (batch_id, tasted_on);
