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
