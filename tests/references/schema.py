"""Validates setup files against the JSON Schema of the tool, with a library that knows draft 07.

Usage: schema.py SCHEMA FILE...; prints {"schema": problem or null, "files": {FILE: [problems]}} as JSON.
Files are read by the standard library's own TOML reader; dates become the strings that JSON has for them.
"""

import datetime
import json
import sys
import tomllib

import jsonschema


def plain(value):
    if isinstance(value, dict):
        return {key: plain(inner) for key, inner in value.items()}
    if isinstance(value, list):
        return [plain(inner) for inner in value]
    if isinstance(value, (datetime.date, datetime.time)):
        return value.isoformat()
    return value


def main():
    with open(sys.argv[1], encoding="utf-8") as file:
        schema = json.load(file)
    try:
        jsonschema.Draft7Validator.check_schema(schema)
        problem = None
    except jsonschema.SchemaError as error:
        problem = error.message
    validator = jsonschema.Draft7Validator(schema)
    files = {}
    for name in sys.argv[2:]:
        with open(name, "rb") as file:
            document = plain(tomllib.load(file))
        files[name] = [f"{error.json_path}: {error.message}" for error in validator.iter_errors(document)]
    print(json.dumps({"schema": problem, "files": files}))


main()
