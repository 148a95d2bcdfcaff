-- An entry is written once. REPLACE deletes without firing the triggers for
-- DELETE, so a second row in the place of another is refused before.
CREATE TRIGGER register_entry_update BEFORE UPDATE ON register_entry
BEGIN SELECT RAISE(ABORT, 'the register never changes an entry; add a correction'); END;
CREATE TRIGGER register_entry_delete BEFORE DELETE ON register_entry
BEGIN SELECT RAISE(ABORT, 'the register never removes an entry; add a correction'); END;
CREATE TRIGGER register_entry_insert BEFORE INSERT ON register_entry
WHEN EXISTS (SELECT 1 FROM register_entry WHERE id = NEW.id)
  OR NEW.corrects <> 0 AND EXISTS (SELECT 1 FROM register_entry WHERE corrects = NEW.corrects)
BEGIN SELECT RAISE(ABORT, 'the register never replaces an entry; add a correction'); END;

CREATE TRIGGER register_file_update BEFORE UPDATE ON register_file
BEGIN SELECT RAISE(ABORT, 'the register never changes a file; add a correction'); END;
CREATE TRIGGER register_file_delete BEFORE DELETE ON register_file
BEGIN SELECT RAISE(ABORT, 'the register never removes a file; add a correction'); END;
CREATE TRIGGER register_file_insert BEFORE INSERT ON register_file
WHEN EXISTS (SELECT 1 FROM register_file WHERE entry = NEW.entry)
BEGIN SELECT RAISE(ABORT, 'the register never replaces a file; add a correction'); END;

CREATE TRIGGER register_value_update BEFORE UPDATE ON register_value
BEGIN SELECT RAISE(ABORT, 'the register never changes a value; add a correction'); END;
CREATE TRIGGER register_value_delete BEFORE DELETE ON register_value
BEGIN SELECT RAISE(ABORT, 'the register never removes a value; add a correction'); END;
CREATE TRIGGER register_value_insert BEFORE INSERT ON register_value
WHEN EXISTS (SELECT 1 FROM register_value WHERE entry = NEW.entry AND position = NEW.position)
BEGIN SELECT RAISE(ABORT, 'the register never replaces a value; add a correction'); END;
