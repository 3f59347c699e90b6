"""One self-contained HTML page of one or several histories; readable without its script."""

import io
import json
import re
from html import escape
from importlib.resources import files

import numpy as np

from evolve.config.units import human
from evolve.constants import HOURS_PER_YEAR
from evolve.figures.history import history_figure, rate_period_figure
from evolve.figures.ledger import ledger_figure
from evolve.figures.pair import pair_figure
from evolve.figures.style import SETTINGS, matplotlib
from evolve.history.ledger import FLOW_WORDS, LAW_WORDS, MASS_UNIT, MOMENTUM_UNIT
from evolve.laws.bibliography import text as source_text
from evolve.page.frames import frames, thinned
from evolve.page.story import law_of, story, time

POLICY = "default-src 'none'; style-src 'unsafe-inline'; script-src 'unsafe-inline'"
"""Nothing is fetched from anywhere; what the page needs is in it."""
PAIR_EPOCHS = 4


def report(histories, names=None):
    """The page of one history, or of several one after the other.

    Parameters
    ----------
    histories : History or sequence of History
    names : sequence of str, optional
        What to call each; its title by default.

    Returns
    -------
    str
        HTML, with style, script, figures (SVG) and data inside; every text of a config is
        escaped.

    Raises
    ------
    MissingExtra
        Without matplotlib.
    """
    histories = list(histories) if isinstance(histories, (list, tuple)) else [histories]
    names = names or [history.title or f"history {n}" for n, history in enumerate(histories, 1)]
    folder = files("evolve.page")
    title = names[0] if len(names) == 1 else f"{len(names)} histories"
    parts = [
        "<!DOCTYPE html>", '<html lang="en">', "<head>", '<meta charset="utf-8">',
        f'<meta http-equiv="Content-Security-Policy" content="{escape(POLICY)}">',
        '<meta name="viewport" content="width=device-width, initial-scale=1">',
        f"<title>{escape(title)}</title>",
        f"<style>{folder.joinpath('page.css').read_text()}</style>", "</head>", "<body>", "<main>",
    ]  # fmt: skip
    if len(histories) > 1:
        parts += [f"<h1>{escape(title)}</h1>", _side_by_side(histories, names)]
    for number, (history, name) in enumerate(zip(histories, names, strict=True), 1):
        parts += _history(history, name, number, "h1" if len(histories) == 1 else "h2")
    script = folder.joinpath("page.js").read_text()
    return "\n".join([*parts, "</main>", f"<script>{script}</script>", "</body>", "</html>", ""])


def _history(history, name, number, heading):
    short = thinned(history)
    parts = ["<article>", f"<{heading}>{escape(name)}</{heading}>"]
    parts += [f'<p class="quiet">{escape(line)}</p>' for line in history.note.splitlines() if line.strip()]
    if not history.complete:
        parts.append("<p><strong>This history was cut short.</strong></p>")
    parts += [f"<p>{escape(sentence)}</p>" for sentence in story(history)]
    parts += [f"<p>Warning: {escape(warning)}.</p>" for warning in history.warnings]
    parts += ["<h3>The pair to scale</h3>", *_panel(short, number)]
    parts += ["<h3>Through time</h3>", _with_marker(short, number)]
    if any(short.columns.get(f"overflow_{c}", np.zeros(1)).max() > 0.0 for c in "AB"):
        words = "Overflow against orbital period."
        parts.append(_figure(rate_period_figure(short), f"rate{number}", words, "small"))
    parts += ["<h3>Events</h3>", _events(history), "<h3>Who took what</h3>"]
    words = "The orbit's angular momentum, with what each law has taken from it."
    parts += [_figure(ledger_figure(short), f"books{number}", words, "broad"), *_ledger(history)]
    parts += _made_of(history)
    return [*parts, "</article>"]


# The moving panel and the figures ---------------------------------------------------------


