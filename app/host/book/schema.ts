/**
 * The book's tables, as a list of additive migrations: a released entry never changes, a new need is a
 * new entry. Readings and the trail are only ever added to; runs and pulses also carry the latest
 * figures in columns, so that lists and histories need not open a reading.
 */
export const migrations: readonly string[] = [
  `
  CREATE TABLE runs (
    id INTEGER PRIMARY KEY,
    key TEXT NOT NULL UNIQUE,
    name TEXT NOT NULL,
    folder TEXT,
    coil TEXT,
    taken TEXT,
    added TEXT NOT NULL,
    setup TEXT NOT NULL DEFAULT '{}',
    origins TEXT NOT NULL DEFAULT '{}',
    reading TEXT,
    captures INTEGER NOT NULL DEFAULT 0,
    counts TEXT NOT NULL,
    inductance_H REAL, inductance_u REAL,
    capacitance_F REAL, capacitance_u REAL,
    resistance_ohm REAL, resistance_u REAL,
    q REAL, q_u REAL,
    resistance20_ohm REAL, resistance20_u REAL,
    peak_V REAL
  ) STRICT;
  CREATE INDEX runs_by_coil ON runs (coil, taken);
  CREATE INDEX runs_by_taken ON runs (taken);

  CREATE TABLE captures (
    id INTEGER PRIMARY KEY,
    run INTEGER NOT NULL REFERENCES runs (id),
    position INTEGER NOT NULL,
    path TEXT NOT NULL,
    sha256 TEXT NOT NULL,
    bytes INTEGER NOT NULL,
    record INTEGER NOT NULL,
    records INTEGER NOT NULL,
    setup TEXT NOT NULL,
    pulses INTEGER NOT NULL,
    added TEXT NOT NULL,
    reading INTEGER,
    UNIQUE (run, sha256, record)
  ) STRICT;
  CREATE INDEX captures_by_run ON captures (run, position);
  CREATE INDEX captures_by_hash ON captures (sha256);

  -- zlib-compressed JSON of what the program concluded, one row a program version and setup.
  CREATE TABLE readings (
    id INTEGER PRIMARY KEY,
    capture INTEGER NOT NULL REFERENCES captures (id),
    version TEXT NOT NULL,
    setup TEXT NOT NULL,
    at TEXT NOT NULL,
    json BLOB NOT NULL
  ) STRICT;
  CREATE INDEX readings_by_capture ON readings (capture, id);

  CREATE TABLE pulses (
    capture INTEGER NOT NULL REFERENCES captures (id),
    pulse INTEGER NOT NULL,
    run INTEGER NOT NULL REFERENCES runs (id),
    number INTEGER NOT NULL,
    verdict TEXT,
    ruled TEXT,
    probability REAL,
    peak_V REAL,
    margin REAL,
    q REAL, q_u REAL,
    frequency_Hz REAL, frequency_u REAL,
    onset_s REAL,
    quality TEXT,
    sketch TEXT NOT NULL DEFAULT '[]',
    sketchOnset REAL,
    PRIMARY KEY (capture, pulse)
  ) STRICT, WITHOUT ROWID;
  CREATE INDEX pulses_by_run ON pulses (run, number);
  CREATE INDEX pulses_by_verdict ON pulses (run, coalesce(ruled, verdict));

  -- What the user stated and ruled. A row that takes another back names it in undoes.
  CREATE TABLE trail (
    id INTEGER PRIMARY KEY,
    run INTEGER NOT NULL REFERENCES runs (id),
    kind TEXT NOT NULL CHECK (kind IN ('setup', 'ruling', 'undo')),
    at TEXT NOT NULL,
    capture INTEGER REFERENCES captures (id),
    pulse INTEGER,
    verdict TEXT,
    remark TEXT,
    stated TEXT,
    undoes INTEGER UNIQUE REFERENCES trail (id)
  ) STRICT;
  CREATE INDEX trail_by_run ON trail (run, kind, id);
  CREATE INDEX trail_by_pulse ON trail (capture, pulse, id);
  CREATE TRIGGER trail_is_kept BEFORE UPDATE ON trail BEGIN SELECT raise(ABORT, 'the trail is only added to'); END;
  CREATE TRIGGER trail_is_whole BEFORE DELETE ON trail BEGIN SELECT raise(ABORT, 'the trail is only added to'); END;

  CREATE TABLE problems (
    run INTEGER NOT NULL REFERENCES runs (id),
    path TEXT NOT NULL,
    code TEXT NOT NULL,
    text TEXT NOT NULL,
    at TEXT NOT NULL,
    PRIMARY KEY (run, path)
  ) STRICT, WITHOUT ROWID;

  CREATE TABLE preferences (key TEXT PRIMARY KEY, value TEXT NOT NULL) STRICT, WITHOUT ROWID;
  `,
  `
  -- Files of one layout are built alike: what was answered of one holds for the next.
  ALTER TABLE captures ADD COLUMN layout TEXT;
  CREATE TABLE answers (
    trail INTEGER NOT NULL REFERENCES trail (id),
    layout TEXT NOT NULL,
    answers TEXT NOT NULL,
    PRIMARY KEY (trail, layout)
  ) STRICT, WITHOUT ROWID;
  CREATE INDEX answers_by_layout ON answers (layout, trail);

  -- Files copied in, gzip-compressed, where the user wants that.
  CREATE TABLE originals (sha256 TEXT PRIMARY KEY, bytes INTEGER NOT NULL, gz BLOB NOT NULL) STRICT;
  `,
  `
  -- Files read along with a capture file: its settings, further channels of its shot.
  CREATE TABLE companions (
    capture TEXT NOT NULL,
    name TEXT NOT NULL,
    sha256 TEXT NOT NULL,
    PRIMARY KEY (capture, name)
  ) STRICT, WITHOUT ROWID;
  `,
];
