"""Results as text and as a picture."""

from scripts.benchmarks.picture import draw
from scripts.benchmarks.results import report
from scripts.benchmarks.tables import table_text

POINT = {"head": "disc", "modes": 20, "contestant": "one", "error": 1e-6, "CPU, s": 0.5}


def test_columns_are_those_of_all_rows():
    lines = table_text([{"a": 1, "b": 0.12345}, {"a": "none", "c": 2}]).splitlines()
    assert [line.count("|") for line in lines] == [4] * 4
    assert "0.123" in lines[2]
    assert [cell.strip() for cell in lines[3].split("|")] == ["", "none", "", "2", ""]


def test_report_names_machine_and_versions():
    entry = {"date": "2000-01-01", "machine": "a loom", "versions": {"yarn": "1.2"}}
    text = report({"whole": {**entry, "tables": {"rows": [{"a": 1}], "curves": [POINT]}}})
    assert "2000-01-01, a loom; yarn 1.2." in text
    assert "contestant" not in text


def test_picture(tmp_path):
    draw([POINT, {**POINT, "contestant": "other", "head": "L-shape"}], tmp_path / "curves.svg")
    assert "<svg" in (tmp_path / "curves.svg").read_text()
