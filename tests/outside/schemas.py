"""Validates files against the schemas that the program prints, with a validator and a TOML reader from outside.

Usage: schemas.py PROGRAM, in the folder of the repository. Prints every failure and a closing line; ends with 1 where anything
failed. Needs Python 3.11 (tomllib) and the package jsonschema (draft 2020-12).
"""

import datetime
import json
import pathlib
import subprocess
import sys
import tempfile
import tomllib

import jsonschema

# Findings that need nothing but the table of keys; a schema must refuse every file that has one of them.
OF_THE_KEYS = {"unknown-key", "wrong-unit", "wrong-kind", "unknown-word", "other-table", "below-a-table"}

failures = []
passed = 0


def check(what, good):
    global passed
    if good:
        passed += 1
    else:
        failures.append(what)


def plain(value):
    """Dates as JSON has them."""
    if isinstance(value, dict):
        return {key: plain(inner) for key, inner in value.items()}
    if isinstance(value, list):
        return [plain(inner) for inner in value]
    if isinstance(value, (datetime.date, datetime.time)):
        return value.isoformat()
    return value


def validator(program, name):
    schema = json.loads(subprocess.run([program, "guide", "--schema", name], check=True, capture_output=True).stdout)
    jsonschema.Draft202012Validator.check_schema(schema)
    return jsonschema.Draft202012Validator(schema)


def read(path):
    return plain(tomllib.loads(path.read_text(encoding="utf-8")))


def expected_codes(path):
    lines = path.read_bytes().decode("utf-8", "replace").splitlines()
    return {line.split()[2] for line in lines if line.startswith("#! ") and len(line.split()) > 2}


def good_files(program, folder):
    subprocess.run([program, "start", folder], check=True, capture_output=True)
    demos = list(pathlib.Path("demo-devices").glob("*/*.toml"))
    return demos + [*pathlib.Path("tests/good").glob("*.toml"), *pathlib.Path(folder).glob("*.toml")]


def main(program):
    validators = {name: validator(program, name) for name in ("device", "cooldown")}
    with tempfile.TemporaryDirectory() as folder:
        good = good_files(program, folder)
        check("enough good files", len(good) >= 10)
        for path in good:
            kind = "cooldown" if path.name.startswith("cooldown") else "device"
            errors = [error.message for error in validators[kind].iter_errors(read(path))]
            check(f"{path} passes the {kind} schema: {errors[:3]}", not errors)
            other = "device" if kind == "cooldown" else "cooldown"
            check(f"{path} is refused by the {other} schema", not validators[other].is_valid(read(path)))
    refused = 0
    for path in sorted(pathlib.Path("tests/bad").glob("*.toml")):
        if not expected_codes(path) & OF_THE_KEYS:
            continue
        try:
            value = read(path)
        except (tomllib.TOMLDecodeError, UnicodeDecodeError):
            continue  # no TOML at all: the editor says so without a schema
        kind = "cooldown" if path.name.startswith("cooldown") else "device"
        check(f"{path} is refused by the {kind} schema", not validators[kind].is_valid(value))
        refused += 1
    check("enough bad files", refused >= 15)
    for failure in failures:
        print("FAILED:", failure, file=sys.stderr)
    print(f"schemas: {passed} passed, {len(failures)} failed")
    return 1 if failures else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1]))
