-- +goose Up
-- The house. Owned by rh_owner; the program works as rh_app, which may insert evidence but never
-- change or remove it; rh_read may only look. Roots carry a UUIDv7 and a site, children hang on
-- their root by small numbers, and no sequence exists, so that sites can be joined without clashes.
CREATE SCHEMA IF NOT EXISTS rh;
SET LOCAL search_path = rh;

-- +goose StatementBegin
CREATE FUNCTION refuse() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is append-only', TG_TABLE_NAME USING ERRCODE = 'RH001';
END$$;
-- +goose StatementEnd

CREATE DOMAIN code AS text COLLATE "C"
  CONSTRAINT code_form CHECK (VALUE ~ '^[A-Z0-9][A-Z0-9._-]{0,39}$' AND VALUE <> 'NEW');

-- People and keys ------------------------------------------------------------------------------
CREATE TABLE setting (
  name  text PRIMARY KEY,
  value text NOT NULL
);
COMMENT ON TABLE setting IS 'site, epoch (new at restore), house title, address, time zone, demo mark';

CREATE TABLE account (
  id          uuid PRIMARY KEY,
  site        smallint NOT NULL,
  name        text COLLATE "C" NOT NULL,
  title       text NOT NULL,
  role        text NOT NULL,
  secret      text,
  language    text,
  made_at     timestamptz NOT NULL,
  disabled_at timestamptz,
  CONSTRAINT account_name_once UNIQUE (site, name),
  CONSTRAINT account_name_form CHECK (name ~ '^[a-z0-9][a-z0-9._-]{0,39}$'),
  CONSTRAINT account_role CHECK (role IN ('technician', 'lead', 'adjuster', 'manager')),
  CONSTRAINT account_language CHECK (language IN ('en', 'fr', 'de'))
);

CREATE TABLE session (
  hash    bytea PRIMARY KEY,
  account uuid NOT NULL REFERENCES account,
  made_at timestamptz NOT NULL,
  seen_at timestamptz NOT NULL,
  ends_at timestamptz NOT NULL
);
CREATE INDEX session_account ON session (account);
COMMENT ON COLUMN session.seen_at IS 'touched at most once a minute, so that reading pages writes little';

CREATE TABLE station (
  site    smallint NOT NULL,
  code    code NOT NULL,
  title   text NOT NULL,
  mapping text,
  PRIMARY KEY (site, code)
);

CREATE TABLE token (
  id         uuid PRIMARY KEY,
  hash       bytea NOT NULL,
  site       smallint NOT NULL,
  title      text NOT NULL,
  account    uuid NOT NULL REFERENCES account,
  scopes     text[] NOT NULL,
  station    code,
  made_at    timestamptz NOT NULL,
  ends_at    timestamptz,
  revoked_at timestamptz,
  CONSTRAINT token_hash_once UNIQUE (hash),
  FOREIGN KEY (site, station) REFERENCES station
);

-- Journal --------------------------------------------------------------------------------------
CREATE TABLE act (
  id     uuid PRIMARY KEY,
  site   smallint NOT NULL,
  at     timestamptz NOT NULL,
  actor  uuid NOT NULL,
  via    text NOT NULL,
  verb   text NOT NULL,
  batch  uuid,
  reason text,
  body   text NOT NULL
);
COMMENT ON COLUMN act.body IS 'the exact canonical JSON that is hashed: text, never jsonb, which reorders keys and rewrites numbers';
CREATE INDEX act_batch ON act (batch, at) WHERE batch IS NOT NULL;

CREATE TABLE to_seal (act uuid PRIMARY KEY);
COMMENT ON TABLE to_seal IS 'outbox: written with the act, emptied by the drain';

CREATE TABLE leaf (
  site smallint NOT NULL,
  n    bigint NOT NULL,
  act  uuid NOT NULL,
  hash bytea NOT NULL,
  PRIMARY KEY (site, n),
  CONSTRAINT leaf_act_once UNIQUE (act)
);

CREATE TABLE head (
  site      smallint NOT NULL,
  size      bigint NOT NULL,
  root      bytea NOT NULL,
  at        timestamptz NOT NULL,
  key_id    text NOT NULL,
  signature bytea NOT NULL,
  PRIMARY KEY (site, size)
);

