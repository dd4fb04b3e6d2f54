#!/usr/bin/env bash
# Run once by the database container on an empty volume: the three roles of the house, and the
# database that the owner migrates. The application's role can change no evidence.
set -euo pipefail

psql -v ON_ERROR_STOP=1 --username "$POSTGRES_USER" --dbname postgres \
  -v owner="$RH_OWNER_PASSWORD" -v app="$RH_APP_PASSWORD" -v read="$RH_READ_PASSWORD" <<'SQL'
CREATE ROLE rh_owner LOGIN PASSWORD :'owner';
CREATE ROLE rh_app LOGIN PASSWORD :'app';
CREATE ROLE rh_read LOGIN PASSWORD :'read';
CREATE DATABASE ratehouse OWNER rh_owner ENCODING 'UTF8' LOCALE 'C.UTF-8' TEMPLATE template0;
REVOKE CONNECT ON DATABASE ratehouse FROM PUBLIC;
GRANT CONNECT ON DATABASE ratehouse TO rh_app, rh_read;
SQL
