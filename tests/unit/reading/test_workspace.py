from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.reading.workspace import Workspace

ASKED = Span("car.design.yaml", 10, 20, 2, 3)


def codes(refused: pytest.ExceptionInfo[Refused]) -> list[str]:
    return [item.code for item in refused.value.diagnostics]


@dataclass
class Kept:
    """A store that is no disk, as a revision of a repository is none."""

    files: dict[str, bytes]
    reads: list[str] = field(default_factory=list)

    def real(self, file: str) -> str | None:
        return None if file.startswith("..") else file

    def bytes(self, file: str, asked: Span | None) -> bytes:
        self.reads.append(file)
        return self.files[file]


@pytest.mark.parametrize("mark", ["folder", "file"])
def test_the_root_is_the_git_work_tree(tmp_path: Path, mark: str) -> None:
    git = tmp_path / ".git"
    git.mkdir() if mark == "folder" else git.write_text("gitdir: elsewhere")
    (tmp_path / "designs").mkdir()
    (tmp_path / "designs" / "rulecheck.yaml").touch()
    assert Workspace.around(tmp_path / "designs" / "car.design.yaml").root == tmp_path


def test_else_the_nearest_folder_with_a_house_file(tmp_path: Path) -> None:
    inner = tmp_path / "designs" / "cars"
    inner.mkdir(parents=True)
    (tmp_path / "rulecheck.yaml").touch()
    (tmp_path / "designs" / "rulecheck.yaml").touch()
    assert Workspace.around(inner / "car.design.yaml").root == tmp_path / "designs"


def test_else_the_folder_of_the_file(tmp_path: Path) -> None:
    assert Workspace.around(tmp_path / "car.design.yaml").root == tmp_path
    assert Workspace.around(tmp_path).root == tmp_path


