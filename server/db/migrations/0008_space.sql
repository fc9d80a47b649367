CREATE TABLE space (
  id INTEGER PRIMARY KEY NOT NULL CHECK (id = 1),
  name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 60),
  time_zone TEXT,
  currency TEXT NOT NULL CHECK (length(currency) = 3),
  demo INTEGER NOT NULL CHECK (demo IN (0, 1)),
  open_days TEXT NOT NULL CHECK (json_valid(open_days)),
  mail_hour INTEGER NOT NULL CHECK (mail_hour BETWEEN 0 AND 23),
  room_m3 REAL CHECK (room_m3 IS NULL OR room_m3 > 0),
  air_changes_per_hour REAL CHECK (air_changes_per_hour IS NULL OR air_changes_per_hour > 0),
  allergen_note TEXT NOT NULL,
  house_rules TEXT NOT NULL,
  require_second_factor INTEGER NOT NULL CHECK (require_second_factor IN (0, 1)),
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1)
) STRICT;
--> statement-breakpoint
INSERT INTO space (id, name, currency, demo, open_days, mail_hour, allergen_note, house_rules, require_second_factor, updated_at)
VALUES (1, 'Barmhouse', 'GBP', 0, '["monday","tuesday","wednesday","thursday","friday","saturday","sunday"]', 9, '', '', 0, '1970-01-01T00:00:00.000Z');
--> statement-breakpoint
CREATE TABLE audit_trail (
  seq INTEGER PRIMARY KEY NOT NULL,
  at TEXT NOT NULL,
  actor_id TEXT,
  action TEXT NOT NULL,
  subject TEXT,
  outcome TEXT NOT NULL,
  hash TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX audit_trail_actor ON audit_trail (actor_id, seq);
--> statement-breakpoint
CREATE TRIGGER audit_trail_no_update BEFORE UPDATE ON audit_trail
BEGIN SELECT RAISE(ABORT, 'AUDIT_IS_KEPT'); END;
--> statement-breakpoint
CREATE TRIGGER audit_trail_no_delete BEFORE DELETE ON audit_trail
BEGIN SELECT RAISE(ABORT, 'AUDIT_IS_KEPT'); END;
