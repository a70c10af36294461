"""Track files: what is read, and what is said of those that cannot be driven."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import pytest
import yaml
from jsonschema import Draft202012Validator

from rulecheck.diagnostics import Refused
from rulecheck.model import track_reader
from rulecheck.model.schemas import track_schema
from rulecheck.model.track import Track
from rulecheck.model.track_reader import read_track
from rulecheck.reading.workspace import Workspace

ROOT = Path(__file__).parents[3]
TRACKS = sorted((ROOT / "designs_demo").glob("*.track.yaml"))
HILL = "track: Combe\nkind: hill\naltitude: 90 m\nsegments:\n"
RING = "track: Dish\nkind: circuit\naltitude: 0 m\nsegments:\n"


def read(folder: Path, text: str) -> Track:
    (folder / "a.track.yaml").write_text(text, encoding="utf-8")
    return read_track(Workspace(folder), "a.track.yaml")


def said(folder: Path, text: str) -> list[str]:
    with pytest.raises(Refused) as refused:
        read(folder, text)
    return [str(item) for item in refused.value.diagnostics]


def test_a_track_is_read_in_si_units(tmp_path: Path) -> None:
    track = read(
        tmp_path,
        HILL
        + "  - {length: 0.2 km, grade: 10 %}\n"
        + "  - {name: Stile, length: 50 m, radius: 2500 cm, direction: left, banking: 4 deg, dip: 400 m}\n"
        + "  - {length: 30 m, radius: 40 m, direction: right, crest: 0.5 km}\n",
    )
    assert (track.name, track.kind, track.altitude, track.step, track.length) == ("Combe", "hill", 90, 2, 280)
    first, stile, last = track.segments
    assert (first.name, stile.name, last.name) == ("segment 1", "Stile", "segment 3")
    assert first.slope == pytest.approx(math.atan(0.1))
    assert (first.curvature, first.banking, first.dip) == (0, 0, 0)
    assert stile.curvature == -1 / 25
    assert stile.banking == pytest.approx(math.radians(4))
    assert (stile.dip, last.dip, last.curvature) == (1 / 400, -1 / 500, 1 / 40)


@pytest.mark.parametrize(
    ("segments", "expected"),
    [
        (
            "  - {length: 10 m, radius: 5 m}\n",
            ["a.track.yaml:5:28: missing-key: 'direction:' is missing here; expected left or right"],
        ),
        (
            "  - {length: 10 m, direction: left}\n",
            ["a.track.yaml:5:31: bad-track: a straight has no direction; add its radius, or take the key out"],
        ),
        (
            "  - {length: 10 m, radius: 5 m, direction: lefft}\n  - {length: 0 m}\n",
            [
                "a.track.yaml:5:44: unknown-choice: 'lefft' is no direction; expected left or right; did you mean 'left'?",
                "a.track.yaml:6:14: bad-track: '0 m' is too small; expected at least 0.1 m",
            ],
        ),
        (
            "  - {length: 10 m, banking: 50 deg, dip: 3 m, crest: 4 m}\n",
            [
                "a.track.yaml:5:29: bad-track: '50 deg' is steeper than a road can be; expected less than 45 deg, a grade of 78 %",
                "a.track.yaml:5:54: bad-track: a segment is a dip or a crest, not both",
            ],
        ),
        (
            "  - {length: 10}\n",
            ["a.track.yaml:5:14: unit-missing: '10' has no unit; expected length [m]; write the unit, for example '10 m'"],
        ),
        (
            "  - {length: 10 m, grade: 12 kg}\n",
            None,
        ),
    ],
)  # fmt: skip
def test_what_is_said_of_segments(tmp_path: Path, segments: str, expected: list[str] | None) -> None:
    found = said(tmp_path, HILL + segments)
    if expected is None:
        assert found[0].startswith("a.track.yaml:5:30: wrong-dimension:")
    else:
        assert found == expected


def test_a_circuit_must_close(tmp_path: Path) -> None:
    assert said(
        tmp_path, RING + "  - {length: 100 m, grade: 2 %}\n  - {length: 60 m, radius: 30 m, direction: left}\n"
    ) == [
        "a.track.yaml:1:8: bad-track: the circuit ends 2.0 m above its start; "
        "expected the height of the start, within 1 m; mend the grades",
        "a.track.yaml:1:8: bad-track: the circuit turns by -115 deg in all; "
        "expected whole turns of 360 deg, within 10 deg; mend the radii",
    ]


def test_a_hill_need_not_close(tmp_path: Path) -> None:
    assert read(tmp_path, HILL + "  - {length: 100 m, grade: 2 %}\n").length == 100


def test_a_figure_of_eight_closes(tmp_path: Path) -> None:
    bends = "".join(f"  - {{length: 100 m, radius: 30 m, direction: {way}}}\n" for way in ("left", "right"))
    assert read(tmp_path, RING + bends).kind == "circuit"


def test_bounds(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    assert said(tmp_path, HILL + "  - {length: 300 km}\n") == [
        "a.track.yaml:1:8: too-large: 300000 m in steps of 2 m are more than 100000 steps; state a larger step"
    ]
    assert said(tmp_path, HILL.replace("segments:\n", "segments: []\n")) == [
        "a.track.yaml:1:8: bad-track: the track has no segments; expected 1 to 2000"
    ]
    monkeypatch.setattr(track_reader, "MOST_SEGMENTS", 2)
    assert said(tmp_path, HILL + "  - {length: 3 m}\n" * 3) == [
        "a.track.yaml:1:8: bad-track: the track has 3 segments; expected 1 to 2"
    ]


def test_keys_and_kinds(tmp_path: Path) -> None:
    text = HILL.replace("hill", "loop") + "  - {length: 3 m}\n"
    assert said(tmp_path, text) == [
        "a.track.yaml:2:7: unknown-choice: 'loop' is no kind of track; expected circuit or hill"
    ]
    assert any(item.endswith("did you mean 'length'?") for item in said(tmp_path, HILL + "  - {lenght: 3 m}\n"))


def _tree(text: str) -> Any:
    return yaml.load(text, Loader=yaml.BaseLoader)


@pytest.mark.parametrize("path", TRACKS, ids=lambda path: path.name)
def test_demo_tracks_fit_schema_and_reader(path: Path) -> None:
    assert not list(Draft202012Validator(track_schema()).iter_errors(_tree(path.read_text("utf-8"))))
    assert read_track(Workspace(path.parent), path.name).length > 1000


def test_there_are_demo_tracks() -> None:
    assert TRACKS


def test_the_schema_is_a_schema_and_refuses_what_the_reader_refuses() -> None:
    schema = track_schema()
    Draft202012Validator.check_schema(schema)
    validator = Draft202012Validator(schema)
    good = _tree(HILL + "  - {length: 10 m, radius: 5 m, direction: left}\n")
    assert validator.is_valid(good)
    for wrong in (
        _tree(HILL.replace("hill", "loop") + "  - {length: 3 m}\n"),
        _tree(HILL + "  - {length: 3 m, direction: up}\n"),
        _tree(HILL + "  - {radius: 3 m}\n"),
        _tree(HILL + "  - {length: 3 m, width: 8 m}\n"),
    ):
        assert not validator.is_valid(wrong)
