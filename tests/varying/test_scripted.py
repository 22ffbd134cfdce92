"""Functions of the user's own scripts, and what is said where they fail."""

import numpy as np
import pytest

from membrane.errors import PluginError
from membrane.varying.scripted import from_script

SCRIPT = """
import numpy as np
scale = 2.0
def density(x, y):
    return scale * x + y
def constant(x, y):
    return 3.0
def short(x, y):
    return x[:-1]
def broken(x, y):
    return 1 / 0
"""


@pytest.fixture
def file(tmp_path):
    path = tmp_path / "fields.py"
    path.write_text(SCRIPT)
    return path


def test_values(file):
    x, y = np.arange(3.0), np.ones(3)
    assert from_script(file, "density")(x, y).tolist() == [1.0, 3.0, 5.0]
    assert from_script(file, "constant")(x, y).tolist() == [3.0, 3.0, 3.0]


def test_unknown_functions(file):
    with pytest.raises(ValueError, match='no function "dens"; did you mean "density"'):
        from_script(file, "dens")
    with pytest.raises(ValueError, match="its functions are density, constant, short, broken"):
        from_script(file, "zzz")
    with pytest.raises(ValueError, match='no function "scale"'):
        from_script(file, "scale")


@pytest.mark.parametrize("name", ["short", "broken"])
def test_functions_that_fail(file, name):
    with pytest.raises(PluginError, match=f"The function {name} of .* fails .* the same shape"):
        from_script(file, name)(np.arange(3.0), np.ones(3))


def test_scripts_that_fail(tmp_path):
    (tmp_path / "bad.py").write_text("1 / 0")
    with pytest.raises(ValueError, match="ZeroDivisionError"):
        from_script(tmp_path / "bad.py", "density")
