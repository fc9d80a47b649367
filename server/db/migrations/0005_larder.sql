CREATE TABLE ingredients (
  id TEXT PRIMARY KEY NOT NULL,
  name TEXT NOT NULL COLLATE NOCASE CHECK (length(name) BETWEEN 1 AND 80),
  kind TEXT NOT NULL CHECK (
    kind IN (
      'honey', 'sugar', 'fruit', 'juice', 'malt', 'hops', 'spice', 'nutrient', 'acid', 'fining', 'preservative',
      'priming', 'closure', 'bottle', 'label', 'cleaning', 'other'
    )
  ),
  unit TEXT NOT NULL CHECK (unit IN ('g', 'ml', 'each')),
  composition TEXT CHECK (composition IS NULL OR json_type(composition) = 'object'),
  allergens TEXT NOT NULL DEFAULT '[]' CHECK (json_type(allergens) = 'array'),
  par_milli INTEGER CHECK (par_milli IS NULL OR par_milli >= 0),
  keeps_opened_days INTEGER CHECK (keeps_opened_days IS NULL OR keeps_opened_days BETWEEN 1 AND 3650),
  grams_per_unit REAL CHECK (grams_per_unit IS NULL OR grams_per_unit > 0),
  note TEXT CHECK (note IS NULL OR length(note) <= 1000),
  archived INTEGER NOT NULL DEFAULT 0 CHECK (archived IN (0, 1)),
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1)
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX ingredients_name ON ingredients (name);
--> statement-breakpoint
CREATE TABLE lots (
  id TEXT PRIMARY KEY NOT NULL,
  ingredient_id TEXT NOT NULL REFERENCES ingredients (id),
  quantity_milli INTEGER NOT NULL CHECK (quantity_milli > 0),
  remaining_milli INTEGER NOT NULL DEFAULT 0 CHECK (remaining_milli >= 0),
  basis_milli INTEGER NOT NULL DEFAULT 0 CHECK (basis_milli >= 0),
  basis_minor INTEGER NOT NULL DEFAULT 0 CHECK (basis_minor >= 0),
  cost_minor INTEGER NOT NULL CHECK (cost_minor >= 0),
  currency TEXT NOT NULL CHECK (length(currency) = 3),
  best_before TEXT CHECK (best_before IS date(best_before)),
  opened_on TEXT CHECK (opened_on IS date(opened_on)),
  use_by TEXT CHECK (use_by IS date(use_by)),
  shelf TEXT CHECK (shelf IS NULL OR length(shelf) BETWEEN 1 AND 40),
  donor TEXT CHECK (donor IS NULL OR length(donor) BETWEEN 1 AND 80),
  lot_code TEXT CHECK (lot_code IS NULL OR length(lot_code) BETWEEN 1 AND 60),
  note TEXT CHECK (note IS NULL OR length(note) <= 500),
  added_by TEXT NOT NULL REFERENCES members (id),
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1)
) STRICT;
--> statement-breakpoint
CREATE INDEX lots_ingredient ON lots (ingredient_id, use_by);
--> statement-breakpoint
CREATE INDEX lots_added_by ON lots (added_by);
--> statement-breakpoint
CREATE INDEX lots_stock ON lots (ingredient_id, use_by, remaining_milli) WHERE remaining_milli > 0;
--> statement-breakpoint
CREATE INDEX lots_use_by ON lots (use_by) WHERE remaining_milli > 0;
--> statement-breakpoint
CREATE TABLE stocktakes (
  id TEXT PRIMARY KEY NOT NULL,
  member_id TEXT NOT NULL REFERENCES members (id),
  note TEXT CHECK (note IS NULL OR length(note) <= 500),
  at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX stocktakes_member ON stocktakes (member_id);
--> statement-breakpoint
CREATE INDEX stocktakes_at ON stocktakes (at, id);
--> statement-breakpoint
CREATE TABLE moves (
  seq INTEGER PRIMARY KEY AUTOINCREMENT NOT NULL,
  id TEXT NOT NULL,
  lot_id TEXT NOT NULL REFERENCES lots (id),
  reason TEXT NOT NULL CHECK (reason IN ('opening', 'draw', 'top-up', 'waste', 'recount')),
  delta_milli INTEGER NOT NULL CHECK (delta_milli <> 0 OR reason = 'recount'),
  value_minor INTEGER NOT NULL,
  charge_minor INTEGER NOT NULL CHECK (charge_minor = 0 OR reason = 'draw'),
  after_milli INTEGER NOT NULL CHECK (after_milli >= 0),
  member_id TEXT NOT NULL REFERENCES members (id),
  batch_id TEXT REFERENCES batches (id) ON DELETE SET NULL,
  stocktake_id TEXT REFERENCES stocktakes (id),
  undoes_id TEXT REFERENCES moves (id),
  note TEXT CHECK (note IS NULL OR length(note) <= 300),
  at TEXT NOT NULL,
  CHECK (undoes_id IS NOT NULL OR reason NOT IN ('draw', 'waste') OR delta_milli < 0),
  CHECK (undoes_id IS NOT NULL OR reason NOT IN ('opening', 'top-up') OR delta_milli > 0)
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX moves_id ON moves (id);
--> statement-breakpoint
CREATE INDEX moves_lot ON moves (lot_id, delta_milli);
--> statement-breakpoint
CREATE INDEX moves_lot_order ON moves (lot_id, seq);
--> statement-breakpoint
CREATE INDEX moves_member ON moves (member_id, charge_minor);
--> statement-breakpoint
CREATE INDEX moves_batch ON moves (batch_id);
--> statement-breakpoint
CREATE INDEX moves_stocktake ON moves (stocktake_id);
--> statement-breakpoint
CREATE UNIQUE INDEX moves_undoes ON moves (undoes_id);
--> statement-breakpoint
CREATE TRIGGER moves_not_short BEFORE INSERT ON moves BEGIN
  SELECT RAISE(ABORT, 'LOT_SHORT')
    WHERE (SELECT coalesce(sum(delta_milli), 0) FROM moves WHERE lot_id = NEW.lot_id) + NEW.delta_milli < 0;
  SELECT RAISE(ABORT, 'LOT_LEDGER')
    WHERE (SELECT coalesce(sum(delta_milli), 0) FROM moves WHERE lot_id = NEW.lot_id) + NEW.delta_milli <> NEW.after_milli;
END;
--> statement-breakpoint
CREATE TRIGGER moves_to_lot AFTER INSERT ON moves BEGIN
  UPDATE lots SET remaining_milli = NEW.after_milli WHERE id = NEW.lot_id;
END;
--> statement-breakpoint
CREATE TRIGGER moves_not_changed BEFORE UPDATE ON moves
-- All but one thing: when a batch is erased, its moves forget it.
WHEN NEW.batch_id IS NOT NULL
  OR NEW.seq <> OLD.seq OR NEW.id <> OLD.id OR NEW.lot_id <> OLD.lot_id OR NEW.reason <> OLD.reason
  OR NEW.delta_milli <> OLD.delta_milli OR NEW.value_minor <> OLD.value_minor
  OR NEW.charge_minor <> OLD.charge_minor OR NEW.after_milli <> OLD.after_milli
  OR NEW.member_id <> OLD.member_id OR NEW.stocktake_id IS NOT OLD.stocktake_id
  OR NEW.undoes_id IS NOT OLD.undoes_id OR NEW.note IS NOT OLD.note OR NEW.at <> OLD.at
BEGIN
  SELECT RAISE(ABORT, 'MOVES_ONLY_GROW');
END;
--> statement-breakpoint
CREATE TRIGGER moves_not_removed BEFORE DELETE ON moves BEGIN
  SELECT RAISE(ABORT, 'MOVES_ONLY_GROW');
END;
--> statement-breakpoint
CREATE TRIGGER lots_start_empty BEFORE INSERT ON lots WHEN NEW.remaining_milli <> 0 BEGIN
  SELECT RAISE(ABORT, 'LOT_LEDGER');
END;
--> statement-breakpoint
CREATE TRIGGER lots_follow_moves BEFORE UPDATE OF remaining_milli ON lots BEGIN
  SELECT RAISE(ABORT, 'LOT_LEDGER')
    WHERE NEW.remaining_milli <> (SELECT coalesce(sum(delta_milli), 0) FROM moves WHERE lot_id = NEW.id);
END;
--> statement-breakpoint
CREATE TRIGGER lots_keep_their_ingredient BEFORE UPDATE OF ingredient_id, quantity_milli, currency ON lots BEGIN
  SELECT RAISE(ABORT, 'LOT_LEDGER');
END;
--> statement-breakpoint
CREATE TABLE settlements (
  seq INTEGER PRIMARY KEY AUTOINCREMENT NOT NULL,
  id TEXT NOT NULL,
  member_id TEXT NOT NULL REFERENCES members (id),
  amount_minor INTEGER NOT NULL CHECK (amount_minor > 0 OR (method = 'correction' AND amount_minor <> 0)),
  currency TEXT NOT NULL CHECK (length(currency) = 3),
  method TEXT NOT NULL CHECK (method IN ('cash', 'transfer', 'in-kind', 'correction')),
  note TEXT CHECK (note IS NULL OR length(note) <= 300),
  recorded_by TEXT NOT NULL REFERENCES members (id),
  at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX settlements_id ON settlements (id);
--> statement-breakpoint
CREATE INDEX settlements_member ON settlements (member_id, amount_minor);
--> statement-breakpoint
CREATE INDEX settlements_recorded_by ON settlements (recorded_by);
--> statement-breakpoint
CREATE TRIGGER settlements_not_changed BEFORE UPDATE ON settlements BEGIN
  SELECT RAISE(ABORT, 'SETTLEMENTS_ONLY_GROW');
END;
--> statement-breakpoint
CREATE TRIGGER settlements_not_removed BEFORE DELETE ON settlements BEGIN
  SELECT RAISE(ABORT, 'SETTLEMENTS_ONLY_GROW');
END;
--> statement-breakpoint
CREATE TABLE reservations (
  batch_id TEXT NOT NULL REFERENCES batches (id) ON DELETE CASCADE,
  ingredient_id TEXT NOT NULL REFERENCES ingredients (id),
  quantity_milli INTEGER NOT NULL CHECK (quantity_milli > 0),
  needed_on TEXT CHECK (needed_on IS date(needed_on)),
  created_at TEXT NOT NULL,
  PRIMARY KEY (batch_id, ingredient_id)
) STRICT;
--> statement-breakpoint
CREATE INDEX reservations_ingredient ON reservations (ingredient_id, batch_id);
