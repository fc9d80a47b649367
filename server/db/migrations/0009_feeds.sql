CREATE TABLE calendar_feeds (
  member_id TEXT PRIMARY KEY NOT NULL REFERENCES members (id) ON DELETE CASCADE,
  digest TEXT NOT NULL,
  created_at TEXT NOT NULL,
  read_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX calendar_feeds_digest ON calendar_feeds (digest);
