#!/usr/bin/env python3
"""Verifies a ledger's file from what doc.go says of it, with none of our code.

For each station, by rising sequence: the SHA-256 of the stored bytes is the stored hash, and
the body's own station, sequence and previous are what the chain demands. Also that the fields
stand in the documented order, with no white space between tokens. Prints STATION/SEQUENCE HASH
of each record, or what is wrong and exits with 1.
"""
import hashlib
import json
import re
import sqlite3
import sys

FIELDS = ["schema", "station", "sequence", "previous", "time", "kind", "verdict", "unit", "lot", "drawing",
          "operator", "tool", "simulated", "options", "files", "answer"]


def fail(text):
    print(text)
    sys.exit(1)


db = sqlite3.connect(sys.argv[1])
last = {}
for station, sequence, stored, body in db.execute(
        "SELECT station, sequence, hash, body FROM padproof_record ORDER BY station, sequence"):
    name = f"{station}/{sequence}"
    digest = hashlib.sha256(body).hexdigest()
    if digest != stored:
        fail(f"{name}: SHA-256 of the body is {digest}, stored is {stored}")
    record = json.loads(body.decode("utf-8"))
    if list(record) != FIELDS:
        fail(f"{name}: fields are {list(record)}")
    if re.search(rb'"(?:[^"\\]|\\.)*"|(\s)', body) and any(m.group(1) for m in re.finditer(rb'"(?:[^"\\]|\\.)*"|(\s)', body)):
        fail(f"{name}: white space between tokens")
    if not re.fullmatch(r"\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{6}Z", record["time"]):
        fail(f"{name}: time is {record['time']}")
    for f in record["files"]:
        if f["text"] and hashlib.sha256(f["text"].encode()).hexdigest() != f["sha256"]:
            fail(f"{name}: the sheet {f['file']} does not have its hash")
    want = (station, last.get(station, (0, ""))[0] + 1, last.get(station, (0, ""))[1])
    got = (record["station"], record["sequence"], record["previous"])
    if got != want or sequence != record["sequence"]:
        fail(f"{name}: is {got}, want {want}")
    last[station] = (sequence, digest)
    print(name, digest)
