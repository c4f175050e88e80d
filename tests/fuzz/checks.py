"""Demands beside those that the tester brings along."""

import schemathesis

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
