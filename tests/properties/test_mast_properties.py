"""What holds of masts and criteria for any ground and any text."""

from collections.abc import Callable
from typing import TypeVar

from hypothesis import example, given
from hypothesis import strategies as st

from profiler.cli.radio_quantities import parse_criterion, parse_frequency
from profiler.errors import InputError
from profiler.radio.criteria import Criterion
from tests.mast_cases import bench_of, scene

Value = TypeVar("Value")
HEIGHTS = st.floats(0.0, 400.0)


def parsed(parse: Callable[[str], Value], text: str) -> Value | str:
    """The value, or the sentence that refuses the text."""
    try:
        return parse(text)
    except InputError as error:
        return str(error)


@given(st.integers(100, 130), HEIGHTS, HEIGHTS, st.floats(0.0, 50.0))
def test_a_higher_mast_never_makes_a_criterion_fail(
    seed: int, from_agl: float, to_agl: float, more: float
) -> None:
    bench = bench_of(scene(seed))
    before = bench.tried(from_agl, to_agl).left_m
    for after in (
        bench.tried(from_agl + more, to_agl).left_m,
        bench.tried(from_agl, to_agl + more).left_m,
    ):
        assert all(b >= a - 1e-9 for a, b in zip(before, after, strict=True))


@given(st.text(max_size=300))
@example("ke=4/3 f1=0.6 extra=3m")
@example("ke=1/0 f1=1")
@example("ke=1e400 f1=nan")
@example("KE = 2/3 , F1 = 0.3")
@example("ke=\u0661 f1=1 extra=-3m")
@example("ke=1 f1=1 extra=" + "9" * 190)
def test_any_text_is_a_criterion_or_refused(text: str) -> None:
    found = parsed(parse_criterion, text)
    assert isinstance(found, Criterion) or found.endswith(".")


@given(
    st.lists(
        st.sampled_from(["ke=4/3", "f1=0.6", "extra=3m", "extra=", "k=1", "f1", "="]),
        max_size=5,
    )
)
def test_a_criterion_needs_ke_and_f1_once_each(words: list[str]) -> None:
    good = (
        words.count("ke=4/3") == words.count("f1=0.6") == 1
        and words.count("extra=3m") <= 1
        and not {"extra=", "k=1", "f1", "="} & set(words)
    )
    try:
        parse_criterion(" ".join(words))
    except InputError:
        assert not good
    else:
        assert good or "=" in words


@given(st.text(max_size=300))
@example("7,5GHz")
@example("1e12")
@example("0")
@example("9" * 300 + "GHz")
def test_any_text_is_a_frequency_or_refused(text: str) -> None:
    found = parsed(parse_frequency, text)
    if isinstance(found, str):
        assert found.endswith(".")
    else:
        assert 10e6 <= found <= 300e9
