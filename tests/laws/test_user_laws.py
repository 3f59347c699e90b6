"""Laws in a user's own file: loaded like the built-in ones, refused with one clear message."""

import textwrap

import pytest
from law_helpers import close

from evolve.errors import ConfigError
from evolve.laws import user
from evolve.laws.contract import NoKeys, described_keys
from evolve.laws.samples import sample_states
from evolve.laws.user import load_law

GOOD = '''
from typing import Annotated, NamedTuple
from evolve.laws.contract import Key, Orbit, Star

class WeakKeys(NamedTuple):
    size: Annotated[float, Key("solRad", 0.5, 2.0, "of something")]
    strength: Annotated[float, Key("", 0.0, 100.0, "factor on the torque")] = 1.0

def helper(x):
    return -1e-8 * x

def weak(star: Star, other: Star, orbit: Orbit, keys: WeakKeys) -> float:
    """A torque [solMass solRad2 / yr2] that falls with the spin."""
    return helper(keys.strength) * star.mass * star.spin * keys.size
'''


def write(folder, text):
    path = folder / "my_laws.py"
    path.write_text(text)
    return path


def law_text(body, arguments="star, other, orbit, keys", doc='"""A torque."""'):
    return f"def mine({arguments}):\n    {doc}\n    {body}\n"


def refusal(folder, text, process="braking", name="mine"):
    path = write(folder, text)
    with pytest.raises(ConfigError) as caught:
        load_law(path, name, process)
    message = str(caught.value)
    assert message.startswith(str(path)) and "\n" not in message and caught.value.status == 2
    return message


@pytest.mark.parametrize("first_line", ["", "from __future__ import annotations\n"])
def test_a_good_law(tmp_path, first_line):
    law = load_law(write(tmp_path, first_line + GOOD), "weak", "braking")
    _, star, other, orbit = sample_states()[0]
    assert law.function(star, other, orbit, law.keys(size=2.0)) == close(
        -2e-8 * star.mass * star.spin
    )
    keys = described_keys(law.keys)
    assert list(keys) == ["size", "strength"] and keys["size"][1] is ...
    assert law.validity.startswith("A torque [solMass solRad2 / yr2] that falls with the spin.")
    assert law.second is None


def test_no_annotation_no_keys(tmp_path):
    law = load_law(write(tmp_path, law_text("return -1.0")), "mine", "braking")
    assert law.keys is NoKeys


def test_waves_may_bring_their_second_function(tmp_path):
    text = law_text("return -1.0") + law_text("return -0.5").replace("mine", "mine_eccentricity")
    law = load_law(write(tmp_path, text), "mine", "waves")
    assert law.second(*sample_states()[0][1:], NoKeys()) == -0.5
    wrong = text.replace("return -0.5", "return float('nan')")
    assert "mine_eccentricity" in refusal(tmp_path, wrong, "waves")


def test_the_example_in_the_documentation(tmp_path):
    example = user.__doc__.split("written:\n")[1].split("\nA law of waves")[0]
    law = load_law(write(tmp_path, textwrap.dedent(example)), "weak", "braking")
    assert law.keys._fields == ("strength",)


def test_two_files_of_one_name_do_not_mix(tmp_path):
    (tmp_path / "other").mkdir()
    first = load_law(write(tmp_path, law_text("return -1.0")), "mine", "braking")
    second = load_law(write(tmp_path / "other", law_text("return -2.0")), "mine", "braking")
    arguments = (*sample_states()[0][1:], NoKeys())
    assert (first.function(*arguments), second.function(*arguments)) == (-1.0, -2.0)


def test_no_file(tmp_path):
    with pytest.raises(ConfigError, match="nothing.py: cannot be read: No such file"):
        load_law(tmp_path / "nothing.py", "mine", "braking")
    with pytest.raises(ConfigError, match="cannot be read: Is a directory"):
        load_law(tmp_path, "mine", "braking")


def test_not_python(tmp_path):
    assert "line 2: not Python" in refusal(tmp_path, "x = 1\ndef mine(:\n")
    assert "not Python" in refusal(tmp_path, "x = 1\0")


def test_file_that_fails_when_run(tmp_path):
    assert "running it raised ModuleNotFoundError" in refusal(tmp_path, "import no_such_package")
    assert "running it raised SystemExit: 3" in refusal(tmp_path, "raise SystemExit(3)")


def test_no_such_function(tmp_path):
    assert 'no function "mine": the functions there are helper, weak' in refusal(tmp_path, GOOD)
    assert "there is none in it" in refusal(tmp_path, "mine = 3.0")


@pytest.mark.parametrize("arguments", ["star, other, orbit", "star, other, orbit, keys, time", "*all"])
def test_wrong_arguments(tmp_path, arguments):
    message = refusal(tmp_path, law_text("return -1.0", arguments))
    assert "must take (star, other, orbit, keys)" in message


def test_no_docstring(tmp_path):
    assert "no docstring" in refusal(tmp_path, law_text("return -1.0", doc="pass"))


@pytest.mark.parametrize(
    "body, words",
    [
        ("return -1.0 / star.core_mass", "raised ZeroDivisionError"),
        ("return -star.weight", "raised AttributeError"),
        ("return float('nan')", "returned nan: a finite number"),
        ("return -1e308 * 10.0", "returned -inf: a finite number"),
        ("return (-star.mass) ** 0.5", "a float is wanted"),
        ("return None", "returned None: a float is wanted"),
        ("return 1.0", "returned 1.0: for braking it must be <= 0"),
        ("import random; return -random.random()", "must depend on its arguments alone"),
    ],
)
def test_broken_contract(tmp_path, body, words):
    message = refusal(tmp_path, law_text(body))
    assert words in message and "mine, asked about a sample pair" in message


def test_sign_of_a_wind_and_size_of_a_share(tmp_path):
    assert "for wind it must be >= 0" in refusal(tmp_path, law_text("return -1e-9"), "wind")
    assert "a share is at most 1" in refusal(tmp_path, law_text("return 1.5"), "capture")


def test_keys_that_are_none(tmp_path):
    wrong = law_text("return -1.0", "star, other, orbit, keys: float")
    assert "is no class of keys" in refusal(tmp_path, wrong)
    unknown = "from __future__ import annotations\n" + law_text(
        "return -1.0", "star, other, orbit, keys: Missing"
    )
    assert "is no class of keys: NameError" in refusal(tmp_path, unknown)
    silent = "from typing import NamedTuple\nclass Mine(NamedTuple):\n    x: float\n" + law_text(
        "return -keys.x", "star, other, orbit, keys: Mine"
    )
    assert "Mine.x can never be given" in refusal(tmp_path, silent)
