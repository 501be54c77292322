"""Names on a map cover neither points nor each other."""

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from sheetgen.figures.placing import Label, _extent, _meets, placed
from sheetgen.figures.plot import Axis, Curve, Note
from sheetgen.figures.scales import place
from sheetgen.figures.style import RADIUS

BOX = (40.0, 28.0, 190.0, 120.0)
X, Y = Axis("", 0, 1), Axis("", 0, 1)
points = st.lists(st.tuples(st.floats(0.02, 0.98), st.floats(0.02, 0.98)), min_size=1, max_size=30)


@settings(max_examples=40, deadline=None)
@given(points)
def test_names_keep_clear_of_points_names_and_the_frame(places):
    labels = [Label(f"N{index}", x, y) for index, (x, y) in enumerate(places)]
    notes = [layer for layer in placed(BOX, X, Y, labels) if isinstance(layer, Note)]
    centres = np.array([[place(X, x, 40, 190), place(Y, y, 28, 120)] for x, y in places])
    dots = np.column_stack((centres - RADIUS, centres + RADIUS))
    spots = []
    for note in notes:
        point = np.array([place(X, note.x, 40, 190), place(Y, note.y, 28, 120)])
        spot = _extent(note.text, point, note.anchor, note.dx, note.dy)
        assert not _meets(spot, dots).any()
        assert spot[0] > 40 and spot[1] > 28 and spot[2] < 230 and spot[3] < 148
        spots.append(spot)
    for index, spot in enumerate(spots[:-1]):
        assert not _meets(spot, np.array(spots[index + 1 :])).any()


def test_a_lone_point_has_its_name_beside_it_without_a_leader():
    assert placed(BOX, X, Y, [Label("Cu", 0.5, 0.5)]) == [Note("Cu", 0.5, 0.5, "start", 3.2, -2.3)]


def test_a_crowd_has_leaders():
    labels = [Label("Xx", 0.5 + 0.004 * step, 0.5 + 0.004 * step) for step in range(20)]
    layers = placed(BOX, X, Y, labels)
    assert sum(isinstance(layer, Note) for layer in layers) >= 15
    assert any(isinstance(layer, Curve) for layer in layers)


def test_the_same_labels_are_placed_the_same():
    labels = [Label("Xx", 0.5 + 0.01 * step, 0.5) for step in range(9)]
    first, second = placed(BOX, X, Y, labels), placed(BOX, X, Y, labels)
    assert [note for note in first if isinstance(note, Note)] == [note for note in second if isinstance(note, Note)]
