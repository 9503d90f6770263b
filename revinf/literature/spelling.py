"""How terms are spelled when compared, for the layers above that need no other knowledge."""

from __future__ import annotations

from revinf.knowledge import normalise_term

__all__ = ["normalise_term"]
