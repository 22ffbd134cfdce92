"""Numbers of plain data by their paths."""

from membrane.numeric_keys import found_at, numeric_keys, replaced

DATA = {
    "outline": {"shape": "polygon", "corners": [[0.0, 1.0], [2.0, 3.0]], "closed": True},
    "patches": [{"name": "paste", "added_density": 1.9}, {"bedding": 3.0}],
    "edges": {"cut.left": {"stiffness": 5.0}},
}


def test_every_number_has_a_path():
    assert list(numeric_keys(DATA)) == [
        "outline.corners[1][1]",
        "outline.corners[1][2]",
        "outline.corners[2][1]",
        "outline.corners[2][2]",
        "patches.paste.added_density",
        "patches[2].bedding",
        "edges.cut.left.stiffness",
    ]


def test_replacing_one_number_leaves_the_rest_and_the_original():
    keys = numeric_keys(DATA)
    for path, steps in keys.items():
        changed = replaced(DATA, steps, -7.0)
        assert found_at(changed, steps) == -7.0
        others = [other for other in keys.values() if other != steps]
        assert all(found_at(changed, o) == found_at(DATA, o) for o in others), path
    assert found_at(DATA, keys["patches.paste.added_density"]) == 1.9
