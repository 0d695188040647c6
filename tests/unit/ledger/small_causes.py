"""Causes and accounts of one line, and pushes as plain numbers, for tests by hand. mm, rad."""

from __future__ import annotations

import pytest

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Push


def disc(name: str, high: float, mean: complex = 0j) -> Account:
    return Account.of(Cause(name, "disc", high=high, mean=mean))


def length(name: str, high: float, mean: float = 0.0) -> Account:
    return Account.of(Cause(name, "length", high=high, mean=mean + 0j))


def one_sided(name: str, high: float) -> Account:
    return Account.of(Cause(name, "one-sided", high=high))


def open_one(name: str) -> Account:
    return Account.of(Cause(name, "undetermined", missing=f"path.{name}"))


def unknown(name: str) -> Cause:
    return Cause(name, "undetermined", missing=f"path.{name}")


def told(pushes: list[Push]) -> dict[str, tuple[float, float, float]]:
    return {p.cause.key: (p.down, p.up, p.known) for p in pushes}


def near(*values: float) -> object:
    return pytest.approx(values, abs=1e-12)
