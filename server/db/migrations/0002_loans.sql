CREATE TABLE loans (
  id TEXT PRIMARY KEY NOT NULL,
  kind_id TEXT NOT NULL REFERENCES kinds (id),
  item_id TEXT REFERENCES items (id),
  member_id TEXT NOT NULL REFERENCES members (id),
  batch_id TEXT,
  step_id TEXT,
  basket_id TEXT,
  wild INTEGER NOT NULL DEFAULT 0 CHECK (wild IN (0, 1)),
  from_on TEXT NOT NULL CHECK (from_on IS date(from_on)),
  to_on TEXT NOT NULL CHECK (to_on IS date(to_on)),
  turnaround_days INTEGER NOT NULL CHECK (turnaround_days BETWEEN 0 AND 60),
  blocks_until_on TEXT NOT NULL CHECK (blocks_until_on IS date(blocks_until_on)),
  blocking INTEGER NOT NULL CHECK (blocking IN (0, 1)),
  status TEXT NOT NULL
    CHECK (status IN ('requested', 'approved', 'out', 'returned', 'declined', 'cancelled', 'lapsed')),
  note TEXT CHECK (length(note) <= 1000),
  decline_reason TEXT CHECK (length(decline_reason) <= 500),
  override_reason TEXT CHECK (length(override_reason) <= 500),
  requested_at TEXT NOT NULL,
  requested_by TEXT NOT NULL REFERENCES members (id),
  decided_at TEXT,
  decided_by TEXT REFERENCES members (id),
  approved_on TEXT CHECK (approved_on IS date(approved_on)),
  out_at TEXT,
  out_by TEXT REFERENCES members (id),
  returned_at TEXT,
  returned_on TEXT CHECK (returned_on IS date(returned_on)),
  returned_by TEXT REFERENCES members (id),
  return_condition TEXT CHECK (return_condition IN ('ok', 'damaged', 'lost')),
  return_note TEXT CHECK (length(return_note) <= 1000),
  extension_to TEXT CHECK (extension_to IS date(extension_to)),
  extension_asked_at TEXT,
  at_risk INTEGER NOT NULL DEFAULT 0 CHECK (at_risk IN (0, 1)),
  at_risk_reason TEXT CHECK (at_risk_reason IN ('overdue', 'out-of-service')),
  sequence INTEGER NOT NULL DEFAULT 0 CHECK (sequence >= 0),
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1),
  -- Two years at most: whoever asks for the loans around a day need look back no further.
  CHECK (to_on >= from_on AND to_on <= date(from_on, '+730 days')),
  CHECK (extension_to IS NULL OR (extension_to > to_on AND status IN ('approved', 'out'))),
  CHECK ((at_risk = 1) = (at_risk_reason IS NOT NULL)),
  CHECK (status NOT IN ('out', 'returned') OR (item_id IS NOT NULL AND out_at IS NOT NULL)),
  CHECK ((status = 'returned') = (returned_on IS NOT NULL)),
  CHECK (status <> 'approved' OR approved_on IS NOT NULL),
  -- What is live holds its days; what came back may hold them a little longer, while it dries.
  CHECK (blocking = (status IN ('requested', 'approved', 'out')) OR (status = 'returned' AND blocking = 1)),
  CHECK (
    CASE
      WHEN blocking = 0 THEN 1
      WHEN status = 'out' THEN blocks_until_on >= date(to_on, '+' || turnaround_days || ' days')
      WHEN status = 'returned' THEN blocks_until_on = date(returned_on, '+' || turnaround_days || ' days')
      ELSE blocks_until_on = date(to_on, '+' || turnaround_days || ' days')
    END
  )
) STRICT;
--> statement-breakpoint
-- What a kind has on loan around a day: the seek on blocks_until_on leaves everything over and done with behind.
CREATE INDEX loans_hold ON loans (kind_id, wild, blocks_until_on, from_on, id, blocking) WHERE blocking = 1;
--> statement-breakpoint
-- The same for every kind at once.
CREATE INDEX loans_shelf ON loans (blocks_until_on, from_on, kind_id, wild, blocking) WHERE blocking = 1;
--> statement-breakpoint
CREATE UNIQUE INDEX loans_item_out ON loans (item_id) WHERE status = 'out';
--> statement-breakpoint
-- What is out, by the day it is due back.
CREATE INDEX loans_due ON loans (to_on, kind_id, wild, turnaround_days, blocks_until_on, status) WHERE status = 'out';
--> statement-breakpoint
CREATE INDEX loans_item ON loans (item_id, from_on);
--> statement-breakpoint
CREATE INDEX loans_member ON loans (member_id, from_on, id, to_on);
--> statement-breakpoint
CREATE INDEX loans_kind ON loans (kind_id, from_on, id, to_on);
--> statement-breakpoint
CREATE INDEX loans_status ON loans (status, from_on, id);
--> statement-breakpoint
CREATE INDEX loans_from ON loans (from_on, id, to_on);
--> statement-breakpoint
-- The few that are longer than two months; the rest of a month's loans started no more than 62 days before it.
CREATE INDEX loans_long ON loans (from_on, to_on) WHERE julianday(to_on) - julianday(from_on) > 62;
--> statement-breakpoint
CREATE INDEX loans_batch ON loans (batch_id) WHERE batch_id IS NOT NULL;
--> statement-breakpoint
CREATE INDEX loans_basket ON loans (basket_id) WHERE basket_id IS NOT NULL;
--> statement-breakpoint
CREATE INDEX loans_at_risk ON loans (kind_id, wild) WHERE at_risk = 1;
--> statement-breakpoint
CREATE INDEX loans_extension ON loans (extension_to) WHERE extension_to IS NOT NULL;
--> statement-breakpoint
CREATE INDEX loans_requested_by ON loans (requested_by);
--> statement-breakpoint
CREATE INDEX loans_decided_by ON loans (decided_by) WHERE decided_by IS NOT NULL;
--> statement-breakpoint
CREATE INDEX loans_out_by ON loans (out_by) WHERE out_by IS NOT NULL;
--> statement-breakpoint
CREATE INDEX loans_returned_by ON loans (returned_by) WHERE returned_by IS NOT NULL;
--> statement-breakpoint
-- The day up to which overdue loans have been rolled forward; one row.
CREATE TABLE loan_rolls (
  id INTEGER PRIMARY KEY NOT NULL CHECK (id = 1),
  rolled_on TEXT NOT NULL CHECK (rolled_on IS date(rolled_on))
) STRICT;
--> statement-breakpoint
INSERT INTO loan_rolls (id, rolled_on) VALUES (1, '1970-01-01');
--> statement-breakpoint
-- The guard against double booking. On no day may a pool (a kind, and whether its items are kept for wild cultures) have more
-- live loans than serviceable items. The busiest of the new days is the first of them, or a day on which another loan
-- starts: looking at those is exact. RAISE(ABORT) holds against every conflict clause, which a CHECK or a UNIQUE does not.
CREATE TRIGGER loans_guard_insert BEFORE INSERT ON loans WHEN NEW.blocking = 1
BEGIN
  SELECT RAISE(ABORT, 'KIND_FULL') WHERE EXISTS (
    SELECT 1 FROM (
      SELECT NEW.from_on AS on_day
      UNION ALL
      SELECT from_on FROM loans
      WHERE blocking = 1 AND kind_id = NEW.kind_id AND wild = NEW.wild AND id <> NEW.id
        AND blocks_until_on >= NEW.from_on AND from_on > NEW.from_on AND from_on <= NEW.blocks_until_on
    )
    WHERE (
      SELECT count(*) FROM loans
      WHERE blocking = 1 AND kind_id = NEW.kind_id AND wild = NEW.wild AND id <> NEW.id
        AND blocks_until_on >= on_day AND from_on <= on_day
    ) >= (
      SELECT count(*) FROM serviceable_items WHERE kind_id = NEW.kind_id AND wild = NEW.wild
    )
  );
