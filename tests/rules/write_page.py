"""Writes rules/README.md from the rule files: `python -m tests.rules.write_page` in the checkout."""

from __future__ import annotations

from pathlib import Path

from setupcheck.rulebook import load_rulebook
from setupcheck.rulebook.describe import page

from .fakebook import QUANTITIES

RULES = Path(__file__).resolve().parents[2] / "rules"

if __name__ == "__main__":
    (RULES / "README.md").write_text(page(load_rulebook(RULES, quantities=QUANTITIES)), encoding="utf-8")
