"""Runs pytest inside Pyodide and counts. Read and called by wasm_tests.mjs."""

import json
import os
import sys


class Count:
    """A pytest plugin that counts outcomes and keeps the text of what failed."""

    def __init__(self):
        self.counts = {"passed": 0, "failed": 0, "skipped": 0, "error": 0}
        self.failures = []

    def pytest_runtest_logreport(self, report):
        if report.failed:
            self.counts["failed" if report.when == "call" else "error"] += 1
            self.failures.append(f"{report.nodeid}\n{report.longreprtext[-1500:]}")
        elif report.skipped:
            self.counts["skipped"] += 1
        elif report.when == "call":
            self.counts["passed"] += 1

    def pytest_collectreport(self, report):
        if report.failed:
            self.counts["error"] += 1
            self.failures.append(f"{report.nodeid}\n{report.longreprtext[-1500:]}")


def run(args):
    """pytest with these arguments from /repo; the counts as JSON."""
    import hypothesis
    import pytest

    # WebAssembly is several times slower and its clock coarse: fewer examples, no deadline.
    hypothesis.settings.register_profile("wasm", max_examples=10, deadline=None, derandomize=True,
                                         suppress_health_check=list(hypothesis.HealthCheck))
    hypothesis.settings.load_profile("wasm")
    os.chdir("/repo")
    sys.path.insert(0, "/repo")
    count = Count()
    code = pytest.main([*args, "--capture=sys", "-p", "no:cacheprovider", "-m", "not native"], plugins=[count])
    return json.dumps({"code": int(code), **count.counts, "failures": count.failures})
