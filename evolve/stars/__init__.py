"""The stars: radius models by the name a config calls them. One file a model.

To add a star: write its `structure` (`evolve.stars.contract`), its Keys and `prepare`, end the
file with a `MODEL`, and put one line into the table below.
"""

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
from evolve.stars.contract import StarModel

MODELS: dict[str, StarModel] = {
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

__all__ = ["MODELS", "StarModel"]
