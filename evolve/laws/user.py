"""Laws that users bring in a Python file of their own.

Such a file writes a law just as the built-in ones are written:

    from typing import Annotated, NamedTuple
    from evolve.laws.contract import Key, Orbit, Star

    class WeakKeys(NamedTuple):
        strength: Annotated[float, Key("", 0.0, 100.0, "factor on the torque")] = 1.0

    def weak(star: Star, other: Star, orbit: Orbit, keys: WeakKeys) -> float:
        '''A torque [solMass solRad2 / yr2] that only falls with the spin.'''
        return -1e-8 * keys.strength * star.mass * star.spin

A law of waves may bring its second function, de/dt, under the same name followed by
`_eccentricity`. Loading a file runs it: whoever calls `load_law` has been allowed to.
"""

import inspect
import sys
from hashlib import sha256
from math import isfinite
from pathlib import Path
from types import ModuleType
from typing import get_type_hints

from evolve.errors import ConfigError
from evolve.laws.contract import Law, NoKeys, described_keys
from evolve.laws.samples import SIGNS, sample_states

SECOND = {"waves": "_eccentricity"}
"""Processes whose laws may bring a second function: how its name ends."""


def load_law(path, function_name, process):
    """Load one law from a user's file and put it through the contract check.

    Parameters
    ----------
    path : str or Path
        Of a Python file. It is executed.
    function_name : str
        Of the law in it.
    process : str
        What the law is for: a key of `evolve.laws.TABLES`.

    Returns
    -------
    Law
        Its Keys are the class that annotates the argument `keys`, or none.

    Raises
    ------
    ConfigError
        With one sentence: no such file, not Python, no such function, not a law.
    """
    path = Path(path)
    module = _module(path)
    function = _function(module, path, function_name)
    keys = _keys_class(function, path)
    _check(function, keys, process, SIGNS[process], path)
    second = None
    if process in SECOND:
        name = function_name + SECOND[process]
        if hasattr(module, name):
            second = _function(module, path, name)
            _check(second, keys, process, 0, path)
    first_line = inspect.getdoc(function).partition("\n")[0]
    return Law(function, keys, (), f"{first_line} (user's own law)", second=second)


def _module(path):
    """Run a file as a module of its own."""
    try:
        text = path.read_bytes()
    except OSError as error:
        raise ConfigError(f"{path}: cannot be read: {error.strerror or error}") from None
    try:
        code = compile(text, str(path.resolve()), "exec")
    except SyntaxError as error:
        raise ConfigError(f"{path}, line {error.lineno}: not Python: {error.msg}") from None
    except ValueError as error:  # null bytes
        raise ConfigError(f"{path}: not Python: {error}") from None
    # a module of this name lets annotations written as text find their classes
    module = ModuleType(f"user_law_{sha256(text).hexdigest()[:16]}")
    module.__file__ = str(path)
    sys.modules[module.__name__] = module
    try:
        exec(code, module.__dict__)
    except (Exception, SystemExit) as error:
        raise ConfigError(f"{path}: running it raised {_words(error)}") from None
    return module


def _words(error):
    """An exception in one line."""
    line = " ".join(str(error).split())
    return f"{type(error).__name__}: {line}" if line else type(error).__name__


def _function(module, path, name):
    function = getattr(module, name, None)
    if not inspect.isfunction(function):
        here = [n for n, f in vars(module).items() if inspect.isfunction(f)
                and f.__module__ == module.__name__]  # fmt: skip
        listed = f"the functions there are {', '.join(here)}" if here else "there is none in it"
        raise ConfigError(f'{path}: no function "{name}": {listed}')
    parameters = inspect.signature(function).parameters.values()
    plain = (inspect.Parameter.POSITIONAL_ONLY, inspect.Parameter.POSITIONAL_OR_KEYWORD)
    if len(parameters) != 4 or any(p.kind not in plain for p in parameters):
        written = ", ".join(map(str, parameters))
        raise ConfigError(
            f"{path}: {name}({written}) is no law: it must take (star, other, orbit, keys)"
        )
    if not (inspect.getdoc(function) or "").strip():
        raise ConfigError(
            f"{path}: {name} has no docstring: say in one line what it returns, in which unit"
        )
    return function


def _keys_class(function, path):
    """The class that annotates the fourth argument; NoKeys without an annotation."""
    last = list(inspect.signature(function).parameters)[3]
    try:
        keys = get_type_hints(function).get(last, NoKeys)
        if not (isinstance(keys, type) and issubclass(keys, tuple) and hasattr(keys, "_fields")):
            raise TypeError(f"{keys!r} is not a NamedTuple class")
        described_keys(keys)
    except (NameError, TypeError, AttributeError) as error:
        raise ConfigError(
            f"{path}: the annotation of {last} in {function.__name__} is no class of keys: "
            f"{_words(error)}"
        ) from None
    silent = set(keys._fields) - set(described_keys(keys)) - set(keys._field_defaults)
    if silent:
        raise ConfigError(
            f"{path}: {keys.__name__}.{min(silent)} can never be given: annotate it "
            'Annotated[float, Key(unit, low, high, "doc")], or give it a default'
        )
    return keys


def _sample_keys(keys):
    """The default of every key; the middle of its range where it has none."""
    values = {}
    for name, (key, default) in described_keys(keys).items():
        if default is ...:
            middle = 0.5 * (key.low + key.high)
            values[name] = middle if isfinite(middle) else max(key.low, 0.0) + 1.0
    return keys(**values)


def _check(function, keys, process, sign, path):
    """The contract: a finite number of the right sign, the same twice, at every sample."""
    values = _sample_keys(keys)
    for words, star, other, orbit in sample_states():
        where = f"{path}: {function.__name__}, asked about a sample pair ({words}),"
        try:
            result = function(star, other, orbit, values)
            again = function(star, other, orbit, values)
        except (Exception, SystemExit) as error:
            raise ConfigError(f"{where} raised {_words(error)}") from None
        if isinstance(result, bool) or not isinstance(result, (int, float)):
            raise ConfigError(f"{where} returned {result!r}: a float is wanted")
        if not isfinite(result):
            raise ConfigError(f"{where} returned {result}: a finite number is wanted")
        if result != again:
            raise ConfigError(
                f"{where} returned {result!r}, then {again!r}: a law must depend on its "
                "arguments alone"
            )
        if result * sign < 0.0:
            wanted = "<= 0" if sign < 0 else ">= 0"
            raise ConfigError(f"{where} returned {result!r}: for {process} it must be {wanted}")
        if process == "capture" and result > 1.0:
            raise ConfigError(f"{where} returned {result!r}: a share is at most 1")


__all__ = ["load_law"]
