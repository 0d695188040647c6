"""Getting the text of a file."""

import os
import tempfile
from pathlib import Path

import pytest

from setupcheck.errors import JobError
from setupcheck.yamlfile import read_text
from setupcheck.yamlfile.limits import LARGEST_FILE

NOBODY = 65534


def refusal(path):
    with pytest.raises(JobError) as caught:
        read_text(path)
    return str(caught.value)


def test_the_text_comes_out_with_newlines_and_without_byte_order_mark(tmp_path):
    file = tmp_path / "job.yaml"
    file.write_bytes(b"\xef\xbb\xbfa: 1\r\nb: 2\rc: \xc2\xb1\n")
    assert "a: 1\nb: 2\nc: ±\n" == read_text(file) == read_text(str(file))


def test_a_missing_file_is_one_line(tmp_path):
    assert f"{tmp_path}/no.yaml: there is no such file. Check the name and the directory" == refusal(
        tmp_path / "no.yaml"
    )
    assert ": there is no such file. Check the name and the directory" == refusal("")


def test_a_directory_is_no_job(tmp_path):
    assert f"{tmp_path}: this is a directory. Name a file in it" == refusal(tmp_path)


def test_a_file_name_with_a_nul_is_refused_in_words():
    assert "a\ufffdb: the file cannot be read (embedded null byte). Check the name and the disk" == refusal("a\0b")


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="no named pipes here")
def test_a_pipe_is_refused_and_never_waited_for(tmp_path):
    os.mkfifo(tmp_path / "pipe")
    assert refusal(tmp_path / "pipe").endswith("pipe: this is not a plain file. Name a file on the disk")


@pytest.fixture
def nobody():
    """Somebody who may not read everything, also where the tests are run by the superuser; a folder that is open to all."""
    with tempfile.TemporaryDirectory() as folder:
        Path(folder).chmod(0o755)
        before = os.geteuid()
        if before == 0:
            os.seteuid(NOBODY)
        try:
            yield Path(folder)
        finally:
            os.seteuid(before)


@pytest.mark.skipif(not hasattr(os, "geteuid"), reason="permissions of this kind are not known here")
def test_a_file_that_may_not_be_read_is_said_so(nobody):
    file = nobody / "job.yaml"
    me = os.geteuid()
    os.seteuid(os.getuid())
    file.write_text("a: 1")
    file.chmod(0)
    os.seteuid(me)
    assert refusal(file).endswith("the file may not be read. Check its permissions")


def test_a_denied_file_is_said_so(tmp_path, monkeypatch):
    def denied(*_, **__):
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr("pathlib.Path.stat", denied)
    assert "job.yaml: the file may not be read. Check its permissions" == refusal("job.yaml")


@pytest.mark.parametrize("content", [b"", b"  \n\n", b"\xef\xbb\xbf\r\n"])
def test_an_empty_file_is_refused(tmp_path, content):
    file = tmp_path / "job.yaml"
    file.write_bytes(content)
    assert refusal(file).endswith("job.yaml: the file is empty. Write key: value on its lines")


def test_a_huge_file_is_refused_before_it_is_read(tmp_path, monkeypatch):
    file = tmp_path / "job.yaml"
    with file.open("wb") as stream:
        stream.truncate(100_000_000)
    monkeypatch.setattr(Path, "open", None)  # any attempt to read it would break the test
    assert refusal(file).endswith("the file has 100.0 MB, more than 2 MB. Name a job file, written as YAML")


def test_a_file_of_exactly_the_largest_size_is_read(tmp_path):
    file = tmp_path / "job.yaml"
    file.write_bytes(b"#" * LARGEST_FILE)
    assert LARGEST_FILE == len(read_text(file))
    file.write_bytes(b"#" * (LARGEST_FILE + 1))
    assert "more than 2 MB" in refusal(file)


def test_a_binary_file_is_refused(tmp_path):
    file = tmp_path / "job.yaml"
    file.write_bytes(b"\x7fELF\x00\x01")
    assert refusal(file).endswith("the file is not text. Name a job file, written as YAML")


@pytest.mark.parametrize("name", ["utf-16", "utf-16-be", "utf-32", "utf-32-be"])
def test_a_file_in_another_unicode_form_is_named(tmp_path, name):
    file = tmp_path / "job.yaml"
    mark = "" if name in ("utf-16", "utf-32") else "\ufeff"  # the first two write it themselves
    file.write_bytes((mark + "a: 1").encode(name))
    assert refusal(file).endswith(f"the file is saved as {name[:6].upper()}. Save it as UTF-8")


def test_a_byte_that_is_not_utf8_is_shown_on_its_line(tmp_path):
    file = tmp_path / "job.yaml"
    file.write_bytes("a: 1\r\nmaß: ".encode() + b"M\xfcller\n")
    expected = f"""\
{file}:2:7
     2 | maß: M\ufffdller
       |       ^
  the byte 0xfc is not UTF-8. Save the file as UTF-8"""
    assert expected == refusal(file)
