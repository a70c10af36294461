from __future__ import annotations

import os
import socket
from pathlib import Path

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.reading.bounds import MAXIMUM_BYTES
from rulecheck.reading.store import Disk

ASKED = Span("car.design.yaml", 10, 20, 2, 3)


def refusal(root: Path, file: str) -> str:
    with pytest.raises(Refused) as refused:
        Disk(root).bytes(file, ASKED)
    assert len(refused.value.diagnostics) == 1
    item = refused.value.diagnostics[0]
    assert item.span == ASKED
    assert item.advice
    return item.code


def test_reads_the_bytes_as_they_are(tmp_path: Path) -> None:
    (tmp_path / "a.yaml").write_bytes(b"\xef\xbb\xbfa\r\n\x00")
    assert Disk(tmp_path).bytes("a.yaml", None) == b"\xef\xbb\xbfa\r\n\x00"


def test_a_pipe_is_refused_without_waiting_for_it(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.yaml")
    assert refusal(tmp_path, "pipe.yaml") == "not-a-file"


def test_a_folder_is_refused(tmp_path: Path) -> None:
    (tmp_path / "folder").mkdir()
    assert refusal(tmp_path, "folder") == "not-a-file"
    assert refusal(tmp_path, ".") == "not-a-file"


def test_a_socket_is_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)  # the path of a socket may not be long
    with socket.socket(socket.AF_UNIX) as listener:
        listener.bind("socket.yaml")
        assert refusal(tmp_path, "socket.yaml") == "not-a-file"


def test_a_device_is_refused() -> None:
    assert refusal(Path("/dev"), "zero") == "not-a-file"


def test_a_missing_file_is_refused_with_the_nearest_name(tmp_path: Path) -> None:
    (tmp_path / "lowland.ruleset.yaml").touch()
    assert refusal(tmp_path, "missing.csv") == "no-such-file"
    assert refusal(tmp_path, "no/such/folder.yaml") == "no-such-file"
    with pytest.raises(Refused, match=r"did you mean 'lowland\.ruleset\.yaml'\?"):
        Disk(tmp_path).bytes("lowlnd.ruleset.yaml", None)


def test_names_that_no_file_can_have(tmp_path: Path) -> None:
    assert refusal(tmp_path, "x" * 5_000) == "no-such-file"
    (tmp_path / "a.yaml").touch()
    assert refusal(tmp_path, "a.yaml/b.yaml") == "no-such-file"


def test_a_circle_of_links_is_refused(tmp_path: Path) -> None:
    (tmp_path / "a.yaml").symlink_to("b.yaml")
    (tmp_path / "b.yaml").symlink_to("a.yaml")
    assert refusal(tmp_path, "a.yaml") == "no-such-file"


def test_the_bound_on_bytes(tmp_path: Path) -> None:
    (tmp_path / "most.yaml").write_bytes(b"a" * MAXIMUM_BYTES)
    assert len(Disk(tmp_path).bytes("most.yaml", None)) == MAXIMUM_BYTES
    (tmp_path / "more.yaml").write_bytes(b"a" * (MAXIMUM_BYTES + 1))
    assert refusal(tmp_path, "more.yaml") == "too-large"
    (tmp_path / "five.yaml").write_bytes(b"a" * (5 * 1024 * 1024))
    with pytest.raises(Refused, match=str(MAXIMUM_BYTES)):
        Disk(tmp_path).bytes("five.yaml", None)


def test_real_names(tmp_path: Path) -> None:
    disk = Disk(tmp_path)
    assert disk.real("a/../b.yaml") == "b.yaml"
    assert disk.real("../b.yaml") is None
    assert disk.real("a\x00b") is None
