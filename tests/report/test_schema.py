"""The documents of `check` validate against the JSON Schema that ships with the package."""

from __future__ import annotations

import json

import jsonschema
import numpy as np
import pytest

from tensorsym.crystal.read import read
from tensorsym.report.check_json import check_document
from tensorsym.tasks.check import check_tensor, file_axes
from tensorsym.tasks.check_file import CheckReport, check_file
from tests.conftest import ROOT

SCHEMA = json.loads((ROOT / "tensorsym" / "report" / "schemas" / "check-1.json").read_text(encoding="utf-8"))
OUTPUTS = [path for path in sorted((ROOT / "tests" / "data" / "outputs").iterdir()) if "OUTCAR.quartz" in path.name]


def validated(document):
    """Validate a document as scripts receive it, after a round through text."""
    jsonschema.validate(json.loads(json.dumps(document)), SCHEMA)
    return document


@pytest.mark.parametrize("path", OUTPUTS, ids=lambda path: path.name)
def test_documents_of_real_outputs_validate(path):
    """The document of a real output obeys the schema."""
    assert validated(check_document(check_file(path)))["tensors"]


def test_document_with_explanations_validates():
    """The document of an inconsistent tensor, with explanations and broken operations, obeys the schema."""
    crystal = read(ROOT / "structures" / "quartz-p3121.cif")
    verdict = check_tensor(crystal, np.arange(18.0).reshape(3, 6), "piezoelectric")
    report = CheckReport(crystal, "made up", "array", file_axes(crystal), (verdict,), ())
    tensor = validated(check_document(report))["tensors"][0]

    assert tensor["explanations"]
    assert tensor["broken"]


def test_schema_refuses_a_wrong_document():
    """A document without a verdict is refused, so the schema does say something."""
    document = check_document(check_file(OUTPUTS[0]))
    del document["verdict"]

    with pytest.raises(jsonschema.ValidationError, match="verdict"):
        validated(document)
