"""Answers that several files of tests draw, each worked out once."""

from collections.abc import Callable
from functools import cache

import pytest

from tests.plots.figure_cases import CASES, Case


@pytest.fixture(scope="session")
def case_of(tmp_path_factory: pytest.TempPathFactory) -> Callable[[str], Case]:
    @cache
    def made(name: str) -> Case:
        return CASES[name](tmp_path_factory.mktemp("dem"))

    return made
