/** "TRIG": tells our files from other SQLite databases (PRAGMA application_id). */
export const APPLICATION_ID = 0x54524947;

/** Step i brings a store from format i to format i + 1; a step that was released is never edited. */
export const MIGRATIONS: readonly string[] = [
  `
  CREATE TABLE lease (
    id     INTEGER PRIMARY KEY CHECK (id = 1),
    owner  TEXT NOT NULL,
    pid    INTEGER NOT NULL,
    host   TEXT NOT NULL,
    beat   INTEGER NOT NULL -- milliseconds since 1970
  ) STRICT;

  CREATE TABLE runs (
    id           INTEGER PRIMARY KEY AUTOINCREMENT,
    parent       INTEGER REFERENCES runs (id),
    relation     TEXT NOT NULL,
    state        TEXT NOT NULL,
    title        TEXT NOT NULL,
    plan         TEXT NOT NULL, -- canonical JSON, as fingerprints, environment and columns
    scan_name    TEXT NOT NULL,
    scan_text    TEXT NOT NULL,
    fingerprints TEXT NOT NULL,
    environment  TEXT NOT NULL,
    columns      TEXT NOT NULL,
    wanted       INTEGER NOT NULL,
    points       INTEGER NOT NULL DEFAULT 0,
    surviving    INTEGER NOT NULL DEFAULT 0,
    excluded     INTEGER NOT NULL DEFAULT 0,
    failed       INTEGER NOT NULL DEFAULT 0,
    unfinished   INTEGER NOT NULL DEFAULT 0,
    started      TEXT NOT NULL,
    finished     TEXT,
    seconds      REAL NOT NULL DEFAULT 0,
    digest       TEXT
  ) STRICT;

  -- Immutable; the same content is stored once, whichever runs refer to it. AUTOINCREMENT: an id is never
  -- used again, so that a cache may be keyed by it.
  CREATE TABLE segments (
    id      INTEGER PRIMARY KEY AUTOINCREMENT,
    kind    INTEGER NOT NULL, -- 0 evaluation, 1 judgement
    stratum INTEGER NOT NULL,
    first   INTEGER NOT NULL,
    count   INTEGER NOT NULL,
    hash    BLOB NOT NULL UNIQUE
  ) STRICT;

  CREATE TABLE segment_columns (
    segment INTEGER NOT NULL REFERENCES segments (id) ON DELETE CASCADE,
    name    TEXT NOT NULL,
    hash    BLOB NOT NULL, -- SHA-256 of data
    data    BLOB NOT NULL, -- float64 little-endian, or a byte a point
    UNIQUE (segment, name)
  ) STRICT;

  -- Which points of which segment a run is made of.
  CREATE TABLE extents (
    run     INTEGER NOT NULL REFERENCES runs (id),
    kind    INTEGER NOT NULL,
    stratum INTEGER NOT NULL,
    first   INTEGER NOT NULL,
    count   INTEGER NOT NULL,
    segment INTEGER NOT NULL REFERENCES segments (id),
    PRIMARY KEY (run, kind, stratum, first)
  ) STRICT, WITHOUT ROWID;
  CREATE INDEX extents_by_segment ON extents (segment);

  CREATE TABLE attempts (
    run      INTEGER NOT NULL REFERENCES runs (id),
    stratum  INTEGER NOT NULL,
    first    INTEGER NOT NULL,
    count    INTEGER NOT NULL,
    attempts INTEGER NOT NULL,
    PRIMARY KEY (run, stratum, first, count)
  ) STRICT, WITHOUT ROWID;

  CREATE TABLE chunks (
    run          INTEGER NOT NULL REFERENCES runs (id),
    stratum      INTEGER NOT NULL,
    first        INTEGER NOT NULL,
    count        INTEGER NOT NULL,
    worker       TEXT NOT NULL,
    milliseconds REAL NOT NULL,
    PRIMARY KEY (run, stratum, first, count)
  ) STRICT, WITHOUT ROWID;

  CREATE TABLE unfinished (
    run     INTEGER NOT NULL REFERENCES runs (id),
    stratum INTEGER NOT NULL,
    point   INTEGER NOT NULL,
    reason  TEXT NOT NULL,
    PRIMARY KEY (run, stratum, point)
  ) STRICT, WITHOUT ROWID;
  `,
];

/** The format this program writes (PRAGMA user_version). */
export const FORMAT = MIGRATIONS.length;
