"""Spoiled inputs by the thousand: `python -m tests.fuzz`; a short version is in the ordinary tests."""