-- What is tested, for whom, by which rules -----------------------------------------------------
CREATE TABLE programme (
  site    smallint NOT NULL,
  hash    bytea NOT NULL,
  code    text COLLATE "C" NOT NULL,
  version text NOT NULL,
  title   text NOT NULL,
  body    text NOT NULL,
  act     uuid NOT NULL REFERENCES act,
  PRIMARY KEY (site, hash),
  CONSTRAINT programme_version_once UNIQUE (site, code, version)
);

CREATE TABLE depositor (
  id       uuid PRIMARY KEY,
  site     smallint NOT NULL,
  code     code NOT NULL,
  title    text NOT NULL,
  address  text NOT NULL DEFAULT '',
  language text,
  act      uuid NOT NULL REFERENCES act,
  CONSTRAINT depositor_code_once UNIQUE (site, code)
);

CREATE TABLE calibre (
  id    uuid PRIMARY KEY,
  site  smallint NOT NULL,
  code  code NOT NULL,
  act   uuid NOT NULL REFERENCES act,
  CONSTRAINT calibre_code_once UNIQUE (site, code)
);

-- The card says what the bench must know; it is superseded by a next version, never edited.
CREATE TABLE calibre_card (
  calibre           uuid NOT NULL REFERENCES calibre,
  version           smallint NOT NULL,
  title             text NOT NULL,
  diameter_um       int,
  area_um2          bigint,
  winding_turns     smallint,
  winding_note      text,
  automatic         text NOT NULL DEFAULT 'none',
  seconds           text NOT NULL DEFAULT 'small',
  seconds_oclock    smallint,
  seconds_radius_um int,
  dial_hours        smallint NOT NULL DEFAULT 12,
  minute_hand       boolean NOT NULL DEFAULT true,
  beats_per_hour    int,
  stop_seconds      boolean NOT NULL DEFAULT false,
  crown_oclock      smallint NOT NULL DEFAULT 3,
  accessory         text,
  accessory_note    text,
  reserve_hours     smallint,
  organ             text,
  organ_step_milli  int,
  picture           bytea,
  act               uuid NOT NULL REFERENCES act,
  PRIMARY KEY (calibre, version),
  CONSTRAINT calibre_round_or_shaped CHECK (num_nonnulls(diameter_um, area_um2) = 1),
  CONSTRAINT calibre_automatic CHECK (automatic IN ('none', 'in', 'out')),
  CONSTRAINT calibre_seconds CHECK (seconds IN ('small', 'centre')),
  CONSTRAINT calibre_dial CHECK (dial_hours IN (12, 24)),
  CONSTRAINT calibre_crown CHECK (crown_oclock BETWEEN 1 AND 12)
);
COMMENT ON COLUMN calibre_card.area_um2 IS 'shaped movements only: the area of a round one is never computed (314 mm2 is a truncated pi x 10 mm squared)';

CREATE TABLE holder_type (
  site    smallint NOT NULL,
  code    code NOT NULL,
  title   text NOT NULL,
  rows    smallint NOT NULL,
  columns smallint NOT NULL,
  origin  text NOT NULL DEFAULT 'top_left',
  along   text NOT NULL DEFAULT 'rows',
  blocked smallint[] NOT NULL DEFAULT '{}',
  carries text NOT NULL DEFAULT 'movements',
  act     uuid NOT NULL REFERENCES act,
  PRIMARY KEY (site, code),
  CONSTRAINT holder_type_size CHECK (rows BETWEEN 1 AND 50 AND columns BETWEEN 1 AND 50),
  CONSTRAINT holder_type_origin CHECK (origin IN ('top_left', 'top_right', 'bottom_left', 'bottom_right')),
  CONSTRAINT holder_type_along CHECK (along IN ('rows', 'columns')),
  CONSTRAINT holder_type_carries CHECK (carries IN ('movements', 'holders'))
);

CREATE TABLE holder (
  id   uuid PRIMARY KEY,
  site smallint NOT NULL,
  code code NOT NULL,
  type code NOT NULL,
  act  uuid NOT NULL REFERENCES act,
  CONSTRAINT holder_code_once UNIQUE (site, code),
  FOREIGN KEY (site, type) REFERENCES holder_type
);

