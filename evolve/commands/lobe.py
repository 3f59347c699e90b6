"""evolve lobe: Roche lobes, Lagrange points and stability limits of a mass ratio."""

from evolve.commands.output import Answer, aligned, scalar, table

EXPONENTS = (-1.0 / 3.0, 0.0, 1.0, 2.0, 4.0)


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument(
        "--mass-ratio", required=True, nargs="+", metavar="Q",
        help="donor over accretor, 1e-6..1e6; two to draw them side by side",
    )  # fmt: skip
    parser.add_argument("--draw", metavar="FILE", help="map of the potential: .png, .svg or .pdf")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing file")


def run(arguments):
    """Compute the lobes, and draw them where that is asked for."""
    from evolve.errors import ConfigError
    from evolve.orbit.roche import lobe_summary

    ratios = [_ratio(text) for text in arguments.mass_ratio]
    if len(ratios) > (2 if arguments.draw else 1):
        raise ConfigError("--mass-ratio: allowed is one, or two with --draw")
    drawn = _drawn(ratios, arguments) if arguments.draw else ""
    q = ratios[0]
    found = lobe_summary(q)
    rows = [
        [name, f"{lobe.exact:.8f}", f"{lobe.eggleton:.8f}", f"{100 * lobe.eggleton_deviation:+.3f} %",
         f"{lobe.paczynski:.8f}" if lobe.paczynski == lobe.paczynski else "-", f"{lobe.slope:.6f}"]
        for name, lobe in (("donor", found.donor), ("accretor", found.accretor))
    ]  # fmt: skip
    head = ["R_L/a", "exact", "Eggleton", "deviation", "Paczynski", "d ln R_L/d ln q"]
    points = [
        [point.name, f"{point.x:.8f}", f"{point.y:.8f}", f"{point.x_centre:.8f}", f"{point.potential:.8f}"]
        for point in found.points
    ]
    limits = _limits()
    lines = [f"mass ratio (donor over accretor) {q:g}; lengths in the separation a", ""]
    lines += aligned(head, rows) + [""]
    lines += aligned(["point", "x from donor", "y", "x from centre of mass", "potential [GM/a]"], points)
    lines += ["", "stable for mass ratios below, by how matter leaves (Eggleton's lobe):"]
    lines += aligned(["zeta of the donor", *limits], [
        [f"{zeta:.4f}", *(_number(values[n]) for values in limits.values())]
        for n, zeta in enumerate(EXPONENTS)
    ])  # fmt: skip
    lines += ["", f"drawn to {drawn}"] * bool(drawn)
    return Answer(lines, _result(q, found, limits))


def _ratio(text):
    from evolve.config.units import parse_quantity
    from evolve.errors import ConfigError

    try:
        q = parse_quantity(text, "number")
    except ConfigError as error:
        raise ConfigError(f"--mass-ratio {text}: {error}") from None
    if not 1e-6 <= q <= 1e6:
        raise ConfigError(f"--mass-ratio {text}: allowed is 1e-6 to 1e6")
    return q


def _drawn(ratios, arguments):
    """Draw the potential of the mass ratios; the path written to."""
    from evolve.commands.draw import figure_path
    from evolve.figures.lobes import lobe_figure
    from evolve.figures.style import save_figure

    path = figure_path(arguments.draw, arguments.replace)
    save_figure(lobe_figure(*ratios), path)
    return path


def _limits():
    """Critical mass ratios by zeta of the donor and by the way of expulsion."""
    from evolve.laws.stability import Shares, accepted_share, critical_mass_ratios, loss_parameter

    ways = {
        "all accepted": Shares(),
        "half re-emitted": Shares(accretor=0.5),
        "all re-emitted": Shares(accretor=1.0),
    }
    limits = {}
    for way, shares in ways.items():
        roots = [
            critical_mass_ratios(
                zeta, accepted_share(shares), lambda q, s=shares: loss_parameter(q, s)
            )
            for zeta in EXPONENTS
        ]
        limits[way] = [found[0] if found else float("nan") for found in roots]
    return limits


def _number(value):
    return f"{value:.4f}" if value == value else "-"


def _result(q, found, limits):
    def of(lobe):
        return {name: scalar(getattr(lobe, name)) for name in lobe._fields}

    names = ("name", "x", "y", "x_centre", "potential")
    points = {name: [getattr(point, name) for point in found.points] for name in names}
    return {
        "mass_ratio": scalar(q),
        "donor": of(found.donor),
        "accretor": of(found.accretor),
        "points": table(points, dict.fromkeys(names, "")),
        "stable_below": table({"zeta": EXPONENTS, **limits}, dict.fromkeys(["zeta", *limits], "")),
    }
