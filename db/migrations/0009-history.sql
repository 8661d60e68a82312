-- What one member did of one kind, without reading all that they did or all of that kind.
CREATE INDEX tree_events_member_kind ON tree_events (member_id, kind, at);
CREATE INDEX foundry_events_member_kind ON foundry_events (member_id, kind, at);

-- REPLACE takes a row away without asking the triggers of DELETE.
CREATE TRIGGER tree_events_no_replace BEFORE INSERT ON tree_events WHEN EXISTS (SELECT 1 FROM tree_events WHERE id = NEW.id) BEGIN SELECT RAISE(ABORT, 'history is only added to'); END;
CREATE TRIGGER foundry_events_no_replace BEFORE INSERT ON foundry_events WHEN EXISTS (SELECT 1 FROM foundry_events WHERE id = NEW.id) BEGIN SELECT RAISE(ABORT, 'history is only added to'); END;
