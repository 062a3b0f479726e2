"""The list of digests: the form ordinary tools read, and what checking a folder against it says."""

import hashlib
import shutil
import subprocess
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket.errors import RegisterError
from rankdocket.register import manifest

FILES = {"report.html": b"<p>", "received/a b.csv": b"x,y\n", "Überblick.txt": b"", "received/deep/c.csv": b"\x00\xff"}


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    place = tmp_path / "1"
    for name, data in (FILES | {"SHA256SUMS": manifest.sha256sums(FILES)}).items():
        (place / name).parent.mkdir(parents=True, exist_ok=True)
        (place / name).write_bytes(data)
    return place


def _system_check(folder: Path) -> subprocess.CompletedProcess[str]:
    tool = shutil.which("sha256sum")
    assert tool is not None, "this test needs the system's sha256sum"
    command = [tool, "--check", "--strict", "--quiet", "SHA256SUMS"]
    return subprocess.run(command, cwd=folder, capture_output=True, text=True, check=False)


def test_the_list_is_sorted_and_leaves_itself_out() -> None:
    entries = manifest.sha256sums(FILES).decode().splitlines()
    assert [entry[66:] for entry in entries] == [
        "received/a b.csv",
        "received/deep/c.csv",
        "report.html",
        "Überblick.txt",
    ]
    # The digest of no bytes at all is the best known one: FIPS 180-4 example, also printed in RFC 6234.
    assert entries[3][:66] == "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855  "


def test_the_systems_own_tool_verifies_the_list(folder: Path) -> None:
    assert _system_check(folder).returncode == 0
    assert manifest.check(folder) == ()


def test_the_systems_own_tool_and_the_check_find_the_same_altered_file(folder: Path) -> None:
    (folder / "report.html").write_bytes(b"<q>")
    assert "report.html: FAILED" in _system_check(folder).stdout
    assert manifest.check(folder) == (f"{folder / 'report.html'} was altered: it does not have the digest listed.",)


def test_missing_altered_and_extra_files_are_each_named(folder: Path) -> None:
    (folder / "received/deep/c.csv").unlink()
    (folder / "received/a b.csv").write_bytes(b"x,z\n")
    (folder / "received/d.csv").write_bytes(b"")
    assert manifest.check(folder) == (
        f"{folder / 'received/a b.csv'} was altered: it does not have the digest listed.",
        f"{folder / 'received/deep/c.csv'} is missing.",
        f"{folder / 'received/d.csv'} is not listed in SHA256SUMS.",
    )


def test_any_single_changed_byte_of_any_file_is_found_and_the_file_named(folder: Path) -> None:
    for name, data in FILES.items():
        for position, byte in enumerate(data):
            (folder / name).write_bytes(data[:position] + bytes([byte ^ 1]) + data[position + 1 :])
            [problem] = manifest.check(folder)
            assert str(folder / name) in problem
        (folder / name).write_bytes(data)
    assert manifest.check(folder) == ()


def test_any_single_changed_byte_of_the_list_itself_is_found(folder: Path) -> None:
    data = (folder / "SHA256SUMS").read_bytes()
    for position, byte in enumerate(data):
        (folder / "SHA256SUMS").write_bytes(data[:position] + bytes([byte ^ 0x20]) + data[position + 1 :])
        assert manifest.check(folder) != (), position


def test_a_folder_without_its_list_cannot_be_checked_and_says_so(folder: Path) -> None:
    (folder / "SHA256SUMS").unlink()
    [problem] = manifest.check(folder)
    assert problem == f"{folder / 'SHA256SUMS'} is missing: nothing in {folder} can be checked."


def test_a_list_that_was_emptied_leaves_every_file_unlisted(folder: Path) -> None:
    (folder / "SHA256SUMS").write_bytes(b"")
    assert len(manifest.check(folder)) == len(FILES)


def test_a_link_in_the_place_of_a_file_or_beside_it_is_named_and_not_followed(folder: Path) -> None:
    elsewhere = folder.parent / "elsewhere"
    elsewhere.mkdir()
    (elsewhere / "same.html").write_bytes(FILES["report.html"])
    (folder / "report.html").unlink()
    (folder / "report.html").symlink_to(elsewhere / "same.html")
    (folder / "more").symlink_to(elsewhere)
    assert manifest.check(folder) == (
        f"{folder / 'report.html'} is a link or something else instead of a plain file.",
        f"{folder / 'more'} is not listed in SHA256SUMS.",
    )


def test_a_folder_in_the_place_of_a_file_and_a_file_behind_a_link_are_named(folder: Path) -> None:
    (folder / "report.html").unlink()
    (folder / "report.html").mkdir()
    (folder / "received").rename(folder.parent / "received")
    (folder / "received").symlink_to(folder.parent / "received")
    assert manifest.check(folder) == (
        *(
            f"{folder / name} is a folder or lies behind a link instead of being a plain file."
            for name in ("received/a b.csv", "received/deep/c.csv", "report.html")
        ),
        f"{folder / 'received'} is not listed in SHA256SUMS.",
    )


def test_a_list_that_points_outside_its_folder_or_twice_at_one_file_is_refused_line_by_line(folder: Path) -> None:
    (folder.parent / "outside.txt").write_bytes(b"")
    digest = hashlib.sha256(b"").hexdigest()
    first = manifest.sha256sums(FILES).splitlines(keepends=True)[0]
    with (folder / "SHA256SUMS").open("ab") as file:
        file.write(f"{digest}  ../outside.txt\n".encode() + first)
    assert manifest.check(folder) == tuple(
        f"{folder / 'SHA256SUMS'}: line {number} is not a digest and the name of one more file." for number in (5, 6)
    )


@pytest.mark.parametrize(
    "name",
    ["", "/etc/a", "../a", "a/../b", "a//b", "./a", "a/", "a\nb", "a\\b", "a\x00", "SHA256SUMS", "\udcff"],
)
def test_a_name_that_leaves_the_folder_or_that_no_list_can_hold_is_refused(name: str) -> None:
    with pytest.raises(RegisterError, match="cannot be the name of a file of an edition"):
        manifest.sha256sums({name: b""})


def test_a_name_that_is_a_file_and_a_folder_at_once_is_refused() -> None:
    with pytest.raises(RegisterError, match="'a' cannot be both a file and the folder of 'a/b/c'"):
        manifest.sha256sums({"a": b"", "a/b/c": b""})


@given(st.dictionaries(st.text(st.characters(codec="utf-8"), min_size=1), st.binary(), max_size=6))
def test_every_list_has_one_line_a_file_or_is_refused(files: dict[str, bytes]) -> None:
    try:
        entries = manifest.sha256sums(files).decode().split("\n")
    except RegisterError:
        return
    assert entries == [*(f"{hashlib.sha256(files[name]).hexdigest()}  {name}" for name in sorted(files)), ""]
