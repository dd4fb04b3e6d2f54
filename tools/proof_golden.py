#!/usr/bin/env python3
"""Write the golden records of testdata/proof, sharing no code with the program.

Needs the package `cryptography`. Run in the top folder of the project; it prints nothing and
rewrites the same bytes every time. Canonical form: every key is ASCII and every number a small
integer, so that sorted keys, no blanks and UTF-8 are all that RFC 8785 asks for.
"""
import base64, json, hashlib
from fractions import Fraction as F
from cryptography.hazmat.primitives import serialization as ser
from cryptography.hazmat.primitives.asymmetric.ed25519 import Ed25519PrivateKey

OUT = "testdata/proof/"
D, X = "nWGxne_9WmC6hEr0kuwsxERJxWl7MmkZcDusAxyuf2A", "11qYAYKxCrfVS_7TyWQHOg7hcvPapiMlrwIaaPcHURo"
POSITIONS = "6H 6H 3H 3H 9H 9H FH FH CH CH CH CH CH 6H 6H".split()
TEMPERATURES = [23] * 10 + [8, 23, 38, 23, 23]
CRITERIA = [  # symbol, title, unit, decimals, min, max, days, exact value
    ("M", "Mean daily rate", "s/d", 2, "-4", "6", range(1, 11), "201/100", "1/1"),
    ("V", "Mean variation", "s/d", 2, "0", "2", range(1, 11), "1/2", "0/1"),
    ("Vmax", "Greatest variation", "s/d", 1, "0", "5", range(1, 11), "7/10", "0/1"),
    ("D", "Difference 6H less CH", "s/d", 2, "-6", "8", (1, 2, 9, 10), "-19/20", "-7/1"),
    ("P", "Greatest deviation", "s/d", 2, "0", "10", range(1, 11), "231/100", "4/1"),
    ("C", "Rate variation with temperature", "s/d per °C", 3, "-0.6", "0.6", (11, 13), "-11/50", "1/15"),
    ("R", "Rate resumption", "s/d", 2, "-5", "5", (1, 2, 15), "1/2", "0/1"),
]
PASS = "1.2 1.6 0.4 -0.3 2.9 2.5 3.8 3.3 2.1 2.6 4.9 2.4 -1.7 1.5 1.9".split()
FAIL = "-3.0 -3.0 0.5 0.5 1.0 1.0 2.5 2.5 4.0 4.0 3.0 4.0 5.0 -3.0 -3.0".split()


def computed(rates):
    r = [None] + [F(x) for x in rates]
    v = [abs(r[k + 1] - r[k]) for k in range(1, 11, 2)]
    m = sum(r[1:11]) / 10
    return {"M": m, "V": sum(v) / 5, "Vmax": max(v), "D": (r[1] + r[2]) / 2 - (r[9] + r[10]) / 2,
            "P": max(abs(x - m) for x in r[1:11]), "C": (r[13] - r[11]) / 30, "R": r[15] - (r[1] + r[2]) / 2}


def decimal(x, places):  # Fraction's round is half to even
    n = round(x * 10**places)
    digits = str(abs(n)).rjust(places + 1, "0")
    return ("-" if n < 0 else "") + digits[:-places] + "." + digits[-places:]


def criterion(row, value):
    symbol, title, unit, places, low, high, *_ = row
    margin = min(value - F(low), F(high) - value)
    return {"symbol": symbol, "title": title, "unit": unit, "decimals": places,
            "value": f"{value.numerator}/{value.denominator}", "printed": decimal(value, places),
            "min": low, "max": high, "accept_min": None, "accept_max": None, "margin": decimal(margin, places),
            "verdict": "pass" if margin >= 0 else "fail", "definition": "iso3159." + symbol}


def day(n, rate):
    return {"day": n, "position": POSITIONS[n - 1], "temperature_c": str(TEMPERATURES[n - 1]), "accessory": False,
            "rate": rate, "enters": [c[0] for c in CRITERIA if n in c[6]]}


def reading(n, value, nth=1, reason="", superseded=False):
    return {"step": n, "day": n, "kind": "rate", "method": "typed", "value": value, "code": "", "typed": "+" + value if value[0] != "-" else "\u2212" + value[1:],
            "read_at": f"2026-11-{14 + n:02d}T07:{30 + nth:02d}:00Z", "read_by": "Ole Varnhagen", "entered_by": "Ole Varnhagen",
            "station": "A", "nth": nth, "reason": reason, "superseded": superseded}


