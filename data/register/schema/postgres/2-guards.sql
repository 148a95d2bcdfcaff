-- An entry is written once.
CREATE FUNCTION register_refuse() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
	RAISE EXCEPTION 'the register never changes or removes an entry; add a correction';
END $$;

CREATE TRIGGER register_entry_guard BEFORE UPDATE OR DELETE OR TRUNCATE ON register_entry
FOR EACH STATEMENT EXECUTE FUNCTION register_refuse();
CREATE TRIGGER register_file_guard BEFORE UPDATE OR DELETE OR TRUNCATE ON register_file
FOR EACH STATEMENT EXECUTE FUNCTION register_refuse();
CREATE TRIGGER register_value_guard BEFORE UPDATE OR DELETE OR TRUNCATE ON register_value
FOR EACH STATEMENT EXECUTE FUNCTION register_refuse();
