"""The compiled engine: the same laws, stars, equations and walk, turned to machine code by numba.

Nothing is written twice: the functions are those that plain Python runs. What is written here
is how they are called. The walk is compiled once for all configs and calls the equations by
their address; the equations of a config take one flat array of numbers (handing over
NamedTuples would cost more than a step) and take it apart inside. Configs that differ in
values only share an engine. Machine code is kept on disk, under a name made of every text it
depends on.
"""

import inspect
import os
import sys
import types
from functools import lru_cache
from hashlib import sha256
from pathlib import Path
from tempfile import NamedTemporaryFile
from typing import Any, Callable, NamedTuple

import numpy as np

from evolve.integrate import advance as walk
from evolve.integrate import rosenbrock
from evolve.integrate.stretch import shrinking_rate

SWITCHES = 4
"""Numbers at the head of the flat array, before the origin of time: flow and braking of each."""
FIRST = SWITCHES + 1
MOST_KEPT = 200
"""Engines kept on disk; older ones are of texts that have changed since."""
OPTIONS = {"error_model": "numpy", "nogil": True}
BARE = {**OPTIONS, "_nrt": False}
"""Of the walk, which allocates nothing: without counting references it takes half as long."""
_engines = {}


class CannotCompile(Exception):
    """Why an engine cannot take a config's equations."""


class Engine(NamedTuple):
    """Machine code: `advance` takes the addresses of the equations in place of callables.

    `numbers` are the parameters of one pair as the equations take them, after room for the
    switches and the origin of time; `code` keeps the addresses alive.
    """

    advance: Callable
    rates: int
    look: int
    code: Any
    numbers: Any = None


def jitted(function, done=None, options=OPTIONS):
    """A plain function with every plain function it calls, compiled by numba when first called.

    Parameters
    ----------
    function : callable
    done : dict, optional
        Function -> what stands for it when compiled; filled.
    options : dict
        Of numba.njit.

    Returns
    -------
    numba dispatcher
    """
    import numba

    done = {} if done is None else done
    if function not in done:
        names = dict(function.__globals__)
        for name in function.__code__.co_names:
            if isinstance(names.get(name), types.FunctionType):
                names[name] = jitted(names[name], done, options)
        copy = types.FunctionType(
            function.__code__, names, function.__name__, function.__defaults__
        )
        copy.__kwdefaults__ = function.__kwdefaults__
        done[function] = numba.njit(copy, **options)
    return done[function]


def flat(parameters):
    """Parameters of a pair as one array of floats, tables and all, after room for FIRST."""
    numbers = [0.0] * FIRST
    for group in parameters:
        for value in group:
            numbers += value if isinstance(value, tuple) else (value,)
    return np.array(numbers, dtype=float)


def engine_of(pair, inspiral=False, tell=None):
    """The compiled engine of a pair, made when it is first needed.

    Parameters
    ----------
    pair : evolve.system.pair.Pair
    inspiral : bool
        Whether -ln a is the independent variable, and time a slot after the core.
    tell : callable, optional
        Called without arguments before a compilation, which takes seconds.

    Returns
    -------
    Engine

    Raises
    ------
    CannotCompile
        With numba's own reason.
    """
    text, classes = _equations(pair, inspiral)
    user = {name: f for name, f in pair.functions.items() if not f.__module__.startswith("evolve.")}
    key = (pair.equations, text, tuple(user.values()))
    if key not in _engines:
        if tell:
            tell()
        _engines[key] = _compiled(pair, text, classes, user)
    if isinstance(_engines[key], CannotCompile):
        raise _engines[key]
    return _engines[key]._replace(numbers=flat(pair.parameters))


def _equations(pair, inspiral):
    """Text of the equations with flat arguments, and the classes of Keys it names."""
    slots, classes, groups, place = pair.layout, {}, [], FIRST
    for number, group in enumerate(pair.parameters):
        parts = []
        for value in group:
            width = len(value) if isinstance(value, tuple) else 0
            parts.append(f"p[{place}:{place + width}]" if width else f"p[{place}]")
            place += width or 1
        name = f"keys_{number}" if hasattr(group, "_fields") else ""
        if name:
            classes[name] = type(group)
        groups.append(f"{name}({', '.join(parts)},)")
    n, ledger = len(slots.core), len(slots.ledger)
    state = _listed("y", range(n))
    switches = ", ".join(f"p[{n}] != 0.0" for n in range(SWITCHES))
    time = f"p[{SWITCHES}] + " + (f"y[{n}]" if inspiral else "x")
    call = f"{time}, {state}({switches}), ({', '.join(groups)},)"
    rates = f"    ({_listed('out', range(n + ledger))}) = rates({call})"
    if inspiral:
        rates = f"""    there = rates({call})
    pace = -1.0 / shrinking_rate({_listed("y", range(3))}
        {"y[3]" if pair.plan.eccentric else "0.0"}, {_listed("there", range(3))}
        {"there[3]" if pair.plan.eccentric else "0.0"})
    ({_listed("out", [*range(n), *range(n + 1, n + 1 + ledger)])}) = there
    for slot in range({n + 1 + ledger}):
        out[slot] *= pace
    out[{n}] = pace"""
    return f"""
@cfunc("void(float64{", CPointer(float64)" * 3})", cache=CACHED, **OPTIONS)
def rates_at(x, y, numbers, out):
    p = carray(numbers, ({place},))
{rates}


@cfunc("void(float64{", CPointer(float64)" * 4})", cache=CACHED, **OPTIONS)
def look(x, y, numbers, seen, read):
    p = carray(numbers, ({place},))
    values = quantities({call})
    ({_listed("seen", range(len(slots.quantities)))}) = values
    ({_listed("read", range(len(slots.gauges)))}) = gauges(values)
""", classes


