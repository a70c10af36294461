"""The page on proofreading names every finding that the studies make, with its weight."""

from __future__ import annotations

import ast
import re

from markdown_blocks import ROOT

from rulecheck.diagnostics import CODES
from rulecheck.handbook import pages

WEIGHTS = ("fault", "question", "remark")


def _made() -> set[tuple[str, str]]:
    """Code and weight of every finding that is written out in the studies."""
    found = set()
    for path in sorted((ROOT / "rulecheck" / "studies").glob("*.py")):
        for node in ast.walk(ast.parse(path.read_text("utf-8"))):
            if isinstance(node, ast.Call) and getattr(node.func, "id", "") in ("Proof", "_about"):
                texts = [item.value for item in node.args[:3] if isinstance(item, ast.Constant)]
                if len(texts) >= 2:
                    found.add((str(texts[0]), str(texts[1])))
    return found


def test_every_finding_is_explained() -> None:
    rows = re.findall(r"^\| `([a-z-]+)` \| (\w+) \|", pages.page("proofreading"), re.MULTILINE)
    assert len(rows) > 6
    assert set(rows) == _made()
    assert {weight for _, weight in rows} <= set(WEIGHTS)
    assert not {code for code, _ in rows} & set(CODES), "a code of a fault of reading or binding is another one"
