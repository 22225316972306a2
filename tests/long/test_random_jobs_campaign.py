"""A thousand random jobs; run it by hand: ``pytest tests/long/test_random_jobs_campaign.py``."""

import pytest

from flatprep.nest.problem import Budget
from tests.nest.test_random_jobs import check


@pytest.mark.parametrize("seed", range(1000))
def test_random_job(seed):
    check(seed, Budget(steps=8, seed=1))
