-- Files of readings that somebody brings. The files themselves lie in the data folder, under the id of their row.

CREATE TABLE uploads (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  file_name TEXT NOT NULL CHECK (length(file_name) BETWEEN 1 AND 200),
  sha256 TEXT NOT NULL CHECK (length(sha256) = 64),
  size_bytes INTEGER NOT NULL CHECK (size_bytes >= 0),
  -- 'draft': it is here, and somebody says how it is to be read.
  state TEXT NOT NULL CHECK (state IN ('draft', 'waiting', 'running', 'done', 'failed', 'cancelled')),
  -- How it is read; null while it is a draft.
  settings TEXT CHECK (json_valid(settings)),
  -- Up to here everything is in the readings; written in one transaction with them.
  bytes_done INTEGER NOT NULL DEFAULT 0 CHECK (bytes_done >= 0),
  lines_done INTEGER NOT NULL DEFAULT 0 CHECK (lines_done >= 0),
  -- Instant of the last good row: the hour that is lived twice is told apart by it.
  last_at INTEGER,
  added INTEGER NOT NULL DEFAULT 0 CHECK (added >= 0),
  repeated INTEGER NOT NULL DEFAULT 0 CHECK (repeated >= 0),
  marked INTEGER NOT NULL DEFAULT 0 CHECK (marked >= 0),
  rejected INTEGER NOT NULL DEFAULT 0 CHECK (rejected >= 0),
  -- How much of the file of refused rows is good; what lies behind it is of a chunk that was not finished.
  errors_bytes INTEGER NOT NULL DEFAULT 0 CHECK (errors_bytes >= 0),
  created_by TEXT REFERENCES members (id) ON DELETE RESTRICT,
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  started_at INTEGER CHECK (started_at > 0),
  finished_at INTEGER CHECK (finished_at > 0),
  error TEXT CHECK (length(error) <= 500),
  -- The worker that has it in hand, and until when it is believed to live.
  lease_id TEXT CHECK (length(lease_id) = 36),
  lease_until INTEGER,
  CHECK (settings IS NOT NULL OR state IN ('draft', 'cancelled'))
) STRICT;
CREATE INDEX uploads_created ON uploads (created_at);
CREATE INDEX uploads_open ON uploads (state, created_at) WHERE state IN ('draft', 'waiting', 'running');
CREATE INDEX uploads_same_file ON uploads (sensor_id, sha256);
