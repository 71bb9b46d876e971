"""What every test may use: the marker for tests that need more than numpy."""


def pytest_configure(config):
    config.addinivalue_line(
        "markers",
        "native: needs more than numpy (scipy, a browser, files of the build), so it is not run inside Pyodide",
    )
