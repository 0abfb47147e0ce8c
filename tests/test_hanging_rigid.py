"""Chains drawn as their rigid links hang: published depths, distance from the catenary, hinges in place."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from geom.curves import Polyline
from geom.result import Piece
from tests.test_hanging_stretch import design, figures

RIGID = '[drawing]\nlinks = "rigid"\n'


def chain(count: int, *, span: float = 1.0, rise: float = 0.0, slack: float = 1.2, head: str = RIGID) -> Piece:
    pitch = slack * float(np.hypot(span, rise)) / count
    wire, width = 0.2 * pitch, 0.62 * pitch
    body = (
        f'[[hanging]]\nmark = "C"\nfrom = [0, 0, 5]\nto = [{0.6 * span!r}, {0.8 * span!r}, {5 + rise!r}]\n'
        f'stock = "c"\nlinks = {count}\n'
        f'[stock.c]\nkind = "chain"\npitch = {pitch!r}\nwire = {wire!r}\nwidth = {width!r}\nmass_per_metre = 1.0\n'
    )
    return design(body, head=head).pieces[0]


@pytest.mark.parametrize(
    ("count", "depth"),
    [
        # n equal rigid links 1.2 spans long in all, level: exact for 2, 3, by 40-digit arithmetic beyond
        (2, 0.331662479036), (3, 0.264575131106), (4, 0.302315629721), (5, 0.282789549785), (8, 0.294731241217),
        (10, 0.293864249331), (20, 0.292721475308), (50, 0.292404118953), (100, 0.292358874131),
    ],
)  # fmt: skip
def test_the_polygon_of_rigid_links_is_as_deep_as_it_must_be(count: int, depth: float) -> None:
    piece = chain(count)
    curve = piece.lines[0].curve
    assert isinstance(curve, Polyline)
    assert len(curve.vertices) == count + 1
    assert 5.0 - curve.vertices[:, 2].min() == pytest.approx(depth, abs=1e-11)
    assert figures(piece).sag == pytest.approx(0.292343797601, abs=1e-10)  # figures stay the catenary's


@settings(max_examples=20)
@given(st.integers(3, 60), st.floats(-0.8, 0.8), st.floats(1.02, 2.0))
def test_links_stand_between_hinges_a_pitch_apart_and_near_the_catenary(count: int, rise: float, slack: float) -> None:
    rigid, smooth = chain(count, rise=rise, slack=slack), chain(count, rise=rise, slack=slack, head="")
    links = figures(rigid).links
    assert links is not None
    points = figures(rigid).points
    np.testing.assert_allclose(np.linalg.norm(np.diff(points, axis=0), axis=1), links.pitch, rtol=1e-9)
    fine = smooth.lines[0].curve.points(1e-7)
    gaps = np.linalg.norm(points[:, None] - fine[None], axis=2).min(axis=1)
    assert gaps.max() <= links.rigid_off + 2e-3
    assert figures(smooth).links is not None
    other = figures(smooth).links
    assert other is not None
    assert other.rigid_off == pytest.approx(links.rigid_off, rel=1e-9)
    said = {caution.code for caution in rigid.cautions} - {caution.code for caution in smooth.cautions}
    assert said == {"rigid links"}
