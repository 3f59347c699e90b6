"""The stars: one file a radius model, one table of all."""

from evolve.stars import compact, dwarf, power_law, white_dwarf

MODELS = {
    "compact": compact.MODEL,
    "power-law": power_law.MODEL,
    "white-dwarf": white_dwarf.MODEL,
    "dwarf": dwarf.MODEL,
}

__all__ = ["MODELS"]