END;
--> statement-breakpoint
-- The same for the days an update adds. Days a loan holds already are not asked for again, so that an overdue loan or a
-- broken item, which may leave a day short, stops nobody from approving, handing out or giving back. Exempt is one thing:
-- the daily roll of what is late, to today and its turnaround, which nobody asked for and no refusal would undo.
CREATE TRIGGER loans_guard_update BEFORE UPDATE ON loans
WHEN NEW.blocking = 1
  AND NOT (
    OLD.blocking = 1 AND OLD.kind_id = NEW.kind_id AND OLD.wild = NEW.wild
    AND OLD.from_on <= NEW.from_on AND OLD.blocks_until_on >= NEW.blocks_until_on
  )
  AND NOT (
    OLD.status = 'out' AND NEW.status = 'out' AND OLD.id = NEW.id AND OLD.kind_id = NEW.kind_id
    AND OLD.wild = NEW.wild AND OLD.from_on = NEW.from_on AND OLD.to_on = NEW.to_on
    AND OLD.turnaround_days = NEW.turnaround_days
    AND NEW.to_on < (SELECT rolled_on FROM loan_rolls WHERE id = 1)
    AND NEW.blocks_until_on = (
      SELECT date(rolled_on, '+' || NEW.turnaround_days || ' days') FROM loan_rolls WHERE id = 1
    )
  )
