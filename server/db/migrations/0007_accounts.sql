CREATE TABLE tokens (
  id TEXT PRIMARY KEY NOT NULL,
  purpose TEXT NOT NULL CHECK (purpose IN ('invitation', 'password-reset', 'email-change', 'first-admin')),
  digest TEXT NOT NULL,
  member_id TEXT REFERENCES members (id) ON DELETE CASCADE,
  email TEXT NOT NULL COLLATE NOCASE,
  name TEXT,
  role TEXT CHECK (role IS NULL OR role IN ('member', 'steward', 'admin')),
  expires_at TEXT NOT NULL,
  used_at TEXT,
  created_by TEXT REFERENCES members (id),
  created_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX tokens_digest ON tokens (digest);
--> statement-breakpoint
CREATE INDEX tokens_member ON tokens (member_id, purpose);
--> statement-breakpoint
CREATE INDEX tokens_email ON tokens (email, purpose);
--> statement-breakpoint
CREATE INDEX tokens_created_by ON tokens (created_by);
--> statement-breakpoint
CREATE TABLE join_requests (
  id TEXT PRIMARY KEY NOT NULL,
  name TEXT NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  email TEXT NOT NULL COLLATE NOCASE,
  note TEXT CHECK (note IS NULL OR length(note) <= 500),
  status TEXT NOT NULL CHECK (status IN ('waiting', 'welcomed', 'declined')),
  asked_at TEXT NOT NULL,
  answered_at TEXT,
  answered_by TEXT REFERENCES members (id)
) STRICT;
--> statement-breakpoint
CREATE INDEX join_requests_status ON join_requests (status, asked_at);
--> statement-breakpoint
CREATE INDEX join_requests_answered_by ON join_requests (answered_by);