def _listed(name, places):
    return "".join(f"{name}[{place}], " for place in places)


def _compiled(pair, text, classes, user):
    """The Engine of a pair; a CannotCompile if numba refuses it."""
    import numba

    for kept in (True, False):
        try:
            return _built(pair, text, classes, user, kept)
        except numba.core.errors.NumbaError as error:
            lines = [line for line in str(error).splitlines() if line and "Failed in" not in line]
            return CannotCompile(lines[0])
        except Exception:  # what is kept on disk is damaged: compile anew
            if not kept:
                raise
            _advance.cache_clear()
    return None


def _built(pair, text, classes, user, kept):
    import numba

    namespace = {**user, **classes, "cfunc": numba.cfunc, "carray": numba.carray}
    exec(compile(pair.equations, "<equations>", "exec"), namespace)
    done = {}
    namespace["shrinking_rate"] = shrinking_rate
    for name in ("rates", "quantities", "gauges", "shrinking_rate"):
        namespace[name] = jitted(namespace[name], done)
    module = _run(text, [pair.equations, *_sources(user.values())], namespace, kept)
    engine = Engine(_advance(kept), module.rates_at.address, module.look.address, module)
    _try_out(engine, pair)
    return engine


def _try_out(engine, pair):
    """No step at all, which loads or compiles all there is."""
    core, sizes = len(pair.layout.core), (len(pair.layout.quantities), len(pair.layout.gauges))
    state = np.array([*pair.start, *[1.0] * (len(pair.layout.ledger) + 1)])
    watches = (np.zeros(1, np.int64), np.zeros(1), np.zeros(1, np.int64), np.zeros(1, np.bool_))
    engine.advance(
        engine.rates, engine.look, (0.0, 1.0, 1.0, state), flat(pair.parameters),
        (1e-6, np.ones(core), np.ones(core), 1.0), (np.zeros(core), np.ones(core)), watches, (0, 0),
        walk.make_buffers(1, len(state), core, sizes, 1),
    )  # fmt: skip


def _sources(functions):
    """Text of the files that bring the user's own functions."""
    return [inspect.getsource(inspect.getmodule(function)) for function in functions]


@lru_cache(maxsize=1)
def _advance(kept):
    """The walk, compiled to call the equations by their addresses."""
    import numba

    text = """
@njit(cache=CACHED, **BARE)
def engine(rates, look, start, p, control, bounds, watches, limits, buffers):
    return advance(rates, look, start, p, control, bounds, watches, limits, buffers)
"""
    done = {rosenbrock.evaluate: _caller(3), walk.observe: _caller(4)}
    namespace = {"njit": numba.njit, "advance": jitted(walk.advance, done, BARE)}
    return _run(text, [], namespace, kept).engine


def _caller(arrays):
    """call(address, x, *arrays): a compiled call of f(double, double*, ...) at an address."""
    from llvmlite import ir
    from numba import types as nb
    from numba.extending import intrinsic

    def emit(context, builder, signature, arguments):
        double = ir.DoubleType()
        pointers = [
            context.make_array(kind)(context, builder, value).data
            for kind, value in zip(signature.args[2:], arguments[2:], strict=True)
        ]
        kind = ir.FunctionType(ir.VoidType(), [double] + [double.as_pointer()] * arrays)
        function = builder.inttoptr(arguments[0], kind.as_pointer())
        builder.call(function, [arguments[1], *pointers])
        return context.get_dummy_value()

    def typed(address, x, *more):
        return nb.void(nb.int64, nb.float64, *more), emit

    if arrays == 3:
        return intrinsic(lambda context, f, x, y, p, out: typed(f, x, y, p, out))
    return intrinsic(lambda context, f, x, y, p, seen, read: typed(f, x, y, p, seen, read))


def _run(text, depends, namespace, kept):
    """Execute a text that compiles what it defines, with its machine code kept on disk; `kept`
    says whether what is there already may be used."""
    path = _cached_file(text, depends, kept)
    module = types.ModuleType(path.stem if path else "engine_unkept")
    sys.modules[module.__name__] = module  # numba looks it up by name when it loads its code
    namespace |= {"OPTIONS": OPTIONS, "BARE": BARE, "CACHED": path is not None, "__name__": module.__name__}
    module.__dict__.update(namespace)
    exec(compile(text, str(path or "<engine>"), "exec"), module.__dict__)
    return module


def _cached_file(text, depends, kept):
    """A file that stands for a text and all it depends on, or None if there is no room."""
    import numba

    package = Path(__file__).parents[1]
    parts = [text, *depends, sys.version, numba.__version__]
    parts += [path.read_text() for path in sorted(package.glob("*/*.py"))]
    name = f"engine_{sha256(chr(0).join(parts).encode()).hexdigest()[:24]}.py"
    folder = Path(os.environ.get("XDG_CACHE_HOME") or Path.home() / ".cache") / "evolve"
    try:
        folder.mkdir(parents=True, exist_ok=True)
        if not kept:
            _forget(folder, name)
        if not (folder / name).exists():
            for old in sorted(folder.glob("engine_*.py"), key=os.path.getmtime)[:-MOST_KEPT]:
                _forget(folder, old.name)
            with NamedTemporaryFile("w", dir=folder, suffix=".tmp", delete=False) as file:
                file.write(text)
            os.replace(file.name, folder / name)
    except OSError:
        return None
    return folder / name


def _forget(folder, name):
    """Remove a kept engine with its machine code."""
    for path in [folder / name, *folder.glob(f"__pycache__/{name.removesuffix('.py')}*")]:
        path.unlink(missing_ok=True)