def test_names_are_relative_to_the_root(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    workspace = Workspace(tmp_path)
    assert workspace.name(tmp_path / "designs" / "car.yaml") == "designs/car.yaml"
    assert workspace.name(tmp_path / "rules" / ".." / "car.yaml") == "car.yaml"
    monkeypatch.chdir(tmp_path)
    assert workspace.name(Path("car.yaml")) == "car.yaml"
    with pytest.raises(Refused) as refused:
        workspace.name(tmp_path.parent / "car.yaml")
    assert codes(refused) == ["outside-root"]


def test_a_root_that_is_reached_through_a_link(tmp_path: Path) -> None:
    (tmp_path / "real").mkdir()
    (tmp_path / "link").symlink_to("real")
    (tmp_path / "real" / "car.yaml").write_text("a: 1")
    assert Workspace(tmp_path / "link").name(tmp_path / "real" / "car.yaml") == "car.yaml"
    assert Workspace(tmp_path / "link").read("car.yaml") == "a: 1"


@pytest.mark.parametrize(
    ("reference", "name"),
    [
        ("parts.csv", "designs/parts.csv"),
        ("./parts.csv", "designs/parts.csv"),
        ("../rules/a.yaml", "rules/a.yaml"),
        ("cars/../../rules/a.yaml", "rules/a.yaml"),
        ("~/a.yaml", "designs/~/a.yaml"),
    ],
)
def test_references_are_relative_to_the_file_that_names_them(tmp_path: Path, reference: str, name: str) -> None:
    assert Workspace(tmp_path).resolve(reference, "designs/car.yaml", ASKED) == name


@pytest.mark.parametrize(
    "reference",
    ["../../a.yaml", "../../../../../../../../etc/passwd", "/etc/passwd", "C:/a.yaml", r"C:\a.yaml", r"\\host\a.yaml"],
)
def test_references_that_leave_the_root_are_refused(tmp_path: Path, reference: str) -> None:
    with pytest.raises(Refused) as refused:
        Workspace(tmp_path).resolve(reference, "designs/car.yaml", ASKED)
    assert codes(refused) == ["outside-root"]
    assert refused.value.diagnostics[0].span == ASKED


def test_a_folder_whose_name_begins_like_the_root_is_outside(tmp_path: Path) -> None:
    (tmp_path / "cars").mkdir()
    (tmp_path / "cars-secret").mkdir()
    with pytest.raises(Refused) as refused:
        Workspace(tmp_path / "cars").resolve("../cars-secret/a.yaml", "car.yaml", ASKED)
    assert codes(refused) == ["outside-root"]


@pytest.mark.parametrize("reference", ["", "  ", "a\x00b"])
def test_references_that_name_nothing(tmp_path: Path, reference: str) -> None:
    with pytest.raises(Refused) as refused:
        Workspace(tmp_path).resolve(reference, "car.yaml", ASKED)
    assert codes(refused) == ["no-such-file"]


def test_a_link_that_leaves_the_root_is_refused_by_resolving_and_by_reading(tmp_path: Path) -> None:
    root = tmp_path / "root"
    root.mkdir()
    (tmp_path / "secret.yaml").write_text("secret: 1")
    (root / "link.yaml").symlink_to("../secret.yaml")
    (root / "folder").symlink_to(tmp_path)
    workspace = Workspace(root)
    for reference in ("link.yaml", "folder/secret.yaml"):
        with pytest.raises(Refused) as refused:
            workspace.resolve(reference, "car.yaml", ASKED)
        assert codes(refused) == ["outside-root"]
        with pytest.raises(Refused) as refused:
            workspace.read(reference, ASKED)
        assert codes(refused) == ["outside-root"]
    assert workspace.texts == {}


def test_a_link_that_stays_inside_is_followed_to_the_real_name(tmp_path: Path) -> None:
    (tmp_path / "real.yaml").write_text("a: 1")
    (tmp_path / "link.yaml").symlink_to("real.yaml")
    workspace = Workspace(tmp_path)
    assert workspace.resolve("link.yaml", "car.yaml", None) == "real.yaml"
    assert workspace.read("link.yaml") == "a: 1"


def test_a_text_is_read_once_and_its_digest_is_of_the_bytes(tmp_path: Path) -> None:
    # SHA-256 of "abc": FIPS 180-4, worked example in the secure hash standard's example document (from memory).
    digest = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
    (tmp_path / "a.yaml").write_bytes(b"abc")
    workspace = Workspace(tmp_path)
    assert workspace.read("a.yaml") == "abc"
    (tmp_path / "a.yaml").write_bytes(b"changed")
    assert workspace.read("a.yaml") == "abc"
    assert workspace.digests == {"a.yaml": digest}
    assert workspace.texts == {"a.yaml": "abc"}


def test_the_digest_tells_line_ends_apart_that_the_text_does_not() -> None:
    store = Kept({"a.yaml": b"a: 1\n", "b.yaml": b"a: 1\r\n"})
    workspace = Workspace(Path("/nowhere"), store=store)
    assert workspace.read("a.yaml") == workspace.read("b.yaml")
    assert workspace.digests["a.yaml"] != workspace.digests["b.yaml"]


def test_another_store_takes_the_place_of_the_disk() -> None:
    store = Kept({"rules/a.yaml": b"a: 1"})
    workspace = Workspace(Path("/nowhere"), store=store)
    name = workspace.resolve("a.yaml", "rules/b.yaml", None)
    assert workspace.read(name) == "a: 1"
    assert workspace.read(name) == "a: 1"
    assert store.reads == ["rules/a.yaml"]


@pytest.mark.parametrize(
    ("mark", "design", "reference", "told", "advice"),
    [
        (
            "",
            "car.yaml",
            "../a.yaml",
            "the design's own folder",
            "with the line 'house: NAME' into the folder above, or",
        ),
        (
            "",
            "car.yaml",
            "../../rules/a.yaml",
            "the design's own folder",
            "into the folder 2 levels above, or make that",
        ),
        ("", "car.yaml", "/a.yaml", "the design's own folder", "into a folder that holds both, or make that a git"),
        (".git", "designs/car.yaml", "../../a.yaml", "the git work tree", "move the file into the work tree"),
        ("rulecheck.yaml", "designs/car.yaml", "../../a.yaml", "the folder of rulecheck.yaml", "into the folder above"),
    ],
)
def test_what_to_do_about_a_file_outside_is_said(
    tmp_path: Path, mark: str, design: str, reference: str, told: str, advice: str
) -> None:
    root = tmp_path / "root"
    (root / "designs").mkdir(parents=True)
    if mark:
        (root / mark).write_text("house: Heron office\n")
    workspace = Workspace.around(root / design)
    with pytest.raises(Refused) as refused:
        workspace.resolve(reference, design, ASKED)
    (found,) = refused.value.diagnostics
    assert f"lies outside {told}" in found.message
    assert advice in found.advice


def test_the_advice_for_a_file_outside_works(tmp_path: Path) -> None:
    (tmp_path / "designs").mkdir()
    (tmp_path / "rulecheck.yaml").write_text("house: Heron office\n")
    workspace = Workspace.around(tmp_path / "designs" / "car.yaml")
    assert workspace.resolve("../rules/a.yaml", "designs/car.yaml", ASKED) == "rules/a.yaml"