-- A strip lies in a rack, a rack in a chamber: each change is an event, the last one is true.
CREATE TABLE holder_move (
  holder  uuid NOT NULL REFERENCES holder,
  nth     smallint NOT NULL,
  at      timestamptz NOT NULL,
  inside  uuid REFERENCES holder,
  place   smallint,
  retired boolean NOT NULL DEFAULT false,
  act     uuid NOT NULL REFERENCES act,
  PRIMARY KEY (holder, nth),
  CONSTRAINT holder_move_whole CHECK (num_nonnulls(inside, place) IN (0, 2)),
  CONSTRAINT holder_move_nested_once CHECK (inside IS DISTINCT FROM holder)
);

CREATE TABLE batch (
  id             uuid PRIMARY KEY,
  site           smallint NOT NULL,
  code           code NOT NULL,
  programme      bytea NOT NULL,
  category       text NOT NULL,
  calibre        uuid REFERENCES calibre,
  depositor      uuid NOT NULL REFERENCES depositor,
  entry          text NOT NULL,
  starts_at      timestamptz NOT NULL,
  delivery_note  text,
  order_number   text,
  received_at    timestamptz,
  received_by    uuid REFERENCES account,
  condition      text,
  service        text,
  language       text,
  act            uuid NOT NULL REFERENCES act,
  CONSTRAINT batch_code_once UNIQUE (site, code),
  CONSTRAINT batch_entry CHECK (entry IN ('rate', 'state', 'hand', 'tap')),
  FOREIGN KEY (site, programme) REFERENCES programme
);
CREATE INDEX batch_started ON batch (starts_at);
COMMENT ON COLUMN batch.starts_at IS 'due instant of round 0';

CREATE TABLE step (
  batch uuid NOT NULL REFERENCES batch,
  step  smallint NOT NULL,
  day   smallint,
  act   uuid NOT NULL REFERENCES act,
  PRIMARY KEY (batch, step)
);
COMMENT ON TABLE step IS 'rounds as really run; day is the programme day the stretch before it serves (0 for the start), NULL when idle or superseded; a repeated phase appends steps';

CREATE TABLE movement (
  batch     uuid NOT NULL REFERENCES batch,
  no        smallint NOT NULL,
  serial    text COLLATE "C" NOT NULL,
  depositor uuid NOT NULL REFERENCES depositor,
  calibre   uuid REFERENCES calibre,
  attempt   smallint NOT NULL DEFAULT 1,
  reworked  boolean,
  PRIMARY KEY (batch, no),
  CONSTRAINT movement_serial_once UNIQUE (batch, serial),
  CONSTRAINT movement_attempt CHECK (attempt > 0)
);
CREATE INDEX movement_serial ON movement (serial text_pattern_ops);
CREATE INDEX movement_serial_end ON movement (reverse(serial) text_pattern_ops);
CREATE INDEX movement_identity ON movement (depositor, serial, calibre);
COMMENT ON COLUMN movement.depositor IS 'identity is (depositor, calibre, number); repeated from the batch so that one index answers';

CREATE TABLE place_move (
  batch  uuid NOT NULL,
  no     smallint NOT NULL,
  nth    smallint NOT NULL,
  at     timestamptz NOT NULL,
  holder uuid REFERENCES holder,
  place  smallint,
  act    uuid NOT NULL REFERENCES act,
  PRIMARY KEY (batch, no, nth),
  FOREIGN KEY (batch, no) REFERENCES movement,
  CONSTRAINT place_move_whole CHECK (num_nonnulls(holder, place) IN (0, 2))
);

-- Where each piece lies now: derived from place_move, kept so that one place never holds two.
CREATE TABLE place (
  holder uuid NOT NULL REFERENCES holder,
  place  smallint NOT NULL,
  batch  uuid NOT NULL,
  no     smallint NOT NULL,
  PRIMARY KEY (holder, place),
  CONSTRAINT place_one_each UNIQUE (batch, no),
  FOREIGN KEY (batch, no) REFERENCES movement
);

CREATE TABLE round_event (
  batch   uuid NOT NULL,
  step    smallint NOT NULL,
  nth     smallint NOT NULL,
  kind    text NOT NULL,
  at      timestamptz NOT NULL,
  by      uuid NOT NULL REFERENCES account,
  station code,
  body    text,
  act     uuid NOT NULL REFERENCES act,
  PRIMARY KEY (batch, step, nth),
  FOREIGN KEY (batch, step) REFERENCES step,
  CONSTRAINT round_event_kind CHECK (kind IN ('opened', 'closed', 'reopened'))
);

