-- Sessions long over are taken away; when somebody last signed in is worth keeping.
ALTER TABLE members ADD COLUMN last_signed_in_at INTEGER CHECK (last_signed_in_at > 0);
UPDATE members SET last_signed_in_at = (SELECT MAX(created_at) FROM sessions WHERE member_id = members.id);
