"""What `import profiler` offers: sorted, complete and documented."""

import inspect
import re
import subprocess
import sys
from types import ModuleType
from typing import Any

import pytest

import profiler
from tests.asking import ROOT

PUBLIC = {name: getattr(profiler, name) for name in profiler.__all__}
FUNCTIONS = sorted(n for n, value in PUBLIC.items() if inspect.isfunction(value))
CLASSES = sorted(n for n, value in PUBLIC.items() if inspect.isclass(value))


def parameters(function: Any) -> list[inspect.Parameter]:
    return list(inspect.signature(function).parameters.values())


def test_all_holds_the_sorted_public_names() -> None:
    loaded = [
        name
        for name, value in vars(profiler).items()
        if not name.startswith("_") and not isinstance(value, ModuleType)
    ]
    assert profiler.__all__ == sorted(loaded) == dir(profiler)
    assert list(profiler._HOMES) == profiler.__all__


def test_a_name_that_is_not_public_is_no_attribute() -> None:
    with pytest.raises(AttributeError, match="no attribute 'sight_height'"):
        _ = profiler.sight_height


@pytest.mark.parametrize("name", FUNCTIONS)
def test_a_public_function_documents_what_style_asks(name: str) -> None:
    function = PUBLIC[name]
    text = inspect.getdoc(function) or ""
    first = text.splitlines()[0]
    assert first.endswith(".")
    assert len(first) < 89
    sections = re.findall(r"^(\w+)\n-{3,}$", text, re.MULTILINE)
    if parameters(function):
        assert "Parameters" in sections
        assert "Raises" in sections
    for parameter in parameters(function):
        assert re.search(rf"^\W*.*\b{parameter.name}\b.* : ", text, re.MULTILINE)
    annotation = inspect.signature(function).return_annotation
    assert annotation is not inspect.Signature.empty


@pytest.mark.parametrize("name", FUNCTIONS)
def test_after_two_parameters_the_rest_go_by_keyword(name: str) -> None:
    positional = [
        p
        for p in parameters(PUBLIC[name])
        if p.kind in (p.POSITIONAL_ONLY, p.POSITIONAL_OR_KEYWORD)
    ]
    assert len(positional) <= 3
    assert len(positional) <= 2 or name == "look"  # a terrain and two stations


@pytest.mark.parametrize("name", CLASSES)
def test_a_public_class_says_what_it_is(name: str) -> None:
    assert (PUBLIC[name].__doc__ or "").strip().split("\n")[0].endswith(".")


@pytest.mark.parametrize("name", ["InputError", "DemError", "OutsideDemError"])
def test_every_error_is_a_profiler_error(name: str) -> None:
    assert issubclass(PUBLIC[name], profiler.ProfilerError)


def test_importing_the_package_leaves_the_heavy_libraries_alone() -> None:
    code = (
        "import sys, profiler, profiler.cli.profile; print(*sorted("
        "{'matplotlib', 'scipy', 'numba', 'pyogrio', 'shapely', 'rich', 'html'}"
        " & set(sys.modules)))"
    )
    done = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, check=True, cwd=ROOT
    )
    assert done.stdout.decode().split() == []
