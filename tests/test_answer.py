"""The answer object tells itself: fields of the record, table, file."""

import json
from dataclasses import fields, replace
from pathlib import Path

import pytest

from profiler import Air, Answer, Point, SightLine, Station, look, open_terrain
from profiler.errors import InputError
from tests.asking import HIDDEN, OWN_HILL, PART, SEA, UPLAND, answer_of, profile


@pytest.mark.parametrize("question", [HIDDEN, PART, OWN_HILL, SEA])
def test_the_table_tells_the_first_facts(question: tuple[str, ...]) -> None:
    answer = answer_of(*question)
    rows = dict(line.split("  ", 1) for line in repr(answer).splitlines())
    told = {name: value.strip() for name, value in rows.items()}
    record = answer.record()
    assert told["verdict"] == record["verdict"] == str(answer.verdict)
    assert told["margin_m"] == str(record["margin_m"])
    assert told["answer"] == answer.words().splitlines()[0]
    assert "None" not in told["needed"]


def test_a_notebook_gets_the_same_table_with_names_made_safe() -> None:
    answer = answer_of(*HIDDEN)
    odd = replace(answer, from_=replace(answer.from_, name="<b>Skarvel & Co"))
    html = odd._repr_html_()
    assert html.startswith("<table><tr><th")
    assert html.count("<tr>") == html.count("</tr>") == len(repr(odd).splitlines())
    assert "&lt;b&gt;Skarvel &amp; Co does not see" in html
    assert "<b>" not in html


def test_an_answer_is_a_sight_line_with_its_terrain() -> None:
    answer = answer_of(*HIDDEN)
    assert isinstance(answer, SightLine)
    own = {f.name for f in fields(Answer)} - {f.name for f in fields(SightLine)}
    assert own == {"terrain", "radio", "growth"}
    assert answer.terrain.rasters[0].path == UPLAND


def test_fields_have_the_records_names_and_values() -> None:
    answer = answer_of(*HIDDEN)
    record = answer.record()
    assert answer.decisive is not None
    assert round(answer.decisive.distance_m, 3) == record["decisive"]["distance_m"]
    assert round(answer.target.visible_m, 3) == record["target"]["visible_m"]
    assert answer.needed.from_agl_m is not None
    assert round(answer.needed.from_agl_m, 3) == record["needed"]["from_agl_m"]
    assert round(answer.earth.kr, 6) == record["earth"]["kr"]
    for name in ("verdict", "grazing", "target", "needed", "earth", "void", "cautions"):
        assert hasattr(answer, name)


def test_the_command_is_one_call_on_public_names() -> None:
    answer = look(
        open_terrain(UPLAND),
        Station(
            point=Point(lat_deg=48.2092, lon_deg=-21.50344), name="Skarvel", agl_m=20.0
        ),
        Station(
            point=Point(lat_deg=48.32758, lon_deg=-21.17892),
            name="Quillet Mast",
            agl_m=30.0,
        ),
        air=Air(),
    )
    assert answer.words() == profile(*HIDDEN).out
    assert answer.record() == json.loads(profile(*HIDDEN, "--json", "-").out)


def test_the_saved_record_is_the_printed_one(tmp_path: Path) -> None:
    answer = answer_of(*HIDDEN)
    answer.save_record(tmp_path / "answer.json")
    printed = profile(*HIDDEN, "--json", "-").out
    assert (tmp_path / "answer.json").read_text("utf-8") == printed


def test_another_unit_than_m_and_ft_is_refused() -> None:
    answer = answer_of(*HIDDEN)
    with pytest.raises(InputError, match='in m or ft, not "yd"'):
        answer.words(show_in="yd")
