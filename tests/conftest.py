"""What all tests share."""

import os
from pathlib import Path

import pytest
from hypothesis import settings

# a failure of flatprep itself is to be seen whole in a test
os.environ["FLATPREP_TRACEBACK"] = "1"
settings.register_profile("house", deadline=None, max_examples=60, derandomize=True)
# pytest --hypothesis-profile long: other examples each time, and many of them
settings.register_profile("long", deadline=None, max_examples=3000, derandomize=False, print_blob=True)
settings.load_profile("house")


@pytest.fixture(scope="session")
def shared_data() -> Path:
    """The shared corpus, where FLATPREP_DATA says it is."""
    folder = os.environ.get("FLATPREP_DATA")
    if not folder:
        pytest.skip("FLATPREP_DATA is not set: the shared corpus is not here")
    return Path(folder)
