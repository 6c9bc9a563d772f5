CREATE TABLE padproof_record (
    station     @TEXT@    NOT NULL,
    sequence    BIGINT  NOT NULL,
    hash        @TEXT@    NOT NULL,
    at_us       BIGINT  NOT NULL,
    kind        @TEXT@    NOT NULL,
    verdict     @TEXT@    NOT NULL,
    unit        @TEXT@    NOT NULL,
    lot         @TEXT@    NOT NULL,
    drawing     @TEXT@    NOT NULL,
    sheet       @TEXT@    NOT NULL,
    operator    @TEXT@    NOT NULL,
    simulated   BIGINT  NOT NULL,
    takes       @TEXT@    NOT NULL,
    body        @BYTES@ NOT NULL,
    PRIMARY KEY (station, sequence)
);
CREATE INDEX padproof_record_at      ON padproof_record (at_us, station, sequence);
CREATE INDEX padproof_record_unit    ON padproof_record (unit, at_us, station, sequence);
CREATE INDEX padproof_record_lot     ON padproof_record (lot, verdict, at_us, station, sequence);
CREATE INDEX padproof_record_drawing ON padproof_record (drawing, verdict, at_us, station, sequence);
CREATE INDEX padproof_record_station ON padproof_record (station, verdict, at_us, sequence, drawing);
CREATE INDEX padproof_record_kind    ON padproof_record (kind, verdict, at_us, station, sequence);
CREATE INDEX padproof_record_verdict ON padproof_record (verdict, at_us, station, sequence);
CREATE INDEX padproof_record_takes   ON padproof_record (takes, at_us, station, sequence);
