"""Finds Chromium, or installs Debian's."""

from __future__ import annotations

import os
import shutil
import subprocess

from steps import Stop

NAMES = ("chromium", "chromium-browser", "google-chrome", "google-chrome-stable")
# No sandbox: tests often run as root in a container. The rest keeps the browser itself off the network.
FLAGS = ["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking",
         "--disable-component-update", "--disable-sync"]


def find_chromium() -> str:
    """The path of a Chromium; ``CHROMIUM`` in the environment wins. Installs one by apt-get where it may."""
    given = os.environ.get("CHROMIUM")
    found = given or next(filter(None, map(shutil.which, NAMES)), None)
    if found:
        return found
    by_hand = "Install it yourself (sudo apt install chromium), or set CHROMIUM to the path of a Chromium or Chrome."
    if os.geteuid() != 0 or not shutil.which("apt-get"):
        raise Stop(f"The browser tests need Chromium, and none was found. {by_hand}")
    print("      installing Debian's chromium by apt-get", flush=True)
    for command in (["apt-get", "update", "-q"], ["apt-get", "install", "-q", "-y", "chromium"]):
        done = subprocess.run(command, text=True, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, check=False,
                              env={**os.environ, "DEBIAN_FRONTEND": "noninteractive"})
    found = shutil.which("chromium")
    if not found:
        raise Stop(f"apt-get could not install chromium. {by_hand}\n{done.stdout[-800:]}")
    return found
