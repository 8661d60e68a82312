-- What one member did of one kind, without reading all that they did or all of that kind.
CREATE INDEX tree_events_member_kind ON tree_events (member_id, kind, at);
CREATE INDEX foundry_events_member_kind ON foundry_events (member_id, kind, at);