def _panel(history, number):
    """The panel, hidden until the script runs, and the same pair at some epochs, still."""
    data = json.dumps(frames(history), separators=(",", ":")).replace("<", "\\u003c")
    shapes = "".join(
        f'<path class="lobe lobe-{c}"/><path class="star-{c}"/>'
        f'<text class="name-{c}" y="250" text-anchor="middle">{c}</text>'
        for c in "AB"
    )
    told = (("time", "time"), ("period", "period"), ("separation", "separation"), ("mass_A", "mass of A"),
            ("mass_B", "mass of B"), ("rate", "overflow"))  # fmt: skip
    readings = "".join(f'<li>{words} <b data-of="{name}"></b></li>' for name, words in told)
    words = "Lobes are the exact ones, stars the equipotentials of their volumes; the cross is the centre of mass."
    return [
        f'<div class="panel" hidden data-frames="frames{number}" data-marker="marker{number}">',
        '<svg viewBox="0 0 700 260" role="img" aria-label="The pair in its orbital plane, to scale">',
        shapes, '<path class="centre" d="M346 126l8 8M354 126l-8 8"/>',
        '<line class="bar" x1="20" x2="100" y1="20" y2="20"/><text class="bar-words" x="20" y="38"></text>',
        f'</svg><label for="slider{number}">Time: drag, or use the arrow keys</label>',
        f'<input type="range" id="slider{number}" min="0" max="1" step="1" value="0">',
        f'<ul class="readings" aria-live="polite">{readings}</ul></div>',
        f'<script type="application/json" id="frames{number}">{data}</script>',
        _figure(pair_figure(history, _epochs(history)), f"pair{number}", words, "broad"),
    ]  # fmt: skip


def _epochs(history):
    """Start, end, and between them the first events at which the pair has another shape."""
    wanted = ("contact", "period_minimum", "detachment", "remnant_formed", "common_envelope")
    found = []
    for event in history.events:
        times = {name: [e for e in history.events if e.name == name] for name in wanted}
        if event.name in wanted and event is times[event.name][0] and event.row not in (0, len(history) - 1):
            found.append(event.name)
    return ("start", *found[: PAIR_EPOCHS - 2], "end")


def _with_marker(history, number):
    """The history figure under the marker that the slider moves."""
    figure = history_figure(history)
    drawing = _svg(figure, f"history{number}")
    boxes = [axis.get_position() for axis in figure.axes]
    left, right = 100.0 * boxes[0].x0, 100.0 * boxes[0].x1
    top, height = 100.0 * (1.0 - boxes[0].y1), 100.0 * (boxes[0].y1 - boxes[-1].y0)
    marker = (
        f'<div class="marker" id="marker{number}" hidden data-left="{left:.3f}" data-right="{right:.3f}" '
        f'style="left:{left:.3f}%;top:{top:.3f}%;height:{height:.3f}%"></div>'
    )
    return f'<figure class="broad"><div class="over">{drawing}{marker}</div></figure>'


def _figure(figure, name, words, kind):
    return (
        f'<figure class="{kind}"><div class="over">{_svg(figure, name)}</div>'
        f"<figcaption>{escape(words)}</figcaption></figure>"
    )


def _svg(figure, name):
    """A figure as an element of the page: nothing before it, its ids its own."""
    stream = io.StringIO()
    with matplotlib().rc_context(SETTINGS):
        figure.savefig(stream, format="svg", metadata={"Date": None, "Creator": None}, transparent=True)
    text = stream.getvalue()
    text = text[text.index("<svg") :]
    text = re.sub(r"<metadata>.*?</metadata>", "", text, flags=re.DOTALL)
    text = re.sub(r'\bid="', f'id="{name}-', text)
    text = re.sub(r"url\(#", f"url(#{name}-", text)
    text = re.sub(r'xlink:href="#', f'href="#{name}-', text)
    text = re.sub(r' (width|height)="[\d.]+pt"', "", text, count=2)
    text = re.sub(r' xmlns(:xlink)?="[^"]*"', "", text)
    return text.replace("<svg", '<svg class="drawn" role="img"', 1)


# Tables -----------------------------------------------------------------------------------


