CREATE TABLE yeast_lots (
  id TEXT PRIMARY KEY NOT NULL,
  lot_key TEXT NOT NULL,
  strain TEXT NOT NULL CHECK (length(strain) BETWEEN 1 AND 80),
  form TEXT NOT NULL CHECK (form IN ('dry', 'liquid', 'slurry')),
  lot_code TEXT CHECK (length(lot_code) BETWEEN 1 AND 40),
  state TEXT NOT NULL DEFAULT 'sound' CHECK (state IN ('sound', 'flagged', 'withdrawn')),
  state_since TEXT,
  decided_by TEXT REFERENCES members (id),
  decision_note TEXT CHECK (length(decision_note) BETWEEN 1 AND 300),
  cleared_at TEXT,
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1),
  CHECK (state = 'sound' OR state_since IS NOT NULL)
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX yeast_lots_key ON yeast_lots (lot_key);
--> statement-breakpoint
CREATE INDEX yeast_lots_decided_by ON yeast_lots (decided_by);
--> statement-breakpoint
CREATE TABLE packets (
  id TEXT PRIMARY KEY NOT NULL,
  lot_id TEXT NOT NULL REFERENCES yeast_lots (id),
  owner_id TEXT NOT NULL REFERENCES members (id),
  strain TEXT NOT NULL CHECK (length(strain) BETWEEN 1 AND 80),
  form TEXT NOT NULL CHECK (form IN ('dry', 'liquid', 'slurry')),
  drink_use TEXT NOT NULL CHECK (drink_use IN ('wine', 'mead', 'cider', 'ale', 'lager', 'other')),
  lot_code TEXT CHECK (length(lot_code) BETWEEN 1 AND 40),
  made_on TEXT CHECK (made_on IS date(made_on)),
  best_before TEXT CHECK (best_before IS date(best_before)),
  opened_on TEXT CHECK (opened_on IS date(opened_on)),
  unit TEXT NOT NULL CHECK (unit IN ('g', 'ml')),
  initial_milli INTEGER NOT NULL CHECK (initial_milli BETWEEN 1 AND 100000000),
  remaining_milli INTEGER NOT NULL CHECK (remaining_milli BETWEEN 0 AND 100000000),
  shared INTEGER NOT NULL CHECK (shared IN (0, 1)),
  place TEXT CHECK (length(place) BETWEEN 1 AND 60),
  note TEXT NOT NULL DEFAULT '' CHECK (length(note) <= 1000),
  photo_name TEXT CHECK (length(photo_name) BETWEEN 16 AND 64 AND photo_name NOT GLOB '*[^A-Za-z0-9_-]*'),
  copied_from_id TEXT REFERENCES packets (id) ON DELETE SET NULL,
  discarded_at TEXT,
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1),
  CHECK (made_on IS NOT NULL OR best_before IS NOT NULL),
  CHECK (best_before IS NULL OR made_on IS NULL OR best_before >= made_on),
  CHECK (opened_on IS NULL OR made_on IS NULL OR opened_on >= made_on),
  CHECK (form <> 'dry' OR unit = 'g')
) STRICT;
--> statement-breakpoint
CREATE INDEX packets_lot ON packets (lot_id);
--> statement-breakpoint
CREATE INDEX packets_owner ON packets (owner_id, created_at);
--> statement-breakpoint
CREATE INDEX packets_copied_from ON packets (copied_from_id);
--> statement-breakpoint
CREATE INDEX packets_at_hand ON packets (shared, owner_id) WHERE discarded_at IS NULL AND remaining_milli > 0;
--> statement-breakpoint
CREATE TABLE packet_storage (
  packet_id TEXT NOT NULL REFERENCES packets (id) ON DELETE CASCADE,
  from_on TEXT NOT NULL CHECK (from_on IS date(from_on)),
  storage TEXT NOT NULL CHECK (storage IN ('freezer', 'fridge', 'shelf')),
  recorded_by TEXT NOT NULL REFERENCES members (id),
  created_at TEXT NOT NULL,
  PRIMARY KEY (packet_id, from_on)
) STRICT, WITHOUT ROWID;
--> statement-breakpoint
CREATE INDEX packet_storage_recorded_by ON packet_storage (recorded_by);
--> statement-breakpoint
CREATE TABLE pitches (
  id TEXT PRIMARY KEY NOT NULL,
  packet_id TEXT NOT NULL REFERENCES packets (id),
  batch_id TEXT NOT NULL REFERENCES batches (id),
  member_id TEXT NOT NULL REFERENCES members (id),
  at TEXT NOT NULL,
  unit TEXT NOT NULL CHECK (unit IN ('g', 'ml')),
  amount_milli INTEGER NOT NULL CHECK (amount_milli > 0),
  must_temperature_c REAL CHECK (must_temperature_c BETWEEN -5 AND 60),
  rehydrated INTEGER NOT NULL CHECK (rehydrated IN (0, 1)),
  survival REAL NOT NULL CHECK (survival BETWEEN 0 AND 1),
  cells_per_ml REAL NOT NULL CHECK (cells_per_ml >= 0),
  expected_hours REAL NOT NULL CHECK (expected_hours > 0),
  outcome_wanted_at TEXT NOT NULL,
  created_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX pitches_packet ON pitches (packet_id, at);
--> statement-breakpoint
CREATE INDEX pitches_batch ON pitches (batch_id, at);
--> statement-breakpoint
CREATE INDEX pitches_member ON pitches (member_id, outcome_wanted_at);
--> statement-breakpoint
CREATE TABLE pitch_outcomes (
  id TEXT PRIMARY KEY NOT NULL,
  pitch_id TEXT NOT NULL REFERENCES pitches (id),
  ordinal INTEGER NOT NULL CHECK (ordinal >= 1),
  outcome TEXT NOT NULL CHECK (outcome IN ('started', 'slow', 'none')),
  hours_to_activity REAL CHECK (hours_to_activity BETWEEN 0.5 AND 1000),
  reported_by TEXT NOT NULL REFERENCES members (id),
  reported_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX pitch_outcomes_ordinal ON pitch_outcomes (pitch_id, ordinal);
--> statement-breakpoint
CREATE INDEX pitch_outcomes_reported_by ON pitch_outcomes (reported_by);
--> statement-breakpoint
CREATE TABLE packet_moves (
  id TEXT PRIMARY KEY NOT NULL,
  packet_id TEXT NOT NULL REFERENCES packets (id),
  reason TEXT NOT NULL CHECK (reason IN ('added', 'pitched', 'recounted', 'thrown-away')),
  change_milli INTEGER NOT NULL,
  pitch_id TEXT REFERENCES pitches (id),
  member_id TEXT NOT NULL REFERENCES members (id),
  note TEXT NOT NULL DEFAULT '' CHECK (length(note) <= 300),
  created_at TEXT NOT NULL,
  CHECK (reason <> 'added' OR change_milli >= 0),
  CHECK (reason NOT IN ('pitched', 'thrown-away') OR change_milli <= 0),
  CHECK ((reason = 'pitched') = (pitch_id IS NOT NULL))
) STRICT;
--> statement-breakpoint
CREATE INDEX packet_moves_packet ON packet_moves (packet_id, created_at);
--> statement-breakpoint
CREATE INDEX packet_moves_pitch ON packet_moves (pitch_id);
--> statement-breakpoint
CREATE INDEX packet_moves_member ON packet_moves (member_id);
--> statement-breakpoint
-- What is left is the sum of the moves: it follows them, and nothing else may set it.
CREATE TRIGGER packet_moves_not_below_zero BEFORE INSERT ON packet_moves
WHEN (SELECT coalesce(sum(change_milli), 0) FROM packet_moves WHERE packet_id = NEW.packet_id) + NEW.change_milli < 0
BEGIN
  SELECT RAISE(ABORT, 'not enough left in the packet');
END;
--> statement-breakpoint
CREATE TRIGGER packet_moves_applied AFTER INSERT ON packet_moves
BEGIN
  UPDATE packets
  SET remaining_milli = (SELECT sum(change_milli) FROM packet_moves WHERE packet_id = NEW.packet_id)
  WHERE id = NEW.packet_id;
END;
--> statement-breakpoint
CREATE TRIGGER packet_moves_append_only
BEFORE UPDATE OF id, packet_id, reason, change_milli, pitch_id ON packet_moves
BEGIN
  SELECT RAISE(ABORT, 'moves are only added');
END;
--> statement-breakpoint
CREATE TRIGGER packet_moves_kept BEFORE DELETE ON packet_moves
BEGIN
  SELECT RAISE(ABORT, 'moves are only added');
END;
--> statement-breakpoint
CREATE TRIGGER packets_remaining_follows_moves BEFORE UPDATE OF remaining_milli ON packets
WHEN NEW.remaining_milli <> (SELECT coalesce(sum(change_milli), 0) FROM packet_moves WHERE packet_id = NEW.id)
BEGIN
  SELECT RAISE(ABORT, 'what is left follows the moves');
END;
--> statement-breakpoint
CREATE TRIGGER packets_start_empty BEFORE INSERT ON packets
WHEN NEW.remaining_milli <> 0
BEGIN
  SELECT RAISE(ABORT, 'what is left follows the moves');
END;
--> statement-breakpoint
CREATE TRIGGER pitch_outcomes_append_only
BEFORE UPDATE OF id, pitch_id, ordinal, outcome, hours_to_activity ON pitch_outcomes
BEGIN
  SELECT RAISE(ABORT, 'outcomes are only added');
END;
--> statement-breakpoint
CREATE TRIGGER pitch_outcomes_kept BEFORE DELETE ON pitch_outcomes
BEGIN
  SELECT RAISE(ABORT, 'outcomes are only added');
END;
