"""What the fuzz runner starts from: sound files of every kind that is read, and values that are wild."""

from __future__ import annotations

from functools import cache

from setupcheck.division.template import template
from setupcheck.shipped import shipped
from tests.bad_input.ring import JOINED, RING
from tests.bad_input.test_house_file import GOOD as HOUSE

KINDS = ("job", "house", "rule", "record", "readings")
SUFFIX = {"job": ".yaml", "house": ".yaml", "rule": ".yaml", "record": ".csv", "readings": ".csv"}

RECORD = "device, what, date, value, note\n" + "".join(
    f"{device}, {what}, 2026-{month:02d}-1{month % 10}, {month + 3} {unit},\n"
    for device, what, unit in (("four-jaw-A", "runout", "um"), ("indicator-B", "reading", "um"), ("head-C", "tilt", "arcsec"))
    for month in range(1, 8)
)  # fmt: skip

WILD = (
    "", "0", "-1", "1", "1e+9", "1e-300", "1e+300", "-0.0", "9" * 29, "9" * 400, "1e+9999", "0 um", "900 mm", "-3 um", "5 m",
    "1e+200 mm", "0.000000001 nm", "2,5 um", "nan", "NaN mm", ".inf", "-.inf", "inf um", "15:30", "no", "010", "0x1F", "1_000",
    "''", "[]", "{}", "[1, 2]", "[0 um, 0 um]", "[9 um, 1 um]", "{a: 1}", "null", "~", "true", "1 deg", "359.99 deg", "90 deg",
    "-1e+9 deg", "400\"", "1deg 99' 99\"", "50 %", "1e+9 %", "-20 %", "40 N m", "0 N m", "32 H6", "32 zz99", "0.1 H7", "9999 H7",
    "32 ±0", "32 ±900", "32 +1 -1", "bore", "teeth", "tooth 14", "tooth 0", "tooth 99999999999999999999", "jaw 2", "mark",
    "{measured: 3 um}", "{measured: 3 um, high_at: tooth 1}", "{measured: 3 um, uncertainty: 9 um}", "{at_most: 1 um}",
    "{device: D, mark: kept}", "chord", "free", "'@'", "a.b.c", "a@b@c", "bore@20", "bore@\u00b2", "x" * 300, "x " * 2000,
    "=1+1", "+1", "-1+1", "@SUM(A1)", "\t=1", "\x1b[31m", "\x1b]0;gone\x07", "\x9b31m", "\u202egnp.exe", "\u2066x\u2069",
    "\u200b", "\u2028", "\ufeff", "\x07", "\x7f", "\x00", "\ud7ff", "\U0001f600", "e\u0301" * 40, "\u0661\u0662", "\u00bd",
    "\u2126",
    "&a x", "*a", "!!python/object/apply:os.system [x]", "!!binary aGk=", "! x", "<<", "? x", "|", ">", "%TAG", "---", "...",
    "{device: {device: {device: x}}}", "[" * 30 + "]" * 30, "{measured: {measured: 1 um}}", "20 degC", "-300 degC", "1e+9 degC",
    "<script>alert(1)</script>", "]]>", "&amp;", "\\", "C:\\a", "../../etc/passwd", "{{7*7}}", "{value}", "%s", "None",
    "__class__",
)  # fmt: skip
BYTES = (
    b"\x00", b"\xff", b"\xfe\xff", b"\xc3", b"\xed\xa0\x80", b"\xf4\x90\x80\x80", b"\x1b[2J", b"\r", b"\t", b"\x85",
    b"\xe2\x80\xa8",
    b"\xef\xbb\xbf", b"\xe2\x80\xae", b":", b"- ", b"  ", b"\n", b"\n---\n", b"{", b"}", b"[", b"]", b",", b"'", b'"', b"#",
    b"<<: ", b"&a ",
    b"*a", b"!", b"|\n", b"%", b"@", b"`", b"? ", b": ", b"9" * 50, b"e+308", b"\x80", b"\x9b", b";", b"=",
)  # fmt: skip


@cache
def sound(kind: str) -> tuple[str, ...]:
    """Texts of that kind that are read without a complaint (a house file may name what a small job does not have)."""
    jobs = shipped("jobs")
    if kind == "job":
        files = [*sorted(jobs.glob("*.yaml")), *sorted((jobs / "mistakes").glob("*.yaml"))]
        return (RING, JOINED, *(path.read_text("utf-8") for path in files))
    if kind == "house":
        return (HOUSE,)
    if kind == "rule":
        return tuple(path.read_text("utf-8") for path in sorted(shipped("rules").glob("*.yaml")))
    return (RECORD,) if kind == "record" else (template(),)
