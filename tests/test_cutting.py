"""Cutting plans: against brute force, published jobs, and the laws that every plan keeps."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Sequence
from functools import cache

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from geom.shop.columns import Columns
from geom.shop.cutting import CuttingPlan, links_on, plan, plan_links
from geom.shop.filling import Job, complete, cost_of, count_bound, first_fit_decreasing, length_bound
from geom.shop.fullest import fullest_reels
from geom.shop.knapsack import best_fillings
from geom.shop.rounding import cut_length, spares, to_step


def least_by_brute_force(pieces: Sequence[int], sold: Sequence[int], price: Sequence[int], lost: int) -> int:
    """The least price of all ways of sharing pieces out to reels, by trying every subset for the first reel."""

    def of(taken: int) -> float:
        fits = [each for length, each in zip(sold, price, strict=True) if taken <= length + lost]
        return min(fits, default=math.inf)

    @cache
    def least(left: int) -> float:
        if not left:
            return 0
        first = left & -left
        best, rest = math.inf, left ^ first
        part = rest
        while True:
            taken = sum(piece + lost for n, piece in enumerate(pieces) if (part | first) >> n & 1)
            best = min(best, of(taken) + least(rest ^ part))
            if not part:
                return best
            part = (part - 1) & rest

    return int(least((1 << len(pieces)) - 1))


def cut_of(made: CuttingPlan) -> Counter[int]:
    """How many of each piece a plan cuts."""
    cut: Counter[int] = Counter()
    for pattern in made.patterns:
        for place, number in pattern.cuts:
            cut[place] += number * pattern.count
    return cut


def obeys(made: CuttingPlan, lengths: Sequence[float], counts: Sequence[int], kerf: float) -> None:
    """Each piece is cut as often as asked, nothing is longer than its reel, and no bound is above the plan."""
    assert made.needed is not None
    assert made.least_possible is not None
    assert cut_of(made) == Counter({n: count for n, count in enumerate(counts) if count})
    assert made.needed == sum(pattern.count for pattern in made.patterns)
    assert made.least_possible <= made.needed
    assert made.least_bought <= made.bought * (1 + 1e-12)
    for pattern in made.patterns:
        taken = sum(lengths[place] * number for place, number in pattern.cuts)
        assert taken + kerf * (pattern.pieces - 1) <= pattern.length + 1e-8
        assert pattern.left == pytest.approx(max(0.0, pattern.length - taken - kerf * pattern.pieces), abs=1e-8)


small_jobs = st.tuples(
    st.lists(st.integers(1, 60), min_size=1, max_size=7),
    st.lists(st.integers(60, 140), min_size=1, max_size=3, unique=True),
    st.integers(0, 5),
)


@given(small_jobs)
@settings(max_examples=150, deadline=None)
def test_a_small_job_costs_what_brute_force_finds(job: tuple[list[int], list[int], int]) -> None:
    pieces, sold, lost = job
    made = plan([p / 100 for p in pieces], [1] * len(pieces), sold=[s / 100 for s in sold], kerf=lost / 100)
    obeys(made, [p / 100 for p in pieces], [1] * len(pieces), lost / 100)
    assert round(made.bought * 100) == least_by_brute_force(pieces, sold, sold, lost)
    assert made.proven


@given(small_jobs)
@settings(max_examples=100, deadline=None)
def test_no_bound_is_above_the_least_number_of_reels(job: tuple[list[int], list[int], int]) -> None:
    pieces, sold, lost = job
    made = plan([p / 100 for p in pieces], [1] * len(pieces), sold=[s / 100 for s in sold], kerf=lost / 100)
    assert made.least_possible is not None
    assert made.least_possible <= least_by_brute_force(pieces, sold, [1] * len(sold), lost)


@given(
    st.lists(st.integers(1, 40), min_size=1, max_size=5),
    st.lists(st.integers(0, 3), min_size=5, max_size=5),
    st.integers(40, 90),
)
@settings(max_examples=100, deadline=None)
def test_chain_loses_one_link_at_each_cut(links: list[int], counts: list[int], reel: int) -> None:
    counts = counts[: len(links)]
    made = plan_links(links, counts, pitch=0.01, sold=[reel * 0.01], wire=0.002)
    assert cut_of(made) == Counter({n: count for n, count in enumerate(counts) if count})
    for pattern in made.patterns:
        taken: int = sum((links[place] + 1) * number for place, number in pattern.cuts)
        assert taken <= reel + 1
    if 0 < sum(counts) <= 6:
        pieces = [n for n, count in zip(links, counts, strict=True) for _ in range(count)]
        assert made.needed == least_by_brute_force(pieces, [reel], [1], 1)
    finished = sum(n * count for n, count in zip(links, counts, strict=True))
    left = sum(round(pattern.left / 0.01) * pattern.count for pattern in made.patterns)
    assert made.links == (made.needed or 0) * reel
    assert made.links_lost is not None
    assert finished + made.links_lost + left == made.links


def test_bollard_swags_are_cut_from_281_links_of_which_seven_are_lost() -> None:
    """Seven bays of 35 links and one of 29, pitch 52, wire 8: 274 + 7 links, 281 x 52 + 16 mm overall."""
    made = plan_links([35, 29], [7, 1], pitch=0.052, wire=0.008)
    assert (made.needed, made.least_possible, made.links, made.links_lost) == (1, 1, 281, 7)
    assert made.bought == pytest.approx(14.628, abs=1e-9)
    assert made.patterns[0].cuts == ((0, 7), (1, 1))
    assert made.patterns[0].left == 0.0


def test_three_pieces_of_chain_use_two_links_more_than_they_have() -> None:
    made = plan_links([71, 70], [2, 1], pitch=0.042)
    assert made.links == 71 + 71 + 70 + 2


def test_ball_chain_loses_nothing_at_a_cut() -> None:
    made = plan_links([460, 416], [1, 1], pitch=0.006, lost=0)
    assert (made.links, made.links_lost) == (876, 0)


def test_a_reel_said_to_hold_whole_links_holds_them() -> None:
    assert links_on(20.6, 0.206 / 11) == 1100
    assert links_on(30.0, 0.052) == 576  # 576.9


def test_the_last_piece_needs_no_cut_when_it_ends_flush() -> None:
    flush = plan([2.0], [3], sold=[6.006], kerf=0.003)
    assert (flush.needed, flush.cut_count, flush.patterns[0].left) == (1, 2, 0.0)
    assert plan([2.0], [3], sold=[6.005], kerf=0.003).needed == 2
    longer = plan([2.0], [3], sold=[6.01], kerf=0.003)
    assert longer.cut_count == 3
    assert longer.patterns[0].left == pytest.approx(0.001, abs=1e-12)


def test_sixty_fourths_of_an_inch_fill_a_bar_exactly() -> None:
    made = plan([96 * 0.0254 / 64], [64], sold=[96 * 0.0254])
    assert (made.needed, made.patterns[0].left) == (1, 0.0)


def test_the_worst_job_of_first_fit_decreasing_takes_nine_reels_and_not_eleven() -> None:
    """Johnson, Demers, Ullman, Garey and Graham (1974): 6 x 1/2+e, 6 x 1/4+2e, 6 x 1/4+e, 12 x 1/4-2e; 11/9."""
    pieces, counts = (501, 252, 251, 248), (6, 6, 6, 12)
    job = Job(tuple(reversed(pieces)), tuple(reversed(counts)), (1000,), (1,))
    assert cost_of(job, first_fit_decreasing(job)) == 11
    made = plan([p / 1000 for p in pieces], counts, sold=[1.0])
    assert (made.needed, made.least_possible) == (9, 9)


def test_the_paper_mill_of_the_textbooks_needs_73_rolls() -> None:
    """Thirteen orders cut from rolls of 5600 mm; the least, 73, as commonly printed with this example."""
    widths = [1380, 1520, 1560, 1710, 1820, 1880, 1930, 2000, 2050, 2100, 2140, 2150, 2200]
    counts = [22, 25, 12, 14, 18, 18, 20, 10, 12, 14, 16, 18, 20]
    made = plan([w / 1000 for w in widths], counts, sold=[5.6])
    assert (made.needed, made.least_possible) == (73, 73)


def test_reels_known_to_be_full_are_found_again() -> None:
    """Bars cut up at random into three without waste: as many bars are enough, and no fewer."""
    random = np.random.default_rng(4)
    pieces = []
    for _ in range(25):
        a, b = random.integers(2600, 3600, 2)
        pieces += [a / 1000, b / 1000, (10000 - a - b) / 1000]
    made = plan(pieces, [1] * 75, sold=[10.0])
    obeys(made, pieces, [1] * 75, 0.0)
    assert made.least_possible == 25
    assert made.needed == 25


@pytest.mark.parametrize(("kinds", "most"), [(20, 30), (60, 8)])
def test_a_middling_job_is_solved_within_one_reel_of_its_bound(kinds: int, most: int) -> None:
    random = np.random.default_rng(kinds)
    lengths = (random.integers(400, 3900, kinds) / 1000).tolist()
    counts = random.integers(1, most, kinds).tolist()
    made = plan(lengths, counts, sold=[6.0], kerf=0.003)
    obeys(made, lengths, counts, 0.003)
    assert made.needed is not None
    assert made.least_possible is not None
    assert made.needed - made.least_possible <= 1
    assert made.least_possible >= sum((x + 0.003) * n for x, n in zip(lengths, counts, strict=True)) / 6.003


def test_several_sold_lengths_buy_no_more_than_the_best_one_alone() -> None:
    random = np.random.default_rng(9)
    lengths, counts = (random.integers(400, 2900, 25) / 1000).tolist(), random.integers(1, 9, 25).tolist()
    together = plan(lengths, counts, sold=[3.0, 6.0, 7.62], kerf=0.003)
    obeys(together, lengths, counts, 0.003)
    alone = [plan(lengths, counts, sold=[length], kerf=0.003) for length in (3.0, 6.0, 7.62)]
    assert together.bought <= min(made.bought for made in alone) + 1e-9
    assert together.bought <= 1.005 * together.least_bought


def test_a_plan_does_not_depend_on_the_order_or_the_unit_of_the_pieces() -> None:
    lengths, counts = [1.2, 0.7, 2.9, 1.2, 0.333], [4, 9, 3, 2, 17]
    made = plan(lengths, counts, sold=[6.0])
    turned = plan(lengths[::-1], counts[::-1], sold=[6.0])
    larger = plan([10 * x for x in lengths], counts, sold=[60.0])
    assert made.needed == turned.needed == larger.needed
    assert plan(lengths, counts, sold=[6.0]) == made


def test_marks_of_one_length_are_each_cut_as_often_as_asked() -> None:
    made = plan([1.5, 1.5, 1.5], [5, 1, 3], sold=[6.0])
    obeys(made, [1.5] * 3, [5, 1, 3], 0.0)
    assert made.needed == 3


def test_a_piece_longer_than_any_length_sold_is_reported_and_nothing_planned() -> None:
    made = plan([7.0, 1.0, 8.0], [1, 1, 0], sold=[6.0])
    assert (made.needed, made.least_possible, made.patterns, made.too_long) == (None, None, (), (0,))
    assert "a piece of 7 m is longer than the longest length sold, 6 m" in made.reason
    assert (
        "36 links is longer than the longest length sold, 35 links"
        in plan_links([36, 40], [1, 0], pitch=0.052, sold=[1.85]).reason
    )


def test_no_pieces_need_no_reels() -> None:
    for made in (plan([], []), plan([1.0], [0], sold=[6.0])):
        assert (made.needed, made.least_possible, made.bought, made.patterns) == (0, 0, 0.0, ())


@pytest.mark.parametrize(
    ("lengths", "counts", "sold", "kerf"),
    [([-1.0], [1], [6.0], 0.0), ([math.nan], [1], [6.0], 0.0), ([1.0], [-1], [6.0], 0.0), ([1.0], [1], [0.0], 0.0),
     ([1e-12], [1], [6.0], 0.0), ([1.0], [1], [6.0], -0.1), ([1.0], [1, 2], [6.0], 0.0)],
)  # fmt: skip
def test_what_cannot_be_a_length_or_a_count_is_refused(
    lengths: list[float], counts: list[int], sold: list[float], kerf: float
) -> None:
    with pytest.raises(ValueError, match=r"length|count"):
        plan(lengths, counts, sold=sold, kerf=kerf)


def test_a_hundred_thousand_pieces_of_few_lengths_make_few_patterns() -> None:
    """Work follows the number of lengths: 100,000 pieces of five in a handful of patterns."""
    lengths = [3.1, 2.4, 1.75, 0.9, 0.42]
    made = plan(lengths, [20_000] * 5, sold=[6.0], kerf=0.003)
    obeys(made, lengths, [20_000] * 5, 0.003)
    assert made.proven
    assert len(made.patterns) <= 15


def martello_toth(pieces: list[int], room: int) -> int:
    """Bound L2 as printed: Martello and Toth, Knapsack Problems (1990), section 8.3.3, over every alpha."""
    best = 0
    for alpha in range(room // 2 + 1):
        alone = [p for p in pieces if p > room - alpha]
        paired = [p for p in pieces if room / 2 < p <= room - alpha]
        small = [p for p in pieces if alpha <= p <= room / 2]
        free = len(paired) * room - sum(paired)
        best = max(best, len(alone) + len(paired) + max(0, math.ceil((sum(small) - free) / room)))
    return best


@given(st.lists(st.integers(1, 50), min_size=1, max_size=14))
@settings(max_examples=200, deadline=None)
def test_the_bound_on_the_count_is_that_of_martello_and_toth(pieces: list[int]) -> None:
    found = Counter(pieces)
    job = Job(tuple(sorted(found)), tuple(found[size] for size in sorted(found)), (50,), (1,))
    assert count_bound(job) == martello_toth(pieces, 50)


@given(
    st.lists(st.tuples(st.integers(1, 30), st.integers(0, 50), st.integers(1, 4)), min_size=1, max_size=4),
    st.integers(5, 60),
)
@settings(max_examples=150, deadline=None)
def test_the_knapsack_finds_the_best_filling(kinds: list[tuple[int, int, int]], room: int) -> None:
    sizes, values, most = (np.array(column, dtype=np.int64) for column in zip(*kinds, strict=True))
    table = best_fillings(sizes, values, most, room)
    counts = np.stack(np.meshgrid(*(np.arange(n + 1) for n in most), indexing="ij"), axis=-1).reshape(-1, len(most))
    fitting = counts[counts @ sizes <= room]
    assert table.best[room] == (fitting @ values).max()
    cuts = table.filling(room)
    assert sum(values[kind] * number for kind, number in cuts.items()) == table.best[room]
    assert sum(sizes[kind] * number for kind, number in cuts.items()) <= room
    assert all(number <= most[kind] for kind, number in cuts.items())


def test_column_generation_alone_proves_a_bound_above_that_of_the_lengths() -> None:
    """Pieces of 0.4 of a reel go two to a reel: ten need five, though their lengths would fill four."""
    job = Job((400,), (10,), (1000,), (1,))
    assert length_bound(job) == 4
    columns = Columns(job, 10**9)
    columns.add(first_fit_decreasing(job))
    used = columns.solve(job.demand, prove=True)
    assert columns.least_cost == 5
    assert used.sum() == pytest.approx(5.0, abs=1e-9)


def test_a_reel_too_long_for_an_exact_table_still_gets_a_true_bound() -> None:
    """Lengths with no common measure on a reel of ten million cells: sizes are rounded both ways."""
    random = np.random.default_rng(2)
    sizes = tuple(sorted(random.integers(1_200_001, 3_900_001, 12).tolist()))
    job = Job(sizes, (3,) * 12, (10_000_019,), (1,))
    columns = Columns(job, 10**9)
    reels = first_fit_decreasing(job)
    columns.add(reels)
    columns.solve(job.demand, prove=True)
    assert length_bound(job) <= columns.least_cost <= cost_of(job, reels)
    for stock, cuts in columns.ways:
        assert sum(sizes[kind] * number for kind, number in cuts) <= job.capacities[stock]


def test_fullest_reels_meet_the_bound_where_many_pieces_go_on_a_reel() -> None:
    random = np.random.default_rng(5)
    found = Counter(random.integers(200, 3000, 300).tolist())
    job = Job(tuple(sorted(found)), tuple(found[size] for size in sorted(found)), (12_000,), (1,))
    reels = fullest_reels(job, 10**6)
    assert reels is not None
    assert cost_of(job, reels) == length_bound(job)
    assert fullest_reels(job, 10) is None


def test_a_search_that_is_cut_short_does_not_claim_a_proof() -> None:
    random = np.random.default_rng(6)
    found = Counter(random.integers(200, 500, 30).tolist())
    job = Job(tuple(sorted(found)), tuple(found[size] for size in sorted(found)), (1000,), (1,))
    assert complete(job, under=length_bound(job) + 1, work=50)[1] is False


def test_cut_lengths_are_pin_to_pin_less_fittings_and_with_grips() -> None:
    """2500 - (95 + 110) + (60 + 60) = 2415 mm."""
    assert cut_length(2.5, takes=0.205, grip=0.12, step=0.001) == 2.415
    with pytest.raises(ValueError, match=r"leave -0\.1 m of 0\.1 m"):
        cut_length(0.1, takes=0.2, step=0.001)


def test_halves_of_a_step_are_rounded_away_from_zero() -> None:
    lengths = np.array([2.4155, 2.4145, -2.4155, 2.4154, 0.0])
    assert to_step(lengths, 0.001).tolist() == [2.416, 2.415, -2.416, 2.415, 0.0]
    assert to_step(2.4151, 0.001, way="up") == 2.416
    assert to_step(2.4159, 0.001, way="down") == 2.415
    assert to_step(2.415, 0.001, way="up") == to_step(2.415, 0.001, way="down") == 2.415


def test_lengths_are_rounded_to_sixteenths_of_an_inch() -> None:
    """143.97 in is 143 15/16 + 0.0325: nearest 144 in, 12 ft."""
    assert to_step(0.0254 * 143.97, 0.0254 / 16) == pytest.approx(0.0254 * 144, abs=1e-12)


@given(st.floats(-100, 100), st.sampled_from([0.001, 0.0005, 0.01, 0.0254 / 16, 0.0254 / 64]))
def test_rounding_moves_a_length_by_half_a_step_at_the_most(length: float, step: float) -> None:
    rounded = float(to_step(length, step))
    assert abs(rounded - length) <= step / 2 * (1 + 1e-4)
    assert rounded / step == pytest.approx(round(rounded / step), abs=1e-6)
    assert float(to_step(rounded, step)) == rounded


def test_a_step_that_is_none_is_refused() -> None:
    with pytest.raises(ValueError, match="above zero"):
        to_step(1.0, 0.0)


def test_spares_are_whole_pieces_upwards() -> None:
    assert [spares(count, 0.05) for count in (0, 1, 20, 21, 40)] == [0, 1, 1, 2, 2]
    assert spares(281, 0.0) == 0
    with pytest.raises(ValueError, match="0 or more"):
        spares(3, -0.1)
