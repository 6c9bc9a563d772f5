CREATE FUNCTION padproof_record_refuse() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
    RAISE EXCEPTION 'a record cannot be changed or taken out: a retest is a new record';
END $$;
CREATE TRIGGER padproof_record_no_change BEFORE UPDATE OR DELETE ON padproof_record
FOR EACH ROW EXECUTE FUNCTION padproof_record_refuse();
CREATE TRIGGER padproof_record_no_truncate BEFORE TRUNCATE ON padproof_record
FOR EACH STATEMENT EXECUTE FUNCTION padproof_record_refuse();
CREATE FUNCTION padproof_record_next() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
    IF NEW.sequence <> 1 AND NOT EXISTS
       (SELECT 1 FROM padproof_record WHERE station = NEW.station AND sequence = NEW.sequence - 1) THEN
        RAISE EXCEPTION 'a record stands behind the last one of its station, and nowhere else';
    END IF;
    RETURN NEW;
END $$;
CREATE TRIGGER padproof_record_next BEFORE INSERT ON padproof_record
FOR EACH ROW EXECUTE FUNCTION padproof_record_next();
