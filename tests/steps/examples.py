"""Checks every example of an OpenAPI document against its schema, with a general-purpose validator of that version, and so
that neither the examples nor the schemas, nulls included, say something else than the service.

    examples.py DOCUMENT
"""

import json
import sys

from openapi_schema_validator import OAS30Validator, OAS31Validator
from referencing import Registry, Resource
from referencing.jsonschema import DRAFT4, DRAFT202012

HERE = "urn:document"


def contents(document):
    """Every media type object with its place: of requests, answers, and answers shared by all."""
    for path, item in document["paths"].items():
        for method, operation in item.items():
            yield from media_types(f"{method} {path} request", operation.get("requestBody", {}))
            for status, answer in operation["responses"].items():
                yield from media_types(f"{method} {path} {status}", answer)
    for name, answer in document["components"]["responses"].items():
        yield from media_types(name, answer)


def media_types(place, holder):
    for media_type, content in holder.get("content", {}).items():
        yield f"{place} {media_type}", content


def examples(content):
    if "example" in content:
        yield "example", content["example"]
    for name, example in content.get("examples", {}).items():
        yield name, example["value"]


def within_document(schema):
    return {"$ref": HERE + schema["$ref"]} if "$ref" in schema else schema


def main(name):
    with open(name, encoding="utf-8") as file:
        document = json.load(file)
    is_older = document["openapi"].startswith("3.0")
    kind, dialect = (OAS30Validator, DRAFT4) if is_older else (OAS31Validator, DRAFT202012)
    registry = Registry().with_resource(HERE, Resource(contents=document, specification=dialect))
    checked = failed = 0
    for place, content in contents(document):
        for example, value in examples(content):
            checked += 1
            for error in kind(within_document(content["schema"]), registry=registry).iter_errors(value):
                failed += 1
                print(f"{place}, {example}, {error.json_path}: {error.message[:300]}")
    print(f"{document['openapi']}: {checked} examples against their schemas, {failed} faults")
    return 1 if failed or checked < 10 else 0


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