def record(kind, number, serial, rates, which):
    exact = computed(rates)
    for row in CRITERIA:
        assert exact[row[0]] == F(row[which]), row[0]
    criteria = [criterion(row, exact[row[0]]) for row in CRITERIA]
    failed = [c["symbol"] for c in criteria if c["verdict"] == "fail"]
    readings = [reading(n, rate) for n, rate in enumerate(rates, 1)]
    wrong = reading(5, "12.9", superseded=True)
    readings[4:5] = [wrong, reading(5, rates[4], 2, "digit \u201c1\u201d typed by mistake")]
    return {
        "schema": "ratehouse-certificate-record", "schema_version": 1, "kind": kind, "number": number, "title": "rate_certificate",
        "replaces": "", "replace_reason": "", "demo": True, "language": "en", "time_zone": "Europe/Zurich", "issued_at": "2026-12-01T07:44:00.250Z",
        "laboratory": {"name": "Hollinfell Timing Laboratory", "address": ["4 Alder Row", "00417 Hollinfell"], "contact": "certificates@hollinfell.example"},
        "movement": {"serial": serial, "calibre": "OD 4410", "size": {"diameter_mm": "27.40", "area_mm2": None},
                     "category": {"code": "1", "title": "diameter above 20 mm"}, "depositor": {"code": "ONDREL", "title": "Ondrel Movements, Nürn & Søn"},
                     "attempt": 1, "state": ["uncased"]},
        "batch": "26-118", "received": {"at": "2026-11-12T09:00:00Z", "condition": "no damage seen", "delivery_note": "LS-2201", "order": ""},
        "trial": {"from": "2026-11-14T07:30:00Z", "to": "2026-11-29T07:31:00Z"},
        "programme": {"code": "iso3159", "version": "1", "title": "Fifteen-day trial in five positions",
                      "hash": hashlib.sha256(b"an invented programme for this golden record").hexdigest(),
                      "source": "published descriptions of the procedure", "measurand": "as_performed", "text_checked": None},
        "decision": {"rule": "simple", "guard": None, "words": "simple_inclusive"}, "engine": "golden",
        "days": [day(n, rate) for n, rate in enumerate(rates, 1)], "readings": readings, "criteria": criteria,
        "verdict": "fail" if failed else "pass", "failed": failed, "end": "", "end_cause": "",
        "remarks": [{"code": "read_late", "step": 9, "text": "read 71 min after its time"}],
        "uncertainty": {"reason": "not_stated", "k": None, "rate": None, "criteria": [], "not_applicable": []},
        "reference": {"text": "Laboratory clock, compared with national time every day", "code": ""},
        "conditions": {"code": "not_recorded", "chambers": []},
        "cautions": ["title_protected", "accreditation_decides", "this_piece_as_received", "published_descriptions"],
        "released_by": "Nadja Quill", "released_at": "2026-12-01T07:44:00Z", "journal_act": "019adb2c-7a10-7000-8000-000000000001",
        "verify_url": "https://verify.hollinfell.example/verify",
    }


def b64(raw):
    return base64.urlsafe_b64encode(raw).rstrip(b"=").decode()


def canonical(x):
    return json.dumps(x, sort_keys=True, separators=(",", ":"), ensure_ascii=False).encode()


def write(name, text):
    with open(OUT + name, "w", newline="\n") as f:
        f.write(text)


public = {"crv": "Ed25519", "kty": "OKP", "x": X}
key = Ed25519PrivateKey.from_private_bytes(base64.urlsafe_b64decode(D + "="))
kid = b64(hashlib.sha256(canonical(public)).digest())
for kind, number, serial, rates, which in [("certificate", "26-118-0113", "OD44-118313", PASS, 7),
                                           ("rejection", "26-118-R014", "OD44-118238", FAIL, 8)]:
    made = record(kind, number, serial, rates, which)
    signed = b64(canonical({"alg": "EdDSA", "kid": kid})) + "." + b64(canonical(made))
    write(kind + ".record.json", json.dumps(made, indent=1, ensure_ascii=False) + "\n")
    write(kind + ".jws", signed + "." + b64(key.sign(signed.encode())) + "\n")
write("published-key.private.jwk", json.dumps({**public, "d": D, "use": "tests only, printed in RFC 8037"}) + "\n")
write("published-key.public.jwk", json.dumps(public) + "\n")
write("published-key.private.pem", key.private_bytes(ser.Encoding.PEM, ser.PrivateFormat.PKCS8, ser.NoEncryption()).decode())
write("published-key.public.pem", key.public_key().public_bytes(ser.Encoding.PEM, ser.PublicFormat.SubjectPublicKeyInfo).decode())
