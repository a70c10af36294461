import os
import stat
from pathlib import Path

import pytest

from rulecheck.diagnostics import Refused
from rulecheck.output.writing import write_files


def test_files_are_written_whole_and_nothing_is_left_beside(tmp_path: Path) -> None:
    one, two = tmp_path / "one.txt", tmp_path / "two.json"
    one.write_text("old")
    one.chmod(0o640)
    write_files({one: "Ä\n", two: "{}\n"})
    assert one.read_bytes() == "Ä\n".encode()
    assert two.read_text() == "{}\n"
    assert stat.S_IMODE(one.stat().st_mode) == 0o640
    assert sorted(os.listdir(tmp_path)) == ["one.txt", "two.json"]


def test_one_that_cannot_be_written_stops_all(tmp_path: Path) -> None:
    with pytest.raises(Refused) as refused:
        write_files({tmp_path / "one.txt": "a", tmp_path / "gone" / "two.txt": "b", tmp_path: "c"})
    assert [item.code for item in refused.value.diagnostics] == ["cannot-write", "cannot-write"]
    assert list(tmp_path.iterdir()) == []


def test_a_name_that_the_system_refuses_stops_all(tmp_path: Path) -> None:
    with pytest.raises(Refused):
        write_files({tmp_path / "one.txt": "a", tmp_path / ("x" * 300): "b"})
    assert list(tmp_path.iterdir()) == []


def test_what_was_read_is_never_written_over(tmp_path: Path) -> None:
    design, link = tmp_path / "car.design.yaml", tmp_path / "link"
    design.write_text("design: A\n")
    link.symlink_to(design)
    with pytest.raises(Refused, match="one of the files that were read"):
        write_files({link: "x"}, sources=[design])
    assert design.read_text() == "design: A\n"


def test_devices_are_refused() -> None:
    with pytest.raises(Refused, match="not a regular file"):
        write_files({Path(os.devnull): "x"})


def test_a_link_stays_a_link(tmp_path: Path) -> None:
    target, link = tmp_path / "target", tmp_path / "link"
    target.write_text("old")
    link.symlink_to(target)
    write_files({link: "new"})
    assert link.is_symlink()
    assert target.read_text() == "new"