-- Evidence -------------------------------------------------------------------------------------
-- The key is the compare-and-swap: a writer who saw entry k inserts k+1; a second one collides.
CREATE TABLE reading (
  batch       uuid NOT NULL,
  no          smallint NOT NULL,
  step        smallint NOT NULL,
  kind        smallint NOT NULL,
  nth         smallint NOT NULL,
  id          uuid NOT NULL,
  value       int,
  code        smallint,
  typed       text NOT NULL,
  method      smallint NOT NULL,
  hand        int,
  turns       int,
  read_at     timestamptz NOT NULL,
  entered_at  timestamptz NOT NULL,
  read_by     uuid NOT NULL REFERENCES account,
  entered_by  uuid NOT NULL REFERENCES account,
  station     text,
  offset_ms   int,
  bound_ms    int,
  evidence    bytea,
  evidence_at text,
  flags       smallint NOT NULL DEFAULT 0,
  reason      text,
  act         uuid NOT NULL REFERENCES act,
  prev        smallint GENERATED ALWAYS AS (nullif(nth - 1, 0)::smallint) STORED,
  PRIMARY KEY (batch, no, step, kind, nth),
  CONSTRAINT reading_id_once UNIQUE (id),
  CONSTRAINT reading_kind CHECK (kind BETWEEN 1 AND 5),
  CONSTRAINT reading_method CHECK (method BETWEEN 1 AND 6),
  CONSTRAINT reading_value_or_code CHECK (num_nonnulls(value, code) = 1),
  CONSTRAINT reading_code CHECK (code BETWEEN 1 AND 5),
  CONSTRAINT reading_reason CHECK (kind > 3 OR (nth = 1) = (reason IS NULL)),
  CONSTRAINT reading_evidence CHECK (octet_length(evidence) = 32),
  CONSTRAINT reading_chain FOREIGN KEY (batch, no, step, kind, prev) REFERENCES reading
);
COMMENT ON COLUMN reading.kind IS '1 rate, 2 found, 3 left, 4 replicate, 5 late check';
COMMENT ON COLUMN reading.method IS '1 typed, 2 hand, 3 tap, 4 camera, 5 full time, 6 station';
COMMENT ON COLUMN reading.code IS '1 stopped, 2 hand, 3 unreadable, 4 not there, 5 dropped';
COMMENT ON TABLE reading IS 'no key to movement and step: series is locked and found first (a quarter of a save otherwise)';

CREATE TABLE look (
  id      uuid NOT NULL,
  nth     smallint NOT NULL,
  batch   uuid NOT NULL,
  no      smallint NOT NULL,
  step    smallint NOT NULL,
  kind    smallint NOT NULL,
  value   int NOT NULL,
  typed   text NOT NULL,
  finding text NOT NULL,
  at      timestamptz NOT NULL,
  by      uuid NOT NULL REFERENCES account,
  act     uuid NOT NULL REFERENCES act,
  PRIMARY KEY (id, nth)
);
CREATE INDEX look_step ON look (batch, step);
COMMENT ON TABLE look IS 'values typed while a second look was asked: all stay, none is a reading';

CREATE TABLE stray (
  id     uuid NOT NULL,
  hash   bytea NOT NULL,
  got_at timestamptz NOT NULL,
  sender uuid NOT NULL REFERENCES account,
  batch  text,
  raw    text NOT NULL,
  why    text NOT NULL,
  PRIMARY KEY (id, hash)
);
COMMENT ON TABLE stray IS 'authenticated but refused items: kept and shown, never dropped; the id is not used up';
CREATE INDEX stray_got ON stray (got_at);

CREATE TABLE round_grant (
  hash    bytea PRIMARY KEY,
  account uuid NOT NULL REFERENCES account,
  batch   uuid NOT NULL REFERENCES batch,
  step    smallint NOT NULL,
  station text,
  ends_at timestamptz NOT NULL
);

