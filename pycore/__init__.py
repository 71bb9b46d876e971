"""Quenchwright's core: from a job (steel, part, aim, shop) to a plan for hardening and tempering it."""

__version__ = "0.1.0"
DATA_EDITION = "2026-12"
