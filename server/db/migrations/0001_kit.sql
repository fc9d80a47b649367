CREATE TABLE kinds (
  id TEXT PRIMARY KEY NOT NULL,
  name TEXT NOT NULL COLLATE NOCASE CHECK (length(name) BETWEEN 1 AND 80),
  category TEXT NOT NULL CHECK (category IN ('vessel', 'instrument', 'transfer', 'closure', 'heating', 'other')),
  description TEXT NOT NULL DEFAULT '' CHECK (length(description) <= 2000),
  capacity_litres REAL CHECK (capacity_litres IS NULL OR capacity_litres > 0),
  turnaround_days INTEGER NOT NULL CHECK (turnaround_days BETWEEN 0 AND 60),
  max_loan_days INTEGER NOT NULL CHECK (max_loan_days BETWEEN 1 AND 366),
  max_ahead_days INTEGER NOT NULL CHECK (max_ahead_days BETWEEN 0 AND 730),
  max_per_member INTEGER NOT NULL CHECK (max_per_member BETWEEN 1 AND 100),
  self_approving INTEGER NOT NULL DEFAULT 0 CHECK (self_approving IN (0, 1)),
  needs_induction INTEGER NOT NULL DEFAULT 0 CHECK (needs_induction IN (0, 1)),
  induction_months INTEGER CHECK (induction_months IS NULL OR induction_months BETWEEN 1 AND 120),
  induction_note TEXT NOT NULL DEFAULT '' CHECK (length(induction_note) <= 500),
  needs_sanitised INTEGER NOT NULL DEFAULT 0 CHECK (needs_sanitised IN (0, 1)),
  sanitised_hours INTEGER NOT NULL DEFAULT 24 CHECK (sanitised_hours BETWEEN 1 AND 720),
  max_fill_temperature_c REAL CHECK (max_fill_temperature_c IS NULL OR max_fill_temperature_c BETWEEN 0 AND 150),
  marked_for_temperature_c REAL CHECK (marked_for_temperature_c IS NULL OR marked_for_temperature_c BETWEEN 0 AND 40),
  calibration_months INTEGER CHECK (calibration_months IS NULL OR calibration_months BETWEEN 1 AND 120),
  wild_only INTEGER NOT NULL DEFAULT 0 CHECK (wild_only IN (0, 1)),
  cautions TEXT NOT NULL DEFAULT '[]' CHECK (json_valid(cautions) AND json_type(cautions) = 'array'),
  retired_at TEXT,
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1),
  CHECK (induction_months IS NULL OR needs_induction = 1),
  CHECK (calibration_months IS NULL OR marked_for_temperature_c IS NOT NULL)
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX kinds_name ON kinds (name);
--> statement-breakpoint
CREATE INDEX kinds_category ON kinds (category, name);
--> statement-breakpoint
CREATE TABLE items (
  id TEXT PRIMARY KEY NOT NULL,
  tag TEXT NOT NULL COLLATE NOCASE CHECK (length(tag) BETWEEN 1 AND 12 AND tag NOT GLOB '*[^A-Za-z0-9-]*'),
  kind_id TEXT NOT NULL REFERENCES kinds (id),
  status TEXT NOT NULL DEFAULT 'in-service' CHECK (status IN ('in-service', 'repair', 'retired', 'lost')),
  hygiene TEXT NOT NULL DEFAULT 'dirty' CHECK (hygiene IN ('dirty', 'clean', 'sanitised')),
  sanitised_until TEXT,
  wild INTEGER NOT NULL DEFAULT 0 CHECK (wild IN (0, 1)),
  shelf TEXT CHECK (shelf IS NULL OR length(shelf) BETWEEN 1 AND 60),
  note TEXT NOT NULL DEFAULT '' CHECK (length(note) <= 2000),
  calibration_offset_sg REAL CHECK (calibration_offset_sg IS NULL OR abs(calibration_offset_sg) <= 0.05),
  calibration_temperature_c REAL,
  calibrated_on TEXT,
  calibrated_by TEXT REFERENCES members (id),
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1),
  CHECK ((hygiene = 'sanitised') = (sanitised_until IS NOT NULL)),
  CHECK ((calibration_offset_sg IS NULL) = (calibrated_on IS NULL))
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX items_tag ON items (tag);
--> statement-breakpoint
CREATE INDEX items_kind ON items (kind_id, tag);
--> statement-breakpoint
CREATE INDEX items_in_service ON items (kind_id, wild) WHERE status = 'in-service';
--> statement-breakpoint
CREATE INDEX items_dirty ON items (tag) WHERE hygiene = 'dirty';
--> statement-breakpoint
CREATE INDEX items_calibrated_by ON items (calibrated_by);
--> statement-breakpoint
CREATE TABLE faults (
  id TEXT PRIMARY KEY NOT NULL,
  item_id TEXT NOT NULL REFERENCES items (id),
  summary TEXT NOT NULL CHECK (length(summary) BETWEEN 1 AND 500),
  blocking INTEGER NOT NULL CHECK (blocking IN (0, 1)),
  severity TEXT NOT NULL CHECK (severity IN ('minor', 'major', 'danger')),
  reported_by TEXT NOT NULL REFERENCES members (id),
  reported_at TEXT NOT NULL,
  resolved_by TEXT REFERENCES members (id),
  resolved_at TEXT,
  note TEXT CHECK (note IS NULL OR length(note) <= 500),
  CHECK (severity <> 'danger' OR blocking = 1),
  CHECK ((resolved_at IS NULL) = (resolved_by IS NULL))
) STRICT;
--> statement-breakpoint
CREATE INDEX faults_item ON faults (item_id, reported_at);
--> statement-breakpoint
CREATE INDEX faults_blocking ON faults (item_id) WHERE blocking = 1 AND resolved_at IS NULL;
--> statement-breakpoint
CREATE INDEX faults_open ON faults (reported_at) WHERE resolved_at IS NULL;
--> statement-breakpoint
CREATE INDEX faults_reported_by ON faults (reported_by);
--> statement-breakpoint
CREATE INDEX faults_resolved_by ON faults (resolved_by);
--> statement-breakpoint
CREATE VIEW serviceable_items AS
SELECT i.id, i.kind_id, i.wild
FROM items AS i
WHERE i.status = 'in-service'
  AND NOT EXISTS (SELECT 1 FROM faults AS f WHERE f.item_id = i.id AND f.blocking = 1 AND f.resolved_at IS NULL);
