"""An outside package, built and installed, brings a plugin of each kind that a run uses."""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest

TESTS = Path(__file__).parents[1]

KEYS = {
    "outline": {"shape": "lens", "width": "40 cm", "height": "30 cm"},
    "edges": {"upper": {"support": "fixed"}, "lower": {"support": "free"}},
    "head": {"areal_density": 0.25, "tension": "3 kN/m"},
    "modes": {"count": 4, "accuracy": "1 cent", "eigensolver": "lapack"},
    "terms": {"sand": {"density": "0.75 kg/m^2"}},
    "products": {"write": ["whistle"], "whistle": {"octaves": 2}},
}

CODE = """
import json, sys
from pathlib import Path
from membrane import plugins, run, study_from, write
keys, folder = json.loads(sys.argv[1]), Path(sys.argv[2])
lapack = plugins.load("eigensolver", "lapack")
spectrum = run(study_from(keys))
assert lapack.calls > 0, "the outside eigensolver was not used"
write(spectrum, folder)
print(json.dumps(list(spectrum.frequencies)))
"""

CONTRACTS = """
import sys
from pathlib import Path
from types import SimpleNamespace
import numpy as np
from membrane import plugins
from membrane.kernel import Kernel
from membrane.plugins.contracts import *
from membrane.records.outline import Outline, Region

lens, sand, lapack, whistle = (plugins.load(kind, name) for kind, name in (
    ("outline", "lens"), ("term", "sand"), ("eigensolver", "lapack"), ("product", "whistle")))
with Kernel.session() as kernel:
    check_outline(lens, lens.Options(0.4, 0.3), kernel)
outline = Outline((Region("head", (), (1,), 1.0),), ())
check_term(sand, None, sand.Options(0.1), outline)
check_eigensolver(lapack)
spectrum = SimpleNamespace(frequencies=np.ones(2), modes=SimpleNamespace(vectors=np.ones((3, 2))))
check_product(whistle, spectrum, Path(sys.argv[1]))
"""

pytestmark = pytest.mark.slow


@pytest.fixture(scope="module")
def installed(tmp_path_factory) -> Path:
    """A folder into which pip has built and installed the package."""
    work = tmp_path_factory.mktemp("outside")
    source = shutil.copytree(TESTS / "outside_plugins", work / "source")  # pip builds in there
    pip = [sys.executable, "-m", "pip", "install", "--quiet", "--disable-pip-version-check"]
    options = ["--no-index", "--no-build-isolation", "--no-deps", "--target", str(work / "site")]
    subprocess.run([*pip, *options, str(source)], check=True)
    return work / "site"


def python(site: Path, *words: object) -> str:
    """What a fresh Python prints that sees the package; it must print no error."""
    path = os.pathsep.join([str(site), str(TESTS.parent)])
    done = subprocess.run(
        [sys.executable, *map(str, words)],
        env={**os.environ, "PYTHONPATH": path},
        capture_output=True,
        text=True,
    )
    assert (done.returncode, done.stderr) == (0, "")
    return done.stdout


def frequencies(site: Path, keys: dict, folder: Path):
    folder.mkdir()
    return np.array(json.loads(python(site, "-c", CODE, json.dumps(keys), folder)))


def test_all_four_are_listed_with_their_package(installed):
    rows = [
        line.split()[:3] for line in python(installed, "-m", "membrane", "plugins").splitlines()
    ]
    for kind, name in (
        ("outline", "lens"),
        ("term", "sand"),
        ("eigensolver", "lapack"),
        ("product", "whistle"),
    ):
        assert [kind, name, "drum-extras"] in rows


def test_all_four_keep_their_contracts(installed, tmp_path):
    python(installed, "-c", CONTRACTS, tmp_path)


def test_all_four_are_used(installed, tmp_path):
    """Sand evenly spread lowers every frequency by the root of the ratio of densities."""
    loaded = frequencies(installed, KEYS, tmp_path / "loaded")
    bare_keys = {key: value for key, value in KEYS.items() if key != "terms"}
    bare = frequencies(installed, bare_keys, tmp_path / "bare")
    assert loaded.shape == bare.shape == (4,)
    assert np.abs(bare / loaded / np.sqrt((0.25 + 0.75) / 0.25) - 1.0).max() < 1e-9
    whistled = np.loadtxt(tmp_path / "loaded" / "whistle.txt")
    assert np.array_equal(whistled, 4.0 * loaded)


def test_its_checks_speak_with_its_own_words(installed, tmp_path):
    file = tmp_path / "drum.toml"
    file.write_text(
        '[outline]\nshape = "lens"\nwidth = 1\nheight = 2\n'
        "[head]\nareal_density = 1\ntension = 1\n[terms.sand]\ndensity = 1\ngrain = 1\n"
    )
    done = subprocess.run(
        [sys.executable, "-m", "membrane", "check", str(file)],
        env={**os.environ, "PYTHONPATH": os.pathsep.join([str(installed), str(TESTS.parent)])},
        capture_output=True,
        text=True,
    )
    assert done.returncode == 2
    assert done.stderr.splitlines() == [
        f"{file}: outline: a lens must be wider than it is high.",
        f"{file}: terms.sand.grain: unknown key; known here are density.",
    ]
