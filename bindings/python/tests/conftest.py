"""What all tests share: settings of random cases, and a last line that tests/run adds up."""

import os

import hypothesis
import matplotlib

matplotlib.use("Agg")

# RAMPWISE_SEED gives other random cases; without it they are the same every time.
hypothesis.settings.register_profile(
    "rampwise", derandomize="RAMPWISE_SEED" not in os.environ, deadline=None, max_examples=15, database=None,
    print_blob=True,
)  # fmt: skip
hypothesis.settings.load_profile("rampwise")

_counts = {"passed": 0, "failed": 0}


def pytest_configure(config):
    seed = os.environ.get("RAMPWISE_SEED")
    if seed is not None:
        config.option.hypothesisseed = seed


def pytest_runtest_logreport(report):
    if report.failed:
        _counts["failed"] += 1
    elif report.when == "call" and report.passed:
        _counts["passed"] += 1


def pytest_collectreport(report):
    _counts["failed"] += report.failed


def pytest_unconfigure():
    print(f"{_counts['passed']} passed, {_counts['failed']} failed")