-- What pages read: arrays of one element a step, made at intake, written element by element.
CREATE TABLE series (
  batch     uuid NOT NULL,
  no        smallint NOT NULL,
  rate      int[] NOT NULL,
  found     int[] NOT NULL,
  as_left   int[] NOT NULL,
  at_s      int[] NOT NULL,
  code      smallint[] NOT NULL,
  rate_nth  smallint[] NOT NULL,
  found_nth smallint[] NOT NULL,
  left_nth  smallint[] NOT NULL,
  ended     smallint NOT NULL DEFAULT 0,
  PRIMARY KEY (batch, no),
  FOREIGN KEY (batch, no) REFERENCES movement,
  CONSTRAINT series_shape CHECK (
    array_lower(rate, 1) = 1 AND array_dims(rate) = array_dims(found) AND array_dims(rate) = array_dims(as_left)
    AND array_dims(rate) = array_dims(at_s) AND array_dims(rate) = array_dims(code)
    AND array_dims(rate) = array_dims(rate_nth) AND array_dims(rate) = array_dims(found_nth)
    AND array_dims(rate) = array_dims(left_nth))
) WITH (fillfactor = 70);
COMMENT ON COLUMN series.at_s IS 'instant of the found state, whole seconds after batch.starts_at';
COMMENT ON COLUMN series.ended IS '0 in trial, 1 rejected, 2 withdrawn, 3 void, 4 removed: the last row of ending';

CREATE TABLE ending (
  batch uuid NOT NULL,
  no    smallint NOT NULL,
  nth   smallint NOT NULL,
  kind  smallint NOT NULL,
  cause text NOT NULL,
  code  smallint,
  step  smallint,
  at    timestamptz NOT NULL,
  act   uuid NOT NULL REFERENCES act,
  PRIMARY KEY (batch, no, nth),
  FOREIGN KEY (batch, no) REFERENCES movement,
  CONSTRAINT ending_kind CHECK (kind BETWEEN 0 AND 4),
  CONSTRAINT ending_cause CHECK (cause <> '')
);
COMMENT ON COLUMN ending.kind IS '0 taken back, 1 rejected, 2 withdrawn, 3 void, 4 removed';

CREATE TABLE remark (
  id     uuid PRIMARY KEY,
  batch  uuid NOT NULL REFERENCES batch,
  no     smallint,
  holder uuid REFERENCES holder,
  step   smallint,
  kind   text NOT NULL,
  words  text NOT NULL,
  act    uuid NOT NULL REFERENCES act
);
CREATE INDEX remark_batch ON remark (batch);

CREATE TABLE remark_state (
  remark uuid NOT NULL REFERENCES remark,
  nth    smallint NOT NULL,
  state  text NOT NULL,
  words  text NOT NULL,
  at     timestamptz NOT NULL,
  act    uuid NOT NULL REFERENCES act,
  PRIMARY KEY (remark, nth),
  CONSTRAINT remark_state_word CHECK (state IN ('open', 'assessed', 'closed'))
);

-- Rooms with a climate -------------------------------------------------------------------------
CREATE TABLE chamber (
  id   uuid PRIMARY KEY,
  site smallint NOT NULL,
  code code NOT NULL,
  act  uuid NOT NULL REFERENCES act,
  CONSTRAINT chamber_code_once UNIQUE (site, code)
);

CREATE TABLE chamber_setting (
  chamber      uuid NOT NULL REFERENCES chamber,
  from_at      timestamptz NOT NULL,
  set_mc       int NOT NULL,
  tolerance_mc int NOT NULL,
  places       smallint NOT NULL,
  act          uuid NOT NULL REFERENCES act,
  PRIMARY KEY (chamber, from_at)
);

CREATE TABLE climate (
  chamber     uuid NOT NULL REFERENCES chamber,
  at          timestamptz NOT NULL,
  source      text NOT NULL,
  mc          int NOT NULL,
  rh_permille smallint,
  act         uuid NOT NULL REFERENCES act,
  PRIMARY KEY (chamber, at, source)
);

CREATE TABLE holder_place (
  holder   uuid NOT NULL REFERENCES holder,
  nth      smallint NOT NULL,
  from_at  timestamptz NOT NULL,
  chamber  uuid REFERENCES chamber,
  position text,
  act      uuid NOT NULL REFERENCES act,
  PRIMARY KEY (holder, nth)
);

-- Papers ---------------------------------------------------------------------------------------
CREATE TABLE signing_key (
  key_id     text PRIMARY KEY,
  site       smallint NOT NULL,
  public_jwk text NOT NULL,
  from_at    timestamptz NOT NULL
);

