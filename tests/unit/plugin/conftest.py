"""A folder of invented distributions for every test of the plugin door."""

from __future__ import annotations

import pytest
from unit.plugin.strangers import Site


@pytest.fixture
def site(tmp_path, monkeypatch):
    folder = tmp_path / "site"
    folder.mkdir()
    return Site(folder, monkeypatch)
