-- Readings from a broker of the foundry's own network.

-- One row at the most. What an owner has set, and what the worker knows of the connection.
CREATE TABLE mqtt_broker (
  id INTEGER PRIMARY KEY CHECK (id = 1),
  is_on INTEGER NOT NULL CHECK (is_on IN (0, 1)),
  is_tls INTEGER NOT NULL CHECK (is_tls IN (0, 1)),
  host TEXT NOT NULL CHECK (length(host) BETWEEN 1 AND 253),
  port INTEGER NOT NULL CHECK (port BETWEEN 1 AND 65535),
  user_name TEXT NOT NULL DEFAULT '' CHECK (length(user_name) <= 200),
  -- Sealed with a key that does not lie in these records.
  sealed_password TEXT CHECK (length(sealed_password) <= 2000),
  -- Made once: the broker keeps for it what comes while we are away.
  client_id TEXT NOT NULL CHECK (length(client_id) BETWEEN 1 AND 23),
  connected_since INTEGER CHECK (connected_since > 0),
  away_since INTEGER CHECK (away_since > 0),
  -- Why there is no connection, or what the broker does not allow; a sentence.
  trouble TEXT NOT NULL DEFAULT '' CHECK (length(trouble) <= 500),
  -- Filters that the broker knows for this client: what is no longer wanted has to be taken back.
  held_filters TEXT NOT NULL DEFAULT '[]' CHECK (json_valid(held_filters))
) STRICT;

-- Which topic feeds which sensor, and where its figures stand.
CREATE TABLE mqtt_topics (
  id TEXT PRIMARY KEY CHECK (length(id) = 36),
  filter TEXT NOT NULL CHECK (length(filter) BETWEEN 1 AND 250),
  sensor_id INTEGER NOT NULL REFERENCES sensors (id) ON DELETE RESTRICT,
  -- Null: it does not tell this.
  temp_path TEXT CHECK (length(temp_path) BETWEEN 1 AND 120),
  rh_path TEXT CHECK (length(rh_path) BETWEEN 1 AND 120),
  -- Of a barometer, in Pa, hPa or kPa, told apart by size.
  pressure_path TEXT CHECK (length(pressure_path) BETWEEN 1 AND 120),
  time_path TEXT CHECK (length(time_path) BETWEEN 1 AND 120),
  battery_path TEXT CHECK (length(battery_path) BETWEEN 1 AND 120),
  temp_unit TEXT NOT NULL CHECK (temp_unit IN ('degC', 'degF')),
  time_form TEXT NOT NULL CHECK (time_form IN ('arrival', 'iso', 'epoch s', 'epoch ms')),
  is_demo INTEGER NOT NULL DEFAULT 0 CHECK (is_demo IN (0, 1)),
  created_at INTEGER NOT NULL CHECK (created_at > 0),
  CHECK (temp_path IS NOT NULL OR rh_path IS NOT NULL),
  CHECK ((time_form = 'arrival') = (time_path IS NULL)),
  UNIQUE (filter, sensor_id)
) STRICT;
CREATE INDEX mqtt_topics_sensor ON mqtt_topics (sensor_id);
CREATE TRIGGER mqtt_topics_never_demo_later BEFORE UPDATE OF is_demo ON mqtt_topics WHEN NEW.is_demo > OLD.is_demo BEGIN SELECT RAISE(ABORT, 'nothing becomes demo data later'); END;

-- The last message on each topic, for a person who looks why nothing comes. Few: the oldest go.
CREATE TABLE mqtt_messages (
  topic TEXT PRIMARY KEY CHECK (length(topic) >= 1),
  received_at INTEGER NOT NULL CHECK (received_at > 0),
  -- Its beginning.
  text TEXT NOT NULL CHECK (length(text) <= 500),
  sha256 TEXT NOT NULL CHECK (length(sha256) = 64),
  outcome TEXT NOT NULL CHECK (outcome IN ('taken', 'set aside', 'waiting', 'repeated', 'passed over', 'refused')),
  reason TEXT NOT NULL DEFAULT '' CHECK (length(reason) <= 500)
) STRICT;
CREATE INDEX mqtt_messages_received ON mqtt_messages (received_at);

-- What came in each hour of the last day.
CREATE TABLE mqtt_hours (
  hour_start INTEGER PRIMARY KEY CHECK (hour_start > 0),
  message_count INTEGER NOT NULL CHECK (message_count >= 0),
  reading_count INTEGER NOT NULL CHECK (reading_count >= 0),
  refused_count INTEGER NOT NULL CHECK (refused_count >= 0),
  dropped_count INTEGER NOT NULL CHECK (dropped_count >= 0)
) STRICT;
