"""
Nothing that a test prints comes from, or goes into, the cache of the person who runs it.

Garbage is looked for seldom: the program itself does not look for it at all, and the suite is a fifth faster.
"""

import gc
import os
from collections.abc import Iterator

import pytest

gc.set_threshold(200_000, 50, 50)


@pytest.fixture(scope="session", autouse=True)
def _own_cache(tmp_path_factory: pytest.TempPathFactory) -> Iterator[None]:
    place = tmp_path_factory.mktemp("cache")
    before = {name: os.environ.get(name) for name in ("XDG_CACHE_HOME", "LOCALAPPDATA")}
    os.environ |= {name: str(place) for name in before}
    yield
    for name, value in before.items():
        if value is None:
            os.environ.pop(name, None)
        else:
            os.environ[name] = value
