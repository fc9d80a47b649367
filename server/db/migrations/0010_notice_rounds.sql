-- What is written once a morning, whatever turns up later in the day.
CREATE TABLE notice_rounds (
  round_on TEXT PRIMARY KEY NOT NULL CHECK (round_on IS date(round_on)),
  done_at TEXT NOT NULL
) STRICT;
