"""Demands beside those that the tester brings along, and how it writes and reads lines of JSON."""

import json

import schemathesis

LINES = "application/x-ndjson"

# The codes of `ShapeCode` in src/api/error_code.rs: what a schema can say.
SHAPE = {
    "wrong_type",
    "null_not_allowed",
    "missing_member",
    "unknown_member",
    "unknown_unit",
    "unknown_value",
    "invalid_value",
}


@schemathesis.check
def what_the_schema_allows_is_not_refused_for_its_shape(context, response, case):
    """A body made by the published schema can only be wrong in what the schema cannot say."""
    if response.status_code != 422 or case.meta is None or not case.meta.generation.mode.is_positive:
        return
    refused = [error for error in response.json()["errors"] if error["code"] in SHAPE]
    assert not refused, f"the schema allows what is refused: {refused}"


@schemathesis.check
def a_refusal_says_where(context, response, case):
    """Every fault of a body has its place."""
    if response.status_code != 422:
        return
    problem = response.json()
    assert problem["errors"], "refused without a reason"
    assert problem["error_count"] >= len(problem["errors"])
    assert all(error["pointer"].startswith("#") for error in problem["errors"])


@schemathesis.serializer(LINES)
def one_line(context, value):
    """A stream of one request."""
    return value if isinstance(value, bytes) else json.dumps(value).encode() + b"\n"


@schemathesis.deserializer(LINES)
def first_line(context, response):
    """The answer to it; the description tells what a line is."""
    return json.loads(response.content.splitlines()[0])


@schemathesis.check
def a_wrong_part_is_rejected_by_itself(context, response, case):
    """Where a wrong line or candidate does not disturb the others, it must still not be taken."""
    if response.status_code != 200 or case.meta is None or not case.meta.generation.mode.is_negative:
        return
    if "body" not in {component.value for component in case.meta.components}:
        return
    if case.path == "/v1/spec-checks":
        end = json.loads(response.content.splitlines()[-1])["end"]
        assert end["rejected"] == end["lines"], f"a wrong line was taken: {end}"
    if case.path == "/v1/selection":
        assert response.json()["results"]["rejected"], "a wrong candidate was taken"
