"""Validates records against the project's JSON Schemas with jsonschema, which nobody here wrote.

usage: validate.py SCHEMA_FOLDER < lines of {"schema": NAME, "record": ...}
Exit status 77: the library is not there. Every schema is itself checked against the 2020-12 meta-schema.
"""

import json
import pathlib
import sys

try:
    import jsonschema
except ImportError:
    sys.exit(77)

folder = pathlib.Path(sys.argv[1])
schemas = {path.name: json.loads(path.read_text(encoding="utf-8")) for path in sorted(folder.glob("*.schema.json"))}
for name, schema in schemas.items():
    assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema", name
    jsonschema.Draft202012Validator.check_schema(schema)
store = {schema["$id"]: schema for schema in schemas.values()}

failed = 0
count = 0
for line in sys.stdin:
    entry = json.loads(line)
    schema = schemas[entry["schema"]]
    resolver = jsonschema.RefResolver(schema["$id"], schema, store=store)
    validator = jsonschema.Draft202012Validator(schema, resolver=resolver)
    for error in validator.iter_errors(entry["record"]):
        print(f"record {count} against {entry['schema']}: {'/'.join(map(str, error.absolute_path))}: {error.message[:300]}")
        failed += 1
    count += 1
print(f"{count} records against {len(schemas)} schemas, {failed} faults")
sys.exit(1 if failed or not count else 0)
