"""The stars: one file a radius model, one table of all."""

from evolve.stars import (
    compact,
    dwarf,
    expanding,
    giant,
    helium_star,
    main_sequence,
    power_law,
    track,
    white_dwarf,
)

MODELS = {
    "compact": compact.MODEL,
    "power-law": power_law.MODEL,
    "white-dwarf": white_dwarf.MODEL,
    "helium-star": helium_star.MODEL,
    "dwarf": dwarf.MODEL,
    "main-sequence": main_sequence.MODEL,
    "giant": giant.MODEL,
    "expanding": expanding.MODEL,
    "track": track.MODEL,
}

__all__ = ["MODELS"]
