#!/bin/sh
# A PostgreSQL server for the tests, on a folder and a unix socket of its own.
#   postgres.sh start FOLDER   makes the data in FOLDER/data and starts; the socket is in FOLDER
#   postgres.sh up FOLDER      starts again what was stopped
#   postgres.sh crash FOLDER   ends it at once, as a power cut would
#   postgres.sh stop FOLDER
# The user is postgres with the password "saltmarsh". Exit status 77: there is no PostgreSQL here.
set -eu
what=$1
folder=$2

bin=
for d in $(ls -d /usr/lib/postgresql/*/bin 2>/dev/null | sort -rV) $(pg_config --bindir 2>/dev/null || true) \
    "$(dirname "$(command -v pg_ctl || echo /nowhere/pg_ctl)")"; do
    if [ -x "$d/initdb" ] && [ -x "$d/pg_ctl" ]; then bin=$d; break; fi
done
[ -n "$bin" ] || { echo "no PostgreSQL server is installed"; exit 77; }

# The server will not run as root.
as() {
    if [ "$(id -u)" = 0 ]; then runuser -u postgres -- "$@"; else "$@"; fi
}

up() {
    as "$bin/pg_ctl" -D "$folder/data" -l "$folder/log" -w -t 60 \
        -o "-c listen_addresses='' -c unix_socket_directories='$folder' -c max_connections=100" start >/dev/null
}

case $what in
start)
    if [ "$(id -u)" = 0 ]; then
        id postgres >/dev/null 2>&1 || { echo "there is no user postgres to run a server as"; exit 77; }
        chown postgres "$folder"
    fi
    cd "$folder"
    echo saltmarsh >"$folder/password"
    chmod a+r "$folder/password"
    as "$bin/initdb" -D "$folder/data" -U postgres --auth=scram-sha-256 --pwfile="$folder/password" \
        --encoding=UTF8 --locale=C.UTF-8 >/dev/null
    up
    ;;
up) cd "$folder" && up ;;
crash) cd "$folder" && as "$bin/pg_ctl" -D "$folder/data" -m immediate -w stop >/dev/null ;;
stop) cd "$folder" && as "$bin/pg_ctl" -D "$folder/data" -m fast -w stop >/dev/null ;;
esac
