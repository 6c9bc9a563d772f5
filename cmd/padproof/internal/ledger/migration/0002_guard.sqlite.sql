CREATE TRIGGER padproof_record_no_update BEFORE UPDATE ON padproof_record
BEGIN SELECT RAISE(ABORT, 'a record cannot be changed: a retest is a new record'); END;
CREATE TRIGGER padproof_record_no_delete BEFORE DELETE ON padproof_record
BEGIN SELECT RAISE(ABORT, 'a record cannot be taken out'); END;
CREATE TRIGGER padproof_record_next BEFORE INSERT ON padproof_record
WHEN NEW.sequence <> 1 AND NOT EXISTS
    (SELECT 1 FROM padproof_record WHERE station = NEW.station AND sequence = NEW.sequence - 1)
  OR EXISTS (SELECT 1 FROM padproof_record WHERE station = NEW.station AND sequence = NEW.sequence)
BEGIN SELECT RAISE(ABORT, 'a record stands behind the last one of its station, and nowhere else'); END;
