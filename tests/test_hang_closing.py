"""The closing function and its inverse against 60-digit arithmetic (mpmath)."""

from __future__ import annotations

from collections.abc import Iterator

import mpmath
import numpy as np
import pytest

from geom.hang import closing

HALF_ANGLES = np.concatenate([np.logspace(-7.6, 0, 120), np.linspace(1.0, 6.5, 120), np.logspace(0.8, 2.84, 60)])


@pytest.fixture(scope="module", autouse=True)
def sixty_digits() -> Iterator[None]:
    with mpmath.workdps(60):
        yield


def _h(u: float) -> mpmath.mpf:
    exact = mpmath.mpf(u)
    return mpmath.log(mpmath.sinh(exact) / exact)


def _inverse(s: mpmath.mpf, start: mpmath.mpf) -> mpmath.mpf:
    """Solve h(u) = s by Newton's method from a start near the root."""
    u = start
    for _ in range(60):
        step = (mpmath.log(mpmath.sinh(u) / u) - s) / (mpmath.coth(u) - 1 / u)
        u -= step
        if abs(step) < mpmath.mpf(10) ** -30 * u:
            return u
    raise AssertionError("the reference did not converge")


def _largest_error(computed: np.ndarray, exact: list[mpmath.mpf]) -> float:
    return max(float(abs(mpmath.mpf(float(c)) / e - 1)) for c, e in zip(computed, exact, strict=True))


def test_half_angle_is_right_to_the_last_digit_from_near_taut_to_1e270_spans_deep() -> None:
    s = np.array([float(_h(u)) for u in HALF_ANGLES])
    assert s.min() < 2e-16
    assert s.max() > 620.0
    exact = [_inverse(mpmath.mpf(float(x)), mpmath.mpf(float(u))) for x, u in zip(s, HALF_ANGLES, strict=True)]
    assert _largest_error(closing.half_angle(s), exact) < 4e-16


def test_half_angle_is_as_good_on_both_sides_of_every_seam() -> None:
    seams = [closing.INVERSE_END, 3.0]
    s = np.array([seam * (1.0 + shift) for seam in seams for shift in (-1e-3, -1e-12, 0.0, 1e-12, 1e-3)])
    exact = [_inverse(mpmath.mpf(float(x)), mpmath.sqrt(6 * x + 1.2 * x * x)) for x in s]
    assert _largest_error(closing.half_angle(s), exact) < 4e-16


def test_the_polynomial_goes_through_the_inverse_at_the_chebyshev_zeros() -> None:
    count = len(closing.INVERSE)
    zeros = [(mpmath.cos(mpmath.pi * (2 * k + 1) / (2 * count)) + 1) / 2 for k in range(count)]
    values = mpmath.matrix([_inverse(s, mpmath.sqrt(6 * s + 1.2 * s * s)) ** 2 / s for s in zeros])
    powers = mpmath.matrix([[s**j for j in range(count)] for s in zeros])
    for stored, exact in zip(closing.INVERSE, mpmath.lu_solve(powers, values), strict=True):
        assert stored == float(exact)


@pytest.mark.parametrize(
    ("s", "u"),
    [(0.0, 0.0), (np.inf, np.inf), (-1e-9, np.nan), (np.nan, np.nan), (1e-300, np.sqrt(6e-300))],
)
def test_half_angle_keeps_its_limits(s: float, u: float) -> None:
    with np.errstate(invalid="ignore"):
        result = closing.half_angle(np.array([s, 0.5]))
    assert result[0] == pytest.approx(u, rel=1e-15, abs=0.0, nan_ok=True)
    assert np.isfinite(result[1])


def test_log_sinhc_is_right_to_the_last_digits_without_overflow() -> None:
    exact = [_h(float(u)) for u in HALF_ANGLES]
    assert _largest_error(closing.log_sinhc(HALF_ANGLES), exact) < 8e-16
    deep = closing.log_sinhc(np.array([5e4]))
    assert deep[0] == pytest.approx(5e4 - np.log(1e5), rel=1e-15)


def test_sinhc_minus_one_does_not_cancel() -> None:
    u = HALF_ANGLES[HALF_ANGLES < 20.0]
    exact = [mpmath.sinh(mpmath.mpf(float(x))) / mpmath.mpf(float(x)) - 1 for x in u]
    assert _largest_error(closing.sinhc_minus_one(u), exact) < 1e-15


def test_coth_excess_does_not_cancel() -> None:
    exact = [mpmath.mpf(float(x)) * mpmath.coth(mpmath.mpf(float(x))) - 1 for x in HALF_ANGLES]
    assert _largest_error(closing.coth_excess(HALF_ANGLES), exact) < 1e-15