BEGIN
  SELECT RAISE(ABORT, 'KIND_FULL') WHERE EXISTS (
    SELECT 1 FROM (
      SELECT NEW.from_on AS on_day
      UNION ALL
      SELECT date(OLD.blocks_until_on, '+1 day')
      UNION ALL
      SELECT from_on FROM loans
      WHERE blocking = 1 AND kind_id = NEW.kind_id AND wild = NEW.wild AND id NOT IN (OLD.id, NEW.id)
        AND blocks_until_on >= NEW.from_on AND from_on > NEW.from_on AND from_on <= NEW.blocks_until_on
    )
    WHERE on_day >= NEW.from_on AND on_day <= NEW.blocks_until_on
      AND NOT (
        OLD.blocking = 1 AND OLD.kind_id = NEW.kind_id AND OLD.wild = NEW.wild
        AND on_day >= OLD.from_on AND on_day <= OLD.blocks_until_on
      )
      AND (
        SELECT count(*) FROM loans
        WHERE blocking = 1 AND kind_id = NEW.kind_id AND wild = NEW.wild AND id NOT IN (OLD.id, NEW.id)
          AND blocks_until_on >= on_day AND from_on <= on_day
      ) >= (
        SELECT count(*) FROM serviceable_items WHERE kind_id = NEW.kind_id AND wild = NEW.wild
      )
  );
END;
--> statement-breakpoint
-- One item is in one pair of hands, and is of the kind that was lent. Said by a trigger as well as by the unique index:
-- OR REPLACE would delete the other loan to make room.
CREATE TRIGGER loans_item_insert BEFORE INSERT ON loans WHEN NEW.status = 'out'
BEGIN
  SELECT RAISE(ABORT, 'ITEM_OUT')
  WHERE EXISTS (SELECT 1 FROM loans WHERE item_id = NEW.item_id AND status = 'out' AND id <> NEW.id);
  SELECT RAISE(ABORT, 'WRONG_ITEM')
  WHERE NOT EXISTS (SELECT 1 FROM items WHERE id = NEW.item_id AND kind_id = NEW.kind_id AND wild = NEW.wild);
END;
--> statement-breakpoint
CREATE TRIGGER loans_item_update BEFORE UPDATE ON loans
WHEN NEW.status = 'out' AND (OLD.status <> 'out' OR OLD.item_id IS NOT NEW.item_id OR OLD.kind_id <> NEW.kind_id)
BEGIN
  SELECT RAISE(ABORT, 'ITEM_OUT')
  WHERE EXISTS (SELECT 1 FROM loans WHERE item_id = NEW.item_id AND status = 'out' AND id NOT IN (OLD.id, NEW.id));
  SELECT RAISE(ABORT, 'WRONG_ITEM')
  WHERE NOT EXISTS (SELECT 1 FROM items WHERE id = NEW.item_id AND kind_id = NEW.kind_id AND wild = NEW.wild);
