"""A wrong study says, in exactly these sentences, all that is wrong with it."""

from __future__ import annotations

from pathlib import Path

import pytest

from membrane.errors import NotAvailableYet, StudyError
from membrane.study import read_study

SOUND = {
    "@outline": '[outline]\nshape = "disc"\ndiameter = "356 mm"',
    "@head": '[head]\nareal_density = "0.262 kg/m^2"\ntension = "3 kN/m"',
}
ARROW = "-> "


def cases() -> dict[str, tuple[str, list[str]]]:
    """Name -> the study file's text and what is said about it."""
    text = (Path(__file__).parent / "wrong" / "studies.txt").read_text()
    return dict(map(case, text.split("\n## ")[1:]))


def case(block: str) -> tuple[str, tuple[str, list[str]]]:
    name, *lines = block.splitlines()
    study = [SOUND.get(line, line) for line in lines if not line.startswith(ARROW)]
    said = [line.removeprefix(ARROW) for line in lines if line.startswith(ARROW)]
    return name, ("\n".join([*study, ""]), said)


CASES = cases()


def complaint(folder: Path, text: str) -> StudyError:
    file = folder / "study.toml"
    file.write_text(text)
    with pytest.raises(StudyError) as caught:
        read_study(file)
    return caught.value


@pytest.mark.parametrize("name", CASES)
def test_wrong_study(name, tmp_path):
    text, said = CASES[name]
    error = complaint(tmp_path, text)
    found = [str(problem).replace(str(tmp_path), "FOLDER") for problem in error.problems]
    assert found == said
    not_yet = all("not available yet" in sentence for sentence in said)
    assert isinstance(error, NotAvailableYet) == not_yet


def test_there_are_many_cases_and_each_says_something():
    assert len(CASES) >= 45
    assert all(said for _, said in CASES.values())


@pytest.mark.parametrize("sentence", [s for _, said in CASES.values() for s in said])
def test_each_is_one_sentence(sentence):
    assert sentence.endswith((".", "?"))
    assert "\n" not in sentence
    assert ". " not in sentence


def test_a_file_that_is_not_there(tmp_path):
    with pytest.raises(StudyError, match="there is no such file"):
        read_study(tmp_path / "none.toml")


def test_a_folder_instead_of_a_file(tmp_path):
    with pytest.raises(StudyError, match="cannot be read"):
        read_study(tmp_path)


def test_a_file_that_is_no_text(tmp_path):
    file = tmp_path / "study.toml"
    file.write_bytes(b"\xff\xfe[outline]")
    with pytest.raises(StudyError, match="not UTF-8"):
        read_study(file)
