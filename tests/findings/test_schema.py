import json

import jsonschema
import pytest

from rcrules.findings import dumps, schema_text
from tests.reports._sample import DOCUMENT


@pytest.fixture
def validator() -> jsonschema.Draft202012Validator:
    schema = json.loads(schema_text())
    jsonschema.Draft202012Validator.check_schema(schema)
    return jsonschema.Draft202012Validator(schema)


def test_a_saved_document_is_valid(validator: jsonschema.Draft202012Validator) -> None:
    errors = [f"{list(error.path)}: {error.message}" for error in validator.iter_errors(json.loads(dumps(DOCUMENT)))]
    assert errors == []


@pytest.mark.parametrize("key", sorted(json.loads(dumps(DOCUMENT))))
def test_no_key_may_be_missing(validator: jsonschema.Draft202012Validator, key: str) -> None:
    document = json.loads(dumps(DOCUMENT))
    del document[key]
    assert not validator.is_valid(document)


@pytest.mark.parametrize("key", sorted(json.loads(dumps(DOCUMENT))["findings"][0]))
def test_no_key_of_a_finding_may_be_missing(validator: jsonschema.Draft202012Validator, key: str) -> None:
    document = json.loads(dumps(DOCUMENT))
    del document["findings"][0][key]
    assert not validator.is_valid(document)


def test_an_unknown_key_is_not_valid(validator: jsonschema.Draft202012Validator) -> None:
    document = json.loads(dumps(DOCUMENT))
    document["findings"][0]["verdict"] = "fails"
    assert not validator.is_valid(document)


def test_an_unknown_outcome_is_not_valid(validator: jsonschema.Draft202012Validator) -> None:
    document = json.loads(dumps(DOCUMENT))
    document["findings"][0]["outcome"] = "passes"
    assert not validator.is_valid(document)
