"""Beds, springs and masses stand under their own keys, and only where they are."""

from membrane.records.membrane import Field
from tests import zoo

HOLE = {"name": "port", "shape": "disc", "diameter": 0.3}


def contributions(keys):
    with zoo.drawn(keys) as (_, _, _, membrane):
        return membrane, {
            c.key: (c.field, c.where, c.scale)
            for c in membrane.contributions
            if c.field not in (Field.TENSION, Field.AREAL_DENSITY)
        }


def test_elastic_rim_with_mass_and_a_free_hole():
    rim = {"support": "elastic", "stiffness": 7.0, "mass": 0.2}
    hole = {**HOLE, "support": "free", "mass": 0.1}
    membrane, found = contributions({**zoo.DISC, "edges": {"rim": rim}, "holes": [hole]})
    assert found == {
        "edges.rim.stiffness": (Field.EDGE_STIFFNESS, ("rim",), 7.0),
        "edges.rim.mass": (Field.EDGE_MASS, ("rim",), 0.2),
        "edges.port.mass": (Field.EDGE_MASS, ("port",), 0.1),
    }
    assert membrane.fixed_edges == ()
    assert not membrane.moves_rigidly


def test_edges_not_mentioned_are_fixed():
    membrane, found = contributions({**zoo.DISC, "holes": [HOLE]})
    assert found == {}
    assert set(membrane.fixed_edges) == {"rim", "port"}


def test_bed_under_head_and_patch():
    patch = {"name": "pad", "shape": "disc", "diameter": 0.5, "bedding": 30.0}
    head = {**zoo.HEAD, "bedding": 10.0}
    _, found = contributions({**zoo.DISC, "head": head, "patches": [patch]})
    assert found == {
        "head.bedding": (Field.BEDDING, ("head",), 10.0),
        "patches.pad.bedding": (Field.BEDDING, ("pad",), 30.0),
    }


def test_a_free_head_moves_rigidly_until_something_holds_it():
    free = {**zoo.DISC, "edges": {"rim": {"support": "free"}}}
    assert contributions(free)[0].moves_rigidly
    assert not contributions({**free, "head": {**zoo.HEAD, "bedding": 1.0}})[0].moves_rigidly


def test_line_loads_stand_under_their_own_keys():
    wire = {"name": "wire", "shape": "polyline", "points": [[0, 0], [0, 0.5]]}
    hoop = {"name": "hoop", "shape": "disc", "diameter": 1.0, "line_stiffness": 3.0}
    loads = [{**wire, "line_density": 0.2}, hoop]
    free = {**zoo.DISC, "edges": {"rim": {"support": "free"}}, "line_loads": loads}
    membrane, found = contributions(free)
    assert found == {
        "line_loads.hoop.line_stiffness": (Field.LINE_STIFFNESS, ("hoop",), 3.0),
        "line_loads.wire.line_density": (Field.LINE_MASS, ("wire",), 0.2),
    }
    assert not membrane.moves_rigidly
    assert contributions({**free, "line_loads": loads[:1]})[0].moves_rigidly
