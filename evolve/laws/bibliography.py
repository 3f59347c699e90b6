"""The publications that laws, stars and constants rest on.

Where a title or a DOI was not certain it is left out.
"""

from typing import NamedTuple

from evolve.errors import ConfigError


class Source(NamedTuple):
    """One publication. Empty texts are unknown or do not apply.

    `authors` in the order of the paper, "Family, I." each; `journal` is the publisher of a
    book, which has no volume.
    """

    authors: tuple[str, ...]
    year: int
    title: str
    journal: str
    volume: str = ""
    page: str = ""
    doi: str = ""


def _s(authors, *rest):
    return Source(tuple(authors.split("; ")), *rest)


_AA, _APJ, _MNRAS = "Astronomy and Astrophysics", "The Astrophysical Journal", (
    "Monthly Notices of the Royal Astronomical Society"
)
_ACTA = "Acta Astronomica"

SOURCES = {
    "andronov-2003": _s(
        "Andronov, N.; Pinsonneault, M.; Sills, A.", 2003,
        "Cataclysmic Variables: An Empirical Angular Momentum Loss Prescription from Open "
        "Cluster Data",
        _APJ, "582", "358", "10.1086/343030",
    ),
    "baraffe-1998": _s(
        "Baraffe, I.; Chabrier, G.; Allard, F.; Hauschildt, P. H.", 1998,
        "Evolutionary models for solar metallicity low-mass stars: mass-magnitude "
        "relationships and color-magnitude diagrams",
        _AA, "337", "403",
    ),
    "baraffe-2003": _s(
        "Baraffe, I.; Chabrier, G.; Barman, T. S.; Allard, F.; Hauschildt, P. H.", 2003,
        "Evolutionary models for cool brown dwarfs and extrasolar giant planets. The case of "
        "HD 209458",
        _AA, "402", "701", "10.1051/0004-6361:20030252",
    ),
    "bardeen-press-teukolsky-1972": _s(
        "Bardeen, J. M.; Press, W. H.; Teukolsky, S. A.", 1972,
        "Rotating Black Holes: Locally Nonrotating Frames, Energy Extraction, and Scalar "
        "Synchrotron Radiation",
        _APJ, "178", "347", "10.1086/151796",
    ),
    "blaauw-1961": _s(
        "Blaauw, A.", 1961,
        "On the origin of the O- and B-type stars with high velocities (the run-away stars), "
        "and some related problems",
        "Bulletin of the Astronomical Institutes of the Netherlands", "15", "265",
    ),
    "boffin-jorissen-1988": _s(
        "Boffin, H. M. J.; Jorissen, A.", 1988,
        "Can a barium star be produced by wind accretion in a detached binary?",
        _AA, "205", "155",
    ),
    "bondi-hoyle-1944": _s(
        "Bondi, H.; Hoyle, F.", 1944,
        "On the mechanism of accretion by stars",
        _MNRAS, "104", "273", "10.1093/mnras/104.5.273",
    ),
    "castor-abbott-klein-1975": _s(
        "Castor, J. I.; Abbott, D. C.; Klein, R. I.", 1975,
        "Radiation-driven winds in Of stars",
        _APJ, "195", "157", "10.1086/153315",
    ),
    "dantona-mazzitelli-ritter-1989": _s(
        "D'Antona, F.; Mazzitelli, I.; Ritter, H.", 1989, "", _AA, "225", "391",
    ),
    "demircan-kahraman-1991": _s(
        "Demircan, O.; Kahraman, G.", 1991,
        "Stellar mass-luminosity and mass-radius relations",
        "Astrophysics and Space Science", "181", "313", "10.1007/BF00639097",
    ),
    "eggleton-1983": _s(
        "Eggleton, P. P.", 1983,
        "Approximations to the radii of Roche lobes",
        _APJ, "268", "368", "10.1086/160960",
    ),
    "hills-1983": _s(
        "Hills, J. G.", 1983,
        "The effects of sudden mass loss and a random kick velocity produced in a supernova "
        "explosion on the dynamics of a binary star of arbitrary orbital eccentricity - "
        "Applications to X-ray binaries and to the binary pulsars",
        _APJ, "267", "322", "10.1086/160871",
    ),
    "hurley-pols-tout-2000": _s(
        "Hurley, J. R.; Pols, O. R.; Tout, C. A.", 2000,
        "Comprehensive analytic formulae for stellar evolution as a function of mass and "
        "metallicity",
        _MNRAS, "315", "543", "10.1046/j.1365-8711.2000.03426.x",
    ),
    "hut-1981": _s(
        "Hut, P.", 1981, "Tidal evolution in close binary systems", _AA, "99", "126",
    ),
    "iau-2015": _s(
        "Prša, A.; Harmanec, P.; Torres, G.; and others", 2016,
        "Nominal Values for Selected Solar and Planetary Quantities: IAU 2015 Resolution B3",
        "The Astronomical Journal", "152", "41", "10.3847/0004-6256/152/2/41",
    ),
    "ivanova-taam-2003": _s(
        "Ivanova, N.; Taam, R. E.", 2003,
        "Magnetic Braking Revisited", _APJ, "599", "516", "10.1086/379192",
    ),
    "kippenhahn-weigert-1990": _s(
        "Kippenhahn, R.; Weigert, A.", 1990, "Stellar Structure and Evolution", "Springer",
    ),
    "kolb-ritter-1990": _s(
        "Kolb, U.; Ritter, H.", 1990,
        "A comparative study of the evolution of a close binary using a standard and an "
        "improved technique for computing mass transfer",
        _AA, "236", "385",
    ),
    "lamers-snow-lindholm-1995": _s(
        "Lamers, H. J. G. L. M.; Snow, T. P.; Lindholm, D. M.", 1995,
        "Terminal Velocities and the Bistability of Stellar Winds",
        _APJ, "455", "269",
    ),
    "lasota-dubus-kruk-2008": _s(
        "Lasota, J.-P.; Dubus, G.; Kruk, K.", 2008,
        "Stability of helium accretion discs in ultracompact binaries",
        _AA, "486", "523", "10.1051/0004-6361:200809658",
    ),
    "lattimer-yahil-1989": _s(
        "Lattimer, J. M.; Yahil, A.", 1989,
        "Analysis of the neutrino events from supernova 1987A", _APJ, "340", "426",
    ),
    "mcdonald-zijlstra-2015": _s(
        "McDonald, I.; Zijlstra, A. A.", 2015,
        "Mass-loss on the red giant branch: the value and metallicity dependence of Reimers' "
        "eta in globular clusters",
        _MNRAS, "448", "502", "10.1093/mnras/stv007",
    ),
    "nieuwenhuijzen-dejager-1990": _s(
        "Nieuwenhuijzen, H.; de Jager, C.", 1990,
        "Parametrization of stellar rates of mass loss as functions of the fundamental "
        "stellar parameters M, L, and R",
        _AA, "231", "134",
    ),
    "nomoto-2007": _s(
        "Nomoto, K.; Saio, H.; Kato, M.; Hachisu, I.", 2007,
        "Thermal Stability of White Dwarfs Accreting Hydrogen-rich Matter and Progenitors of "
        "Type Ia Supernovae",
        _APJ, "663", "1269", "10.1086/518465",
    ),
    "paczynski-1971": _s(
        "Paczyński, B.", 1971,
        "Evolutionary Processes in Close Binary Systems",
        "Annual Review of Astronomy and Astrophysics", "9", "183",
        "10.1146/annurev.aa.09.090171.001151",
    ),
    "paczynski-sienkiewicz-1972": _s(
        "Paczyński, B.; Sienkiewicz, R.", 1972,
        "Evolution of Close Binaries VIII. Mass Exchange on the Dynamical Time Scale",
        _ACTA, "22", "73",
    ),
    "peters-1964": _s(
        "Peters, P. C.", 1964,
        "Gravitational Radiation and the Motion of Two Point Masses",
        "Physical Review", "136", "B1224", "10.1103/PhysRev.136.B1224",
    ),
    "rappaport-1995": _s(
        "Rappaport, S.; Podsiadlowski, P.; Joss, P. C.; Di Stefano, R.; Han, Z.", 1995,
        "The relation between white dwarf mass and orbital period in wide binary radio pulsars",
        _MNRAS, "273", "731", "10.1093/mnras/273.3.731",
    ),
    "rappaport-verbunt-joss-1983": _s(
        "Rappaport, S.; Verbunt, F.; Joss, P. C.", 1983,
        "A new technique for calculations of binary stellar evolution, with application to "
        "magnetic braking",
        _APJ, "275", "713", "10.1086/161569",
    ),
    "rasio-1996": _s(
        "Rasio, F. A.; Tout, C. A.; Lubow, S. H.; Livio, M.", 1996,
        "Tidal Decay of Close Planetary Orbits", _APJ, "470", "1187", "10.1086/177941",
    ),
    "reimers-1975": _s(
        "Reimers, D.", 1975,
        "Circumstellar absorption lines and mass loss from red giants",
        "Mémoires de la Société Royale des Sciences de Liège", "8", "369",
    ),
    "ritter-1988": _s(
        "Ritter, H.", 1988,
        "Turning on and off mass transfer in cataclysmic binaries", _AA, "202", "93",
    ),
    "robson-cornish-liu-2019": _s(
        "Robson, T.; Cornish, N. J.; Liu, C.", 2019,
        "The construction and use of LISA sensitivity curves",
        "Classical and Quantum Gravity", "36", "105011", "10.1088/1361-6382/ab1101",
    ),
    "savonije-dekool-vandenheuvel-1986": _s(
        "Savonije, G. J.; de Kool, M.; van den Heuvel, E. P. J.", 1986,
        "The minimum orbital period for ultra-compact binaries with helium burning secondaries",
        _AA, "155", "51",
    ),
    "schreiber-2016": _s(
        "Schreiber, M. R.; Zorotovic, M.; Wijnen, T. P. G.", 2016,
        "Three in one go: consequential angular momentum loss can solve major problems of CV "
        "evolution",
        _MNRAS, "455", "L16", "10.1093/mnrasl/slv144",
    ),
    "shu-1979": _s(
        "Shu, F. H.; Lubow, S. H.; Anderson, L.", 1979, "", _APJ, "229", "223",
    ),
    "sills-2000": _s(
        "Sills, A.; Pinsonneault, M. H.; Terndrup, D. M.", 2000,
        "The Angular Momentum Evolution of Very Low Mass Stars", _APJ, "534", "335",
        "10.1086/308739",
    ),
    "soberman-1997": _s(
        "Soberman, G. E.; Phinney, E. S.; van den Heuvel, E. P. J.", 1997,
        "Stability criteria for mass transfer in binary stellar evolution", _AA, "327", "620",
    ),
    "tauris-savonije-1999": _s(
        "Tauris, T. M.; Savonije, G. J.", 1999,
        "Formation of millisecond pulsars. I. Evolution of low-mass X-ray binaries with "
        "Porb > 2 days",
        _AA, "350", "928",
    ),
    "tout-1996": _s(
        "Tout, C. A.; Pols, O. R.; Eggleton, P. P.; Han, Z.", 1996,
        "Zero-age main-sequence radii and luminosities as analytic functions of mass and "
        "metallicity",
        _MNRAS, "281", "257", "10.1093/mnras/281.1.257",
    ),
    "verbunt-rappaport-1988": _s(
        "Verbunt, F.; Rappaport, S.", 1988,
        "Mass transfer instabilities due to angular momentum flows in close binaries",
        _APJ, "332", "193", "10.1086/166645",
    ),
    "verbunt-zwaan-1981": _s(
        "Verbunt, F.; Zwaan, C.", 1981,
        "Magnetic braking in low-mass X-ray binaries", _AA, "100", "L7",
    ),
    "vink-2001": _s(
        "Vink, J. S.; de Koter, A.; Lamers, H. J. G. L. M.", 2001,
        "Mass-loss predictions for O and B stars as a function of metallicity",
        _AA, "369", "574", "10.1051/0004-6361:20010127",
    ),
    "webbink-1984": _s(
        "Webbink, R. F.", 1984,
        "Double white dwarfs as progenitors of R Coronae Borealis stars and Type I supernovae",
        _APJ, "277", "355", "10.1086/161701",
    ),
    "webbink-rappaport-savonije-1983": _s(
        "Webbink, R. F.; Rappaport, S.; Savonije, G. J.", 1983,
        "On the evolutionary status of bright, low-mass X-ray sources",
        _APJ, "270", "678",
    ),
    "wright-2011": _s(
        "Wright, N. J.; Drake, J. J.; Mamajek, E. E.; Henry, G. W.", 2011,
        "The Stellar-activity-Rotation Relationship and the Evolution of Stellar Dynamos",
        _APJ, "743", "48", "10.1088/0004-637X/743/1/48",
    ),
    "zahn-1977": _s(
        "Zahn, J.-P.", 1977, "Tidal friction in close binary stars", _AA, "57", "383",
    ),
}  # fmt: skip
"""Key -> Source, in alphabetical order."""