def _table(head, rows, caption=""):
    """An HTML table; cells of all columns but the first stand to the right."""
    kinds = ["", *[' class="number"'] * (len(head) - 1)]
    cells = "".join(f"<th{k}>{escape(h)}</th>" for h, k in zip(head, kinds, strict=True))
    lines = [
        "<tr>" + "".join(f"<td{k}>{escape(c)}</td>" for c, k in zip(row, kinds, strict=True)) + "</tr>"
        for row in rows
    ]
    told = f"<caption>{escape(caption)}</caption>" if caption else ""
    body = f"<thead><tr>{cells}</tr></thead><tbody>{''.join(lines)}</tbody>"
    return f'<div class="wide"><table>{told}{body}</table></div>'


def _events(history):
    rows, round_orbit = [], "eccentricity" not in history.columns
    for event in history.events:
        row = event.row
        flow = sum(float(history.columns[f"overflow_{c}"][row]) for c in "AB" if f"overflow_{c}" in history.columns)
        cells = [event.name.replace("_", " ") + (f" ({event.component})" if event.component else "")]
        cells += [time(event.time, 5, "0 yr")]
        cells += [human(history["period"][row] / HOURS_PER_YEAR, "time", 4)]
        cells += [] if round_orbit else [f"{history['eccentricity'][row]:.4f}"]
        cells += [human(history[f"mass_{c}"][row], "mass", 4) for c in "AB"]
        rows.append([*cells, f"{flow:.2e} Msun/yr" if flow > 0.0 else "none"])
    head = ["event", "time", "period", *["e"] * (not round_orbit), "mass of A", "mass of B", "overflow"]
    return _table(head, rows)


def _entry(name):
    words = LAW_WORDS.get(law_of(name), law_of(name).replace("_", " "))
    return words + (f" of {name[-1]}" if law_of(name) != name else "")


def _ledger(history):
    ledger = history.ledger
    momentum = [
        [_entry(name), f"{ledger.total(name):.5g}", f"{100.0 * ledger.share(name):.2f} %"]
        for name in ledger.worth_telling("angular_momentum")
    ]
    flows = [
        [f"{FLOW_WORDS[name[:-2]]} {name[-1]}", human(ledger.total(name, "mass"), "mass", 5)]
        for name in ledger.worth_telling("mass")
    ]
    parts = [_table(["angular momentum of the orbit", f"change [{MOMENTUM_UNIT}]", "share"], momentum)]
    if flows:
        parts.append(_table([f"mass [{MASS_UNIT}]", "moved"], flows))
    closing = ", ".join(f"{abs(v):.1e} of {n.replace('_', ' of ')}" for n, v in ledger.residuals.items())
    closing = closing.replace("angular of momentum", "the angular momentum").replace("mass of", "the mass of")
    return [*parts, f'<p class="quiet">The books close to {escape(closing)}, relative to the start.</p>']


def _side_by_side(histories, names):
    def contact(history):
        times = history.event_times("contact")
        return time(times[0], 4, "at the start") if len(times) else "none"

    rows = [
        ["ends by", *(history.outcome.replace("_", " ") for history in histories)],
        ["after", *(human(history["time"][-1], "time", 4) for history in histories)],
        ["first contact", *map(contact, histories)],
        ["shortest period", *(human(h["period"].min() / HOURS_PER_YEAR, "time", 4) for h in histories)],
        ["period at the end", *(human(h["period"][-1] / HOURS_PER_YEAR, "time", 4) for h in histories)],
        *(
            [f"mass of {c} at the end", *(human(h[f"mass_{c}"][-1], "mass", 4) for h in histories)]
            for c in "AB"
        ),
    ]  # fmt: skip
    return _table(["", *names], rows)


def _made_of(history):
    """The config, the sources, and what computed it."""
    parts = ["<details><summary>The config</summary>", f"<pre>{escape(history.config_text)}</pre>"]
    for name in history.config_files:
        parts.append(f"<p class=\"quiet\">It names the file {escape(name)}.</p>")
    sources = "".join(f"<li>{escape(source_text(key))}</li>" for key in history.sources)
    parts += ["</details>", "<h3>Sources</h3>", f'<ol class="sources">{sources}</ol>']
    numbers = {**history.statistics, **history.versions}
    told = ", ".join(f"{name} {value}" for name, value in numbers.items())
    return [*parts, f'<p class="quiet">Computed with {escape(told)}.</p>']
