CREATE TABLE members (
  id TEXT PRIMARY KEY NOT NULL,
  name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  email TEXT NOT NULL COLLATE NOCASE CHECK (length(email) BETWEEN 3 AND 254),
  phone TEXT CHECK (phone IS NULL OR length(phone) <= 40),
  role TEXT NOT NULL CHECK (role IN ('member', 'steward', 'admin')),
  status TEXT NOT NULL CHECK (status IN ('active', 'suspended', 'left')),
  password_hash TEXT,
  erase_on TEXT,
  created_at TEXT NOT NULL,
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1)
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX members_email ON members (email);
--> statement-breakpoint
CREATE TABLE sessions (
  sid_digest TEXT PRIMARY KEY NOT NULL,
  member_id TEXT REFERENCES members (id) ON DELETE CASCADE,
  data TEXT NOT NULL,
  device TEXT NOT NULL DEFAULT '' CHECK (length(device) <= 80),
  created_at TEXT NOT NULL,
  seen_at TEXT NOT NULL,
  expires_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX sessions_member ON sessions (member_id);
--> statement-breakpoint
CREATE INDEX sessions_expiry ON sessions (expires_at);
--> statement-breakpoint
CREATE TABLE throttles (
  key TEXT PRIMARY KEY NOT NULL,
  failures INTEGER NOT NULL CHECK (failures >= 0),
  window_started_at TEXT NOT NULL,
  blocked_until TEXT
) STRICT;
--> statement-breakpoint
CREATE TABLE idempotency_keys (
  id TEXT PRIMARY KEY NOT NULL,
  request_digest TEXT NOT NULL,
  status INTEGER CHECK (status IS NULL OR status BETWEEN 200 AND 599),
  body TEXT,
  created_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX idempotency_keys_age ON idempotency_keys (created_at);