CREATE TABLE certificate (
  number   text COLLATE "C" PRIMARY KEY,
  site     smallint NOT NULL,
  batch    uuid NOT NULL,
  no       smallint NOT NULL,
  kind     text NOT NULL,
  record   text NOT NULL,
  hash     bytea NOT NULL,
  jws      text NOT NULL,
  key_id   text NOT NULL REFERENCES signing_key,
  replaces text REFERENCES certificate,
  at       timestamptz NOT NULL,
  act      uuid NOT NULL REFERENCES act,
  FOREIGN KEY (batch, no) REFERENCES movement,
  CONSTRAINT certificate_number_form CHECK (number ~ '^[A-Z0-9][A-Z0-9._-]{0,63}$'),
  CONSTRAINT certificate_kind CHECK (kind IN ('certificate', 'rejection')),
  CONSTRAINT certificate_replaced_once UNIQUE (replaces)
);
CREATE UNIQUE INDEX certificate_first_once ON certificate (batch, no) WHERE replaces IS NULL;
CREATE INDEX certificate_movement ON certificate (batch, no);

CREATE TABLE revocation (
  number text PRIMARY KEY REFERENCES certificate,
  reason text NOT NULL,
  at     timestamptz NOT NULL,
  act    uuid NOT NULL REFERENCES act
);

-- Machinery ------------------------------------------------------------------------------------
CREATE TABLE request (
  actor     uuid NOT NULL,
  key       text NOT NULL,
  route     text NOT NULL,
  body_hash bytea NOT NULL,
  status    smallint,
  answer    text,
  at        timestamptz NOT NULL,
  PRIMARY KEY (actor, key)
);

CREATE TABLE job (
  id         uuid PRIMARY KEY,
  kind       text NOT NULL,
  args       text NOT NULL,
  upload     bytea,
  done       int NOT NULL DEFAULT 0,
  total      int,
  cursor     text,
  state      text NOT NULL,
  stop_asked boolean NOT NULL DEFAULT false,
  beat_at    timestamptz,
  owner      uuid NOT NULL REFERENCES account,
  result     text,
  CONSTRAINT job_state CHECK (state IN ('waiting', 'running', 'done', 'failed', 'stopped'))
);

-- Derived and disposable: made by the drain, rebuilt at will, never evidence, never on a paper.
CREATE TABLE batch_summary (
  batch    uuid NOT NULL,
  engine   text NOT NULL,
  counts   int[] NOT NULL,
  failed   int[] NOT NULL,
  alone    int[] NOT NULL,
  read     int[] NOT NULL,
  cannot   int NOT NULL,
  prior    bytea NOT NULL DEFAULT '',
  made_at  timestamptz NOT NULL,
  stale    boolean NOT NULL,
  PRIMARY KEY (batch, engine)
);
COMMENT ON COLUMN batch_summary.prior IS 'the batch as a history for others: counts, sums and products of its rates (trial.Prior.Bytes); empty while it is not made';
COMMENT ON COLUMN batch_summary.counts IS 'pass, fail, open by the rates; rejected, withdrawn, void, removed by their end';

-- Append-only, twice: no right to change, and a trigger for whoever has the right ----------------
-- +goose StatementBegin
DO $$
DECLARE t text;
BEGIN
  FOREACH t IN ARRAY '{act,leaf,head,programme,depositor,calibre,calibre_card,holder_type,holder,holder_move,batch,step,
    movement,place_move,round_event,reading,look,stray,ending,remark,remark_state,chamber,chamber_setting,climate,
    holder_place,signing_key,certificate,revocation}'::text[] LOOP
    EXECUTE format('CREATE TRIGGER %1$s_append_only BEFORE UPDATE OR DELETE ON %1$I FOR EACH ROW EXECUTE FUNCTION refuse()', t);
    EXECUTE format('CREATE TRIGGER %1$s_no_truncate BEFORE TRUNCATE ON %1$I EXECUTE FUNCTION refuse()', t);
  END LOOP;
END$$;
-- +goose StatementEnd

GRANT USAGE ON SCHEMA rh TO rh_app, rh_read;
GRANT SELECT, INSERT ON ALL TABLES IN SCHEMA rh TO rh_app;
GRANT UPDATE (rate, found, as_left, at_s, code, rate_nth, found_nth, left_nth, ended) ON series TO rh_app;
GRANT UPDATE (title, role, secret, language, disabled_at) ON account TO rh_app;
GRANT UPDATE (revoked_at) ON token TO rh_app;
GRANT UPDATE, DELETE ON session, request, job, batch_summary, setting, place TO rh_app;
GRANT DELETE ON to_seal, round_grant TO rh_app;
GRANT SELECT ON ALL TABLES IN SCHEMA rh TO rh_read;
REVOKE SELECT ON setting, account, session, token, round_grant, request, job FROM rh_read;
