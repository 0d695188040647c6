"""Keeps pydantic from looking for plugins of other packages, of which none belongs in this command.

PYDANTIC_DISABLE_PLUGINS turns the search off, but pydantic still imports what it would search with: `importlib.metadata`,
and with it the mail, zip and socket libraries, for a thirtieth of the command. So a search that finds nothing stands in its
place. Should pydantic ever ask it for anything else, it brings in pydantic's own.
"""

from __future__ import annotations

import importlib
import os
import sys
from types import ModuleType

SEARCH = "pydantic.plugin._loader"


class _NoSearch(ModuleType):
    """Stands for pydantic's search for plugins."""

    @staticmethod
    def get_plugins() -> tuple[()]:
        """No plugins."""
        return ()

    def __getattr__(self, name: str) -> object:
        if name.startswith("__"):  # what the import system asks of every module
            raise AttributeError(name)
        sys.modules.pop(SEARCH, None)
        return getattr(importlib.import_module(SEARCH), name)


def leave_out() -> None:
    """To be called before pydantic is imported."""
    os.environ.setdefault("PYDANTIC_DISABLE_PLUGINS", "1")
    if os.environ["PYDANTIC_DISABLE_PLUGINS"] in ("1", "true", "__all__"):
        sys.modules.setdefault(SEARCH, _NoSearch(SEARCH))
