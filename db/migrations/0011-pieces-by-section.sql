-- The list of works counts the pieces of the works it shows: without it, every piece ever cast is read.
CREATE INDEX pieces_section ON pieces (section_id);
