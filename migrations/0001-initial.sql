-- People, groups, attempts, spectra and values as a section has them; originals byte for byte; every change journalled.
CREATE TABLE section (
  id INTEGER PRIMARY KEY,
  title TEXT NOT NULL,
  created_at TEXT NOT NULL,
  closed_at TEXT,
  remembered_columns TEXT NOT NULL DEFAULT '{}'
) STRICT;

CREATE TABLE scheme (
  id INTEGER PRIMARY KEY,
  section_id INTEGER NOT NULL REFERENCES section(id) ON DELETE CASCADE,
  version INTEGER NOT NULL,
  document TEXT NOT NULL,
  created_at TEXT NOT NULL,
  UNIQUE (section_id, version)
) STRICT;

CREATE TABLE original (
  sha256 TEXT PRIMARY KEY,
  byte_count INTEGER NOT NULL,
  bytes BLOB NOT NULL
) STRICT;

CREATE TABLE section_file (
  id INTEGER PRIMARY KEY,
  section_id INTEGER NOT NULL REFERENCES section(id) ON DELETE CASCADE,
  name TEXT NOT NULL,
  kind TEXT NOT NULL CHECK (kind IN ('spectrum', 'table', 'other')),
  sha256 TEXT NOT NULL REFERENCES original(sha256),
  title TEXT,
  added_at TEXT NOT NULL,
  UNIQUE (section_id, name, sha256)
) STRICT;

CREATE TABLE person (
  id INTEGER PRIMARY KEY,
  section_id INTEGER NOT NULL REFERENCES section(id) ON DELETE CASCADE,
  person_key TEXT NOT NULL,
  name TEXT,
  group_label TEXT,
  UNIQUE (section_id, person_key)
) STRICT;

CREATE TABLE submission (
  id INTEGER PRIMARY KEY,
  section_id INTEGER NOT NULL REFERENCES section(id) ON DELETE CASCADE,
  person_id INTEGER NOT NULL REFERENCES person(id) ON DELETE CASCADE,
  attempt INTEGER NOT NULL,
  received TEXT,
  isotopologue TEXT,
  group_label TEXT,
  line_count INTEGER,
  position INTEGER NOT NULL,
  added_at TEXT NOT NULL
) STRICT;

-- A pair that hands in once belongs to both.
CREATE TABLE submission_person (
  submission_id INTEGER NOT NULL REFERENCES submission(id) ON DELETE CASCADE,
  person_id INTEGER NOT NULL REFERENCES person(id) ON DELETE CASCADE,
  adjustment_points REAL,
  adjustment_comment TEXT,
  PRIMARY KEY (submission_id, person_id)
) STRICT;

CREATE TABLE submission_file (
  submission_id INTEGER NOT NULL REFERENCES submission(id) ON DELETE CASCADE,
  file_id INTEGER NOT NULL REFERENCES section_file(id) ON DELETE CASCADE,
  position INTEGER NOT NULL,
  PRIMARY KEY (submission_id, file_id)
) STRICT;

CREATE TABLE submitted_value (
  id INTEGER PRIMARY KEY,
  submission_id INTEGER NOT NULL REFERENCES submission(id) ON DELETE CASCADE,
  isotopologue TEXT,
  quantity TEXT NOT NULL,
  text TEXT NOT NULL,
  value REAL,
  uncertainty REAL,
  figures INTEGER,
  half_last_digit REAL,
  unit TEXT NOT NULL,
  standard_unit TEXT NOT NULL,
  unreadable_because TEXT
) STRICT;

CREATE TABLE submitted_line (
  submission_id INTEGER NOT NULL REFERENCES submission(id) ON DELETE CASCADE,
  isotopologue TEXT,
  m INTEGER NOT NULL,
  wavenumber_per_cm REAL NOT NULL
) STRICT;

-- Frozen with the core that made it; the newest one of a file counts.
CREATE TABLE reference (
  id INTEGER PRIMARY KEY,
  file_id INTEGER NOT NULL REFERENCES section_file(id) ON DELETE CASCADE,
  core_version TEXT NOT NULL,
  document TEXT NOT NULL,
  step_per_cm REAL,
  made_at TEXT NOT NULL
) STRICT;

CREATE TABLE correction (
  id INTEGER PRIMARY KEY,
  file_id INTEGER NOT NULL REFERENCES section_file(id) ON DELETE CASCADE,
  document TEXT NOT NULL,
  made_at TEXT NOT NULL
) STRICT;

CREATE TABLE decision (
  id INTEGER PRIMARY KEY,
  submission_id INTEGER NOT NULL REFERENCES submission(id) ON DELETE CASCADE,
  isotopologue TEXT NOT NULL,
  quantity TEXT NOT NULL,
  marker TEXT NOT NULL,
  action TEXT NOT NULL,
  points REAL,
  comment TEXT NOT NULL,
  decided_at TEXT NOT NULL,
  UNIQUE (submission_id, isotopologue, quantity, marker)
) STRICT;

CREATE TABLE hand_points (
  id INTEGER PRIMARY KEY,
  submission_id INTEGER NOT NULL REFERENCES submission(id) ON DELETE CASCADE,
  item TEXT NOT NULL,
  points REAL,
  UNIQUE (submission_id, item)
) STRICT;

CREATE TABLE remark (
  id INTEGER PRIMARY KEY,
  submission_id INTEGER NOT NULL UNIQUE REFERENCES submission(id) ON DELETE CASCADE,
  text TEXT NOT NULL
) STRICT;

CREATE TABLE journal (
  id INTEGER PRIMARY KEY,
  section_id INTEGER NOT NULL REFERENCES section(id) ON DELETE CASCADE,
  at TEXT NOT NULL,
  who TEXT NOT NULL,
  what TEXT NOT NULL,
  -- [{table, id, before, after}] with rows as JSON objects or null
  changes TEXT NOT NULL,
  undone INTEGER NOT NULL DEFAULT 0
) STRICT;

CREATE TABLE intake (
  id INTEGER PRIMARY KEY,
  section_id INTEGER NOT NULL REFERENCES section(id) ON DELETE CASCADE,
  state TEXT NOT NULL CHECK (state IN ('open', 'committed', 'cancelled')),
  -- columns and matches that a person set
  choices TEXT NOT NULL DEFAULT '{}',
  -- every file with its hash and what it became
  record TEXT,
  began_at TEXT NOT NULL,
  ended_at TEXT
) STRICT;

CREATE TABLE export_record (
  id INTEGER PRIMARY KEY,
  section_id INTEGER NOT NULL REFERENCES section(id) ON DELETE CASCADE,
  at TEXT NOT NULL,
  kind TEXT NOT NULL,
  options TEXT NOT NULL,
  sha256 TEXT NOT NULL
) STRICT;

CREATE TABLE setting (
  name TEXT PRIMARY KEY,
  value TEXT NOT NULL
) STRICT;

CREATE INDEX section_file_by_section ON section_file(section_id);
CREATE INDEX submission_by_section ON submission(section_id);
CREATE INDEX value_by_submission ON submitted_value(submission_id);
CREATE INDEX line_by_submission ON submitted_line(submission_id);
CREATE INDEX reference_by_file ON reference(file_id);
CREATE INDEX decision_by_submission ON decision(submission_id);
CREATE INDEX journal_by_section ON journal(section_id);
