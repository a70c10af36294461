"""Options and fixtures that all tests share."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest


def pytest_addoption(parser: pytest.Parser) -> None:
    parser.addoption(
        "--update-goldens", action="store_true", help="write what is printed now into the golden files; read the diff"
    )


@pytest.fixture
def golden(request: pytest.FixtureRequest) -> Callable[[Path, str], None]:
    """Holds a text against a golden file; with `--update-goldens` it writes the file instead."""

    def hold(path: Path, text: str) -> None:
        if request.config.getoption("--update-goldens"):
            path.write_text(text, encoding="utf-8", newline="\n")
        assert text == path.read_text(encoding="utf-8"), f"{path.name} differs; --update-goldens writes it anew"

    return hold