--> statement-breakpoint
CREATE TABLE hygiene_records (
  id TEXT PRIMARY KEY NOT NULL,
  item_id TEXT NOT NULL REFERENCES items (id),
  state TEXT NOT NULL CHECK (state IN ('dirty', 'clean', 'sanitised')),
  agent TEXT CHECK (agent IS NULL OR length(agent) BETWEEN 1 AND 60),
  concentration TEXT CHECK (concentration IS NULL OR length(concentration) BETWEEN 1 AND 60),
  contact_minutes REAL CHECK (contact_minutes IS NULL OR contact_minutes >= 0),
  valid_until TEXT,
  note TEXT CHECK (note IS NULL OR length(note) <= 500),
  recorded_by TEXT NOT NULL REFERENCES members (id),
  recorded_at TEXT NOT NULL,
  CHECK ((state = 'sanitised') = (valid_until IS NOT NULL))
) STRICT;
--> statement-breakpoint
CREATE INDEX hygiene_records_item ON hygiene_records (item_id, recorded_at);
--> statement-breakpoint
CREATE INDEX hygiene_records_recorded_by ON hygiene_records (recorded_by);
--> statement-breakpoint
CREATE TRIGGER hygiene_records_kept BEFORE UPDATE ON hygiene_records
BEGIN SELECT RAISE(ABORT, 'hygiene records are only added to'); END;
--> statement-breakpoint
CREATE TRIGGER hygiene_records_stay BEFORE DELETE ON hygiene_records
BEGIN SELECT RAISE(ABORT, 'hygiene records are only added to'); END;
--> statement-breakpoint
CREATE TABLE calibrations (
  id TEXT PRIMARY KEY NOT NULL,
  item_id TEXT NOT NULL REFERENCES items (id),
  water_reading_sg REAL NOT NULL CHECK (water_reading_sg BETWEEN 0.9 AND 1.1),
  water_temperature_c REAL NOT NULL CHECK (water_temperature_c BETWEEN 0 AND 50),
  offset_sg REAL NOT NULL CHECK (abs(offset_sg) <= 0.05),
  calibrated_by TEXT NOT NULL REFERENCES members (id),
  calibrated_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX calibrations_item ON calibrations (item_id, calibrated_at);
--> statement-breakpoint
CREATE INDEX calibrations_calibrated_by ON calibrations (calibrated_by);
--> statement-breakpoint
CREATE TRIGGER calibrations_kept BEFORE UPDATE ON calibrations
BEGIN SELECT RAISE(ABORT, 'calibrations are only added to'); END;
--> statement-breakpoint
CREATE TRIGGER calibrations_stay BEFORE DELETE ON calibrations
BEGIN SELECT RAISE(ABORT, 'calibrations are only added to'); END;
--> statement-breakpoint
CREATE TABLE inductions (
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE CASCADE,
  kind_id TEXT NOT NULL REFERENCES kinds (id),
  given_by TEXT NOT NULL REFERENCES members (id),
  given_on TEXT NOT NULL,
  expires_on TEXT CHECK (expires_on IS NULL OR expires_on >= given_on),
  PRIMARY KEY (member_id, kind_id)
) STRICT, WITHOUT ROWID;
--> statement-breakpoint
CREATE INDEX inductions_kind ON inductions (kind_id);
--> statement-breakpoint
CREATE INDEX inductions_given_by ON inductions (given_by);
--> statement-breakpoint
CREATE TABLE item_events (
  id INTEGER PRIMARY KEY NOT NULL,
  item_id TEXT NOT NULL REFERENCES items (id),
  event TEXT NOT NULL CHECK (event IN (
    'added', 'changed', 'status-changed', 'hygiene-recorded', 'became-wild', 'no-longer-wild', 'fault-reported',
    'fault-resolved', 'calibrated', 'photo-added', 'photo-removed', 'checked-out', 'checked-in'
  )),
  actor_id TEXT REFERENCES members (id),
  borrower_id TEXT REFERENCES members (id),
  about_id TEXT,
  detail TEXT NOT NULL DEFAULT '{}' CHECK (json_valid(detail) AND json_type(detail) = 'object'),
  happened_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX item_events_item ON item_events (item_id, id);
--> statement-breakpoint
CREATE INDEX item_events_actor ON item_events (actor_id);
--> statement-breakpoint
CREATE INDEX item_events_borrower ON item_events (borrower_id);
--> statement-breakpoint
CREATE TRIGGER item_events_kept BEFORE UPDATE ON item_events
BEGIN SELECT RAISE(ABORT, 'item history is only added to'); END;
--> statement-breakpoint
CREATE TRIGGER item_events_stay BEFORE DELETE ON item_events
BEGIN SELECT RAISE(ABORT, 'item history is only added to'); END;
--> statement-breakpoint
CREATE TABLE item_photos (
  id TEXT PRIMARY KEY NOT NULL,
  item_id TEXT NOT NULL REFERENCES items (id),
  file_name TEXT NOT NULL CHECK (length(file_name) BETWEEN 16 AND 64 AND file_name NOT GLOB '*[^A-Za-z0-9_-]*'),
  width_px INTEGER NOT NULL CHECK (width_px > 0),
  height_px INTEGER NOT NULL CHECK (height_px > 0),
  full_bytes INTEGER NOT NULL CHECK (full_bytes > 0),
  thumb_bytes INTEGER NOT NULL CHECK (thumb_bytes > 0),
  added_by TEXT NOT NULL REFERENCES members (id),
  added_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX item_photos_item ON item_photos (item_id, added_at);
--> statement-breakpoint
CREATE INDEX item_photos_added_by ON item_photos (added_by);
--> statement-breakpoint
CREATE UNIQUE INDEX item_photos_file ON item_photos (file_name);
