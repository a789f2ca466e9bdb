"""Rule sets by name and from files, and what a file must not hold."""

from pathlib import Path

import pytest

from profiler.errors import InputError
from profiler.radio.criteria import Criterion, RuleSet, ke_text
from profiler.radio.rule_sets import (
    NAMED,
    named_rule_set,
    read_rule_set,
    worst_month_ke,
)

GOOD = """source = "Our own handbook, chapter 3"
[[criterion]]
ke = 1.3333
f1 = 1
[[criterion]]
ke = 0.6667
f1 = 0.3
extra_m = 2.5
"""


def written(folder: Path, text: str | bytes, name: str = "own.toml") -> Path:
    path = folder / name
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return path


@pytest.mark.parametrize("name", NAMED)
def test_every_named_rule_set_states_its_source(name: str) -> None:
    made = named_rule_set(name, length_m=45e3, isolated=False)
    assert made.name == name
    assert "ITU-R P.530-19 (09/2025) section 2.2" in made.source
    assert all(isinstance(c, Criterion) for c in made.criteria)


def test_an_unknown_name_is_told_the_known_ones() -> None:
    with pytest.raises(InputError, match='No rule set "p530"') as error:
        named_rule_set("p530", length_m=1e3, isolated=True)
    assert all(name in str(error.value) for name in NAMED)


def test_a_rule_file_is_read_whole(tmp_path: Path) -> None:
    made = read_rule_set(written(tmp_path, GOOD))
    assert made.name == "own.toml"
    assert made.source == "Our own handbook, chapter 3"
    assert made.criteria == (
        Criterion(ke=1.3333, f1_fraction=1.0),
        Criterion(ke=0.6667, f1_fraction=0.3, extra_m=2.5),
    )


def test_a_file_called_none_is_a_rule_like_any_other(tmp_path: Path) -> None:
    made = read_rule_set(written(tmp_path, GOOD, "none.toml"))
    assert made.name != "none"


BAD: dict[str, tuple[str | bytes, str]] = {
    "empty": ("", "needs tables"),
    "binary": (b"\x00\xff\xfe\x81", "is no TOML"),
    "no toml": ("ke = ", "is no TOML"),
    "huge": ("#" * 100_001, "larger than 100000 bytes"),
    "nested deep": ("a = " + "[" * 50_000, "is no TOML"),
    "digits": ("[[criterion]]\nke = 1" + "0" * 5000 + "\nf1 = 1", "is no TOML"),
    "large number": ("[[criterion]]\nke = 1" + "0" * 400 + "\nf1 = 1", "is too large"),
    "criterion is text": ('criterion = "ke=1"', "needs tables"),
    "criterion is a list of text": ('criterion = ["ke=1"]', "write it as a table"),
    "no criterion": ("criterion = []", "needs tables"),
    "unknown key": ("[[criterion]]\nke = 1\nf1 = 1\nk = 2", '"k" is not known'),
    "extra above the tables": (
        "extra_m = 3\n[[criterion]]\nke = 1\nf1 = 1",
        '"extra_m" is not known',
    ),
    "missing ke": ("[[criterion]]\nf1 = 1", "criterion 1: ke is missing"),
    "missing f1": ("[[criterion]]\nke = 1", "criterion 1: f1 is missing"),
    "text for a number": ('[[criterion]]\nke = "4/3"\nf1 = 1', "must be a number"),
    "true for a number": ("[[criterion]]\nke = true\nf1 = 1", "must be a number"),
    "date for a number": ("[[criterion]]\nke = 2020-01-01\nf1 = 1", "must be a number"),
    "not a number": ("[[criterion]]\nke = nan\nf1 = 1", "ke must be above 0"),
    "endless": ("[[criterion]]\nke = 1\nf1 = inf", "between 0 and 3, not inf"),
    "ke of 0": (
        "[[criterion]]\nke = 0\nf1 = 1",
        "ke must be above 0 and below 1e6, not 0",
    ),
    "negative extra": (
        "[[criterion]]\nke = 1\nf1 = 1\nextra_m = -1",
        "extra must be between 0 and 1000 m, not -1",
    ),
}


@pytest.mark.parametrize("case", BAD)
def test_a_bad_rule_file_is_refused_in_one_sentence(case: str, tmp_path: Path) -> None:
    text, message = BAD[case]
    with pytest.raises(InputError, match=message) as error:
        read_rule_set(written(tmp_path, text))
    assert "own.toml" in str(error.value)
    assert "\n" not in str(error.value)


def test_a_folder_or_a_missing_file_is_no_rule_file(tmp_path: Path) -> None:
    (tmp_path / "folder.toml").mkdir()
    for name in ("folder.toml", "absent.toml", "a\0b.toml"):
        with pytest.raises(InputError, match="No rule file"):
            read_rule_set(tmp_path / name)


def test_a_file_that_cannot_be_read_says_why(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = written(tmp_path, GOOD)

    def refuse(*_: object, **__: object) -> str:
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(Path, "read_text", refuse)
    with pytest.raises(InputError, match="cannot be read: Permission denied"):
        read_rule_set(path)


def test_a_rule_without_a_criterion_is_refused() -> None:
    with pytest.raises(InputError, match='"own" has no criterion'):
        RuleSet(name="own", source="here", criteria=())


@pytest.mark.parametrize("length_m", [0.0, -1.0, float("nan")])
def test_a_path_of_no_length_has_no_worst_month(length_m: float) -> None:
    with pytest.raises(InputError, match="Path length must be above 0"):
        worst_month_ke(length_m)


def test_a_criterion_reads_as_the_trade_says_it() -> None:
    assert Criterion(ke=4 / 3, f1_fraction=0.6).text == "0.6 F1 at ke 4/3"
    own = Criterion(ke=0.7953, f1_fraction=0.3, extra_m=2.5)
    assert own.text == "0.3 F1 + 2.5 m at ke 0.795"
    assert [ke_text(ke) for ke in (2 / 3, 0.5, 1.0)] == ["2/3", "1/2", "1"]