END;
--> statement-breakpoint
-- Clean again, off the shelf or kept for wild cultures now: it no longer dries in the place of a loan.
CREATE TRIGGER loans_item_ready AFTER UPDATE OF hygiene, status, wild ON items
WHEN NEW.hygiene <> 'dirty' OR NEW.status <> 'in-service' OR NEW.wild <> OLD.wild
BEGIN
  UPDATE loans SET blocking = 0 WHERE item_id = NEW.id AND status = 'returned' AND blocking = 1;
END;
--> statement-breakpoint
CREATE TABLE loan_events (
  id INTEGER PRIMARY KEY NOT NULL,
  loan_id TEXT NOT NULL REFERENCES loans (id) ON DELETE CASCADE,
  event TEXT NOT NULL CHECK (event IN (
    'requested', 'approved', 'declined', 'cancelled', 'checked-out', 'checked-in', 'extended', 'extension-requested',
    'extension-declined', 'lapsed', 'at-risk', 'safe-again'
  )),
  at TEXT NOT NULL,
  by_id TEXT REFERENCES members (id),
  detail TEXT CHECK (length(detail) <= 1000)
) STRICT;
--> statement-breakpoint
CREATE INDEX loan_events_loan ON loan_events (loan_id, id);
--> statement-breakpoint
CREATE INDEX loan_events_by ON loan_events (by_id) WHERE by_id IS NOT NULL;
--> statement-breakpoint
-- History is written once. Only the free text may go, when its writer is forgotten.
CREATE TRIGGER loan_events_kept BEFORE UPDATE OF id, loan_id, event, at ON loan_events
BEGIN
  SELECT RAISE(ABORT, 'HISTORY_IS_KEPT');
END;
--> statement-breakpoint
CREATE TABLE waitings (
  id TEXT PRIMARY KEY NOT NULL,
  kind_id TEXT NOT NULL REFERENCES kinds (id),
  member_id TEXT NOT NULL REFERENCES members (id),
  wild INTEGER NOT NULL DEFAULT 0 CHECK (wild IN (0, 1)),
  from_on TEXT NOT NULL CHECK (from_on IS date(from_on)),
  to_on TEXT NOT NULL CHECK (to_on IS date(to_on)),
  blocks_until_on TEXT NOT NULL CHECK (blocks_until_on IS date(blocks_until_on)),
  state TEXT NOT NULL CHECK (state IN ('waiting', 'offered', 'taken', 'expired', 'left')),
  offered_until TEXT,
  loan_id TEXT REFERENCES loans (id),
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  CHECK (to_on >= from_on AND blocks_until_on >= to_on),
  CHECK (state <> 'offered' OR offered_until IS NOT NULL),
  CHECK (state <> 'taken' OR loan_id IS NOT NULL)
) STRICT;
--> statement-breakpoint
CREATE INDEX waitings_kind ON waitings (kind_id, state, wild, created_at, id);
--> statement-breakpoint
CREATE INDEX waitings_state ON waitings (state, created_at, id);
--> statement-breakpoint
CREATE INDEX waitings_member ON waitings (member_id, state);
--> statement-breakpoint
CREATE UNIQUE INDEX waitings_once ON waitings (member_id, kind_id, wild, from_on, to_on)
WHERE state IN ('waiting', 'offered');
--> statement-breakpoint
CREATE INDEX waitings_loan ON waitings (loan_id) WHERE loan_id IS NOT NULL;
--> statement-breakpoint
CREATE TABLE refusals (
  id INTEGER PRIMARY KEY NOT NULL,
  kind_id TEXT NOT NULL REFERENCES kinds (id),
  member_id TEXT NOT NULL REFERENCES members (id),
  from_on TEXT NOT NULL,
  to_on TEXT NOT NULL,
  reason TEXT NOT NULL CHECK (reason IN ('not-available', 'over-limit', 'needs-induction')),
  refused_on TEXT NOT NULL,
  created_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX refusals_kind ON refusals (kind_id, refused_on);
--> statement-breakpoint
CREATE INDEX refusals_member ON refusals (member_id);