def source(key):
    """The publication that goes by a key.

    Parameters
    ----------
    key : str

    Returns
    -------
    Source

    Raises
    ------
    ConfigError
        If there is none.
    """
    if key not in SOURCES:
        raise ConfigError(f'no publication is called "{key}"')
    return SOURCES[key]


def text(key):
    """A publication as one line for people.

    Parameters
    ----------
    key : str

    Returns
    -------
    str
    """
    entry = source(key)
    authors = ", ".join(entry.authors)
    parts = [f"{authors} ({entry.year})"]
    if entry.title:
        parts.append(entry.title)
    parts.append(", ".join(part for part in (entry.journal, entry.volume, entry.page) if part))
    if entry.doi:
        parts.append(f"doi:{entry.doi}")
    return ". ".join(parts)


def bibtex(key):
    """A publication as an entry of a BibTeX file.

    Parameters
    ----------
    key : str

    Returns
    -------
    str
        In UTF-8, without accents written out as commands.
    """
    entry = source(key)
    book = not entry.volume
    fields = {
        "author": " and ".join("others" if a == "and others" else a for a in entry.authors),
        "year": str(entry.year),
        "title": f"{{{entry.title}}}" if entry.title else "",
        "publisher" if book else "journal": entry.journal,
        "volume": entry.volume,
        "pages": entry.page,
        "doi": entry.doi,
    }
    lines = [f"  {name} = {{{value}}}" for name, value in fields.items() if value]
    kind = "book" if book else "article"
    return f"@{kind}{{{key},\n" + ",\n".join(lines) + "\n}"


__all__ = ["SOURCES", "Source", "bibtex", "source", "text"]
