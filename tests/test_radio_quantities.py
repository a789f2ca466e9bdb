"""Frequencies and criteria as people write them."""

import pytest

from profiler.cli.radio_quantities import parse_criterion, parse_frequency
from profiler.errors import InputError
from profiler.radio.criteria import Criterion


@pytest.mark.parametrize(
    ("text", "hz"),
    [
        ("7.5GHz", 7.5e9),
        ("7.5 ghz", 7.5e9),
        ("868MHz", 868e6),
        ("10000 kHz", 10e6),
        ("300GHz", 300e9),
        ("\u0667.5GHz", 7.5e9),
        ("10000000Hz", 10e6),
    ],
)
def test_a_frequency_with_its_unit_is_read(text: str, hz: float) -> None:
    assert parse_frequency(text) == pytest.approx(hz)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("7.5", r"^7\.5 what\? Write 7\.5GHz or 7\.5MHz\.$"),
        ("7.5G", r'^7\.5 what\? "G" is no unit: write 7\.5GHz\.$'),
        ("0", "0 what"),
        ("0GHz", "outside 10 MHz to 300 GHz"),
        ("-6GHz", "outside 10 MHz to 300 GHz"),
        ("9MHz", "outside 10 MHz to 300 GHz"),
        ("301GHz", "outside 10 MHz to 300 GHz"),
        ("1e12", "is no frequency"),
        ("7,5GHz", r"write decimals with a point: 7\.5"),
        ("1,500MHz", "can be read in two ways"),
        ("", "is no frequency"),
        ("GHz", "is no frequency"),
        ("..GHz", "is not a number"),
        ("6" * 300, "is no frequency"),
    ],
)
def test_a_frequency_that_cannot_be_meant_is_refused(text: str, message: str) -> None:
    with pytest.raises(InputError, match=message):
        parse_frequency(text)


@pytest.mark.parametrize(
    ("text", "criterion"),
    [
        ("ke=4/3 f1=0.6", Criterion(ke=4 / 3, f1_fraction=0.6)),
        ("f1 = .3, KE = 2/3", Criterion(ke=2 / 3, f1_fraction=0.3)),
        ("extra=10ft ke=1 f1=0", Criterion(ke=1, f1_fraction=0, extra_m=3.048)),
    ],
)
def test_a_criterion_is_read_in_any_order(text: str, criterion: Criterion) -> None:
    assert parse_criterion(text) == criterion


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", "Write a criterion as"),
        ("4/3 0.6", '"4/3" in a criterion'),
        ("k=4/3 f1=0.6", '"k=4/3" in a criterion'),
        ("ke=4/3", "f1 is missing"),
        ("f1=0.6", "ke is missing"),
        ("ke=1 ke=2 f1=0.6", "ke stands twice"),
        ("ke=0 f1=0.6", "not above 0"),
        ("ke=1/0 f1=0.6", "divides by 0"),
        ("ke=1 f1=-0.1", "between 0 and 3, not -0.1"),
        ("ke=1 f1=4", "between 0 and 3, not 4"),
        ("ke=1 f1=", "A number is missing"),
        ("ke=1 f1=0.6 extra=-3m", "extra must be between 0 and 1000 m, not -3"),
        ("ke=1 f1=0.6 extra=3yd", "is not a unit known here"),
        ("ke=1 f1=60%", "is not a number"),
    ],
)
def test_a_criterion_that_cannot_be_meant_is_refused(text: str, message: str) -> None:
    with pytest.raises(InputError, match=message):
        parse_criterion(text)
