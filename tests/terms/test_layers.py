"""A later patch lies over an earlier one."""

from tests import zoo

BASE = {"name": "base", "shape": "disc", "diameter": 1.0}
TOP = {"name": "top", "shape": "disc", "diameter": 0.5}


def density(*patches):
    from membrane.records.membrane import Field

    with zoo.drawn({**zoo.DISC, "patches": list(patches)}) as (_, _, outline, membrane):
        return {
            region.name: float(membrane.total(Field.AREAL_DENSITY, region.name))
            for region in outline.regions
        }


def test_added_densities_pile_up():
    found = density({**BASE, "added_density": 2.0}, {**TOP, "added_density": 5.0})
    assert found == {"head": 1.0, "base": 3.0, "base+top": 8.0}


def test_a_replacing_patch_hides_what_lies_below():
    found = density({**BASE, "added_density": 2.0}, {**TOP, "areal_density": 5.0})
    assert found == {"head": 1.0, "base": 3.0, "base+top": 5.0}


def test_adding_on_top_of_a_replacing_patch():
    found = density({**BASE, "areal_density": 4.0}, {**TOP, "added_density": 5.0})
    assert found == {"head": 1.0, "base": 4.0, "base+top": 9.0}


def test_of_two_replacing_patches_the_later_rules():
    found = density({**BASE, "areal_density": 4.0}, {**TOP, "areal_density": 5.0})
    assert found == {"head": 1.0, "base": 4.0, "base+top": 5.0}
