-- Kinds are not listed here: every domain brings its own letters.
CREATE TABLE letters (
  id TEXT PRIMARY KEY NOT NULL,
  dedupe_key TEXT NOT NULL CHECK (length(dedupe_key) BETWEEN 1 AND 200),
  kind TEXT NOT NULL CHECK (length(kind) BETWEEN 1 AND 40),
  member_id TEXT REFERENCES members (id) ON DELETE CASCADE,
  to_address TEXT CHECK (to_address IS NULL OR length(to_address) BETWEEN 3 AND 254),
  about_type TEXT CHECK (about_type IN ('loan', 'waiting', 'batch', 'step', 'packet', 'pitch', 'member')),
  about_id TEXT,
  about_on TEXT,
  subject TEXT NOT NULL CHECK (length(subject) BETWEEN 1 AND 200),
  text TEXT NOT NULL,
  html TEXT NOT NULL,
  message_id TEXT NOT NULL,
  in_reply_to TEXT,
  queued_at TEXT NOT NULL,
  send_after TEXT NOT NULL,
  useful_until TEXT NOT NULL,
  leased_until TEXT,
  tries INTEGER NOT NULL DEFAULT 0 CHECK (tries >= 0),
  failure TEXT CHECK (failure IN ('relay', 'letter')),
  last_error TEXT CHECK (last_error IS NULL OR length(last_error) <= 500),
  status TEXT NOT NULL CHECK (status IN ('queued', 'sent', 'failed', 'dropped')),
  sent_at TEXT,
  CHECK ((about_type IS NULL) = (about_id IS NULL)),
  CHECK ((status = 'sent') = (sent_at IS NOT NULL)),
  CHECK (member_id IS NOT NULL OR to_address IS NOT NULL)
) STRICT;
--> statement-breakpoint
CREATE UNIQUE INDEX letters_dedupe ON letters (dedupe_key);
--> statement-breakpoint
CREATE INDEX letters_due ON letters (status, send_after);
--> statement-breakpoint
CREATE INDEX letters_member ON letters (member_id);
--> statement-breakpoint
CREATE INDEX letters_about ON letters (about_type, about_id, queued_at);
--> statement-breakpoint
CREATE INDEX letters_newest ON letters (queued_at, id);
--> statement-breakpoint
CREATE TABLE notice_preferences (
  member_id TEXT PRIMARY KEY NOT NULL REFERENCES members (id) ON DELETE CASCADE,
  off TEXT NOT NULL CHECK (json_valid(off)),
  updated_at TEXT NOT NULL,
  version INTEGER NOT NULL DEFAULT 1 CHECK (version >= 1)
) STRICT;
--> statement-breakpoint
CREATE TABLE unsubscribe_tokens (
  token_digest TEXT PRIMARY KEY NOT NULL,
  member_id TEXT NOT NULL REFERENCES members (id) ON DELETE CASCADE,
  kind TEXT NOT NULL,
  created_at TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX unsubscribe_tokens_member ON unsubscribe_tokens (member_id);
--> statement-breakpoint
CREATE INDEX unsubscribe_tokens_age ON unsubscribe_tokens (created_at);
--> statement-breakpoint
CREATE TABLE caught_letters (
  id TEXT PRIMARY KEY NOT NULL,
  received_at TEXT NOT NULL,
  envelope_from TEXT NOT NULL,
  envelope_to TEXT NOT NULL,
  message_id TEXT,
  subject TEXT NOT NULL,
  headers TEXT NOT NULL CHECK (json_valid(headers)),
  text TEXT NOT NULL,
  html TEXT NOT NULL
) STRICT;
--> statement-breakpoint
CREATE INDEX caught_letters_age ON caught_letters (received_at, id);
