"""Every star of the table: finite, consistent with itself, documented, compiles."""

import re
from math import exp, isfinite, isnan, log, nan, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st
from star_helpers import EVERY, SAMPLES, compiled, states, with_arrays

from evolve.errors import DomainError
from evolve.laws import bibliography
from evolve.laws.contract import described_keys
from evolve.stars import MODELS
from evolve.stars.contract import StarModel, Structure
from evolve.stars.giant import nuclear_structure

KINDS = {"gas", "white-dwarf", "helium", "neutron-star", "black-hole", "point-mass", ""}


def test_every_model_has_a_sample():
    assert {sample.model for sample in SAMPLES.values()} == set(MODELS)


@EVERY
def test_finite_and_sensible_everywhere(sample):
    keys = sample.keys
    for mass, radius, phase in states(sample):
        star = sample.structure(mass, radius, phase, keys)
        assert isinstance(star, Structure)
        assert all(isinstance(value, float) and isfinite(value) for value in star), star
        assert min(star.radius, star.luminosity, star.temperature, star.core_mass) >= 0.0
        assert star.convective in (0.0, 1.0)
        assert 0.0 <= star.envelope_mass <= mass - star.core_mass + 1e-12
        assert 0.0 <= star.envelope_depth <= star.radius
        assert star.convective or star.envelope_mass == 0.0
        if MODELS[sample.model].relaxing:
            assert star.radius == radius
        else:
            assert star.radius == star.equilibrium


@EVERY
@given(data=st.data())
def test_absurd_trial_states_stay_finite(sample, data):
    """What an implicit solver may try within the bounds of the equations: masses from half the
    least to twice the total, ln R in -20..15, any phase."""
    low, high = sample.masses
    mass = exp(data.draw(st.floats(log(0.5 * low), log(2e3 * high))))
    radius = exp(data.draw(st.floats(-20.0, 15.0)))
    phase = data.draw(st.floats(-1e12, 1e12))
    star = sample.structure(mass, radius, phase, sample.keys)
    assert all(isinstance(value, float) and isfinite(value) for value in star), star


@EVERY
def test_the_same_answer_twice(sample):
    keys, points = sample.keys, list(states(sample, 4))
    first = [sample.structure(*point, keys) for point in points]
    assert first == [sample.structure(*point, keys) for point in reversed(points)][::-1]


@EVERY
def test_temperature_goes_with_luminosity_and_radius(sample):
    for mass, radius, phase in states(sample):
        star = sample.structure(mass, radius, phase, sample.keys)
        if star.radius > 0.0 and star.luminosity > 0.0:
            # nominal solar temperature, IAU 2015 Resolution B3
            expected = 5772.0 * (star.luminosity / star.radius**2) ** 0.25
            assert star.temperature == pytest.approx(expected, rel=1e-12)


@EVERY
def test_zeta_is_the_slope_where_the_radius_is_a_formula(sample):
    if MODELS[sample.model].relaxing:
        return
    keys = sample.keys
    for mass, _, phase in states(sample):
        step = 1e-5
        ends = [sample.structure(mass * exp(s), 1.0, phase, keys).radius for s in (-step, step)]
        if ends[0] == 0.0 or mass * exp(step) > sample.masses[1]:
            continue
        slope = log(ends[1] / ends[0]) / (2.0 * step)
        # relative to 1/1.44-m, where the white dwarf's slope runs away
        zeta = sample.structure(mass, 1.0, phase, keys).zeta
        assert zeta == pytest.approx(slope, rel=1e-6, abs=1e-8)


@EVERY
def test_a_star_in_equilibrium_moves_with_it_and_no_faster(sample):
    """thermal is zero at R_eq but for the growth d ln R_eq/dt at constant mass."""
    keys = sample.keys
    for mass, _, phase in states(sample):
        rest = sample.structure(mass, 1.0, phase, keys)
        star = sample.structure(mass, rest.equilibrium, phase, keys)
        low, high = sample.phases
        step = 1e-5 * (high - low)
        if step == 0.0:
            relaxing = sample.structure(mass, 1.01 * rest.equilibrium, phase, keys).thermal
            assert abs(star.thermal) <= 1e-12 * abs(relaxing)
            continue
        if not low + step < phase < high - step:
            continue
        ends = [sample.structure(mass, 1.0, phase + s, keys).equilibrium for s in (-step, step)]
        growth = log(ends[1] / ends[0]) / (2.0 * step) * star.phase_rate
        assert star.thermal == pytest.approx(growth, rel=1e-5, abs=1e-6 * star.phase_rate / high)


@EVERY
def test_a_relaxing_star_returns_to_equilibrium(sample):
    if not MODELS[sample.model].relaxing:
        return
    keys = sample.keys
    for mass, _, phase in states(sample):
        size = sample.structure(mass, 1.0, phase, keys).equilibrium
        rates = [
            sample.structure(mass, factor * size, phase, keys).thermal
            for factor in (0.5, 0.9, 1.0, 1.1, 2.0)
        ]
        assert rates == sorted(rates, reverse=True)
        assert len(set(rates)) == len(rates)


@EVERY
def test_compiles_and_agrees(sample):
    fast, keys = compiled(sample.structure), sample.keys
    for point in states(sample, 4):
        expected = sample.structure(*point, keys)
        found = fast(*point, with_arrays(keys))
        assert found == pytest.approx(tuple(expected), rel=1e-13, abs=1e-300, nan_ok=True)


def test_the_giant_in_equilibrium_compiles_and_agrees():
    sample = SAMPLES["giant"]
    fast = compiled(nuclear_structure)
    for point in states(sample, 3):
        expected = nuclear_structure(*point, sample.keys)
        assert fast(*point, sample.keys) == pytest.approx(tuple(expected), rel=1e-13)


@pytest.mark.parametrize("name", MODELS)
def test_entries_are_complete(name):
    model = MODELS[name]
    assert isinstance(model, StarModel) and model.validity and model.kind in KINDS
    assert 0.0 < model.mass_range[0] < model.mass_range[1]
    assert 0.0 < model.gyration <= 0.4  # a uniform sphere has 0.4
    assert bool(model.phase) == (model.start_phase is not None)
    assert all(key in bibliography.SOURCES for key in model.sources)
    for key, default in described_keys(model.keys).values():
        assert key.doc and key.low < key.high
        assert default is ... or isnan(default) or key.low <= default <= key.high
    for text in model.texts.values():
        assert text.doc
        assert text.choices is None or text.default is ... or text.default in text.choices


@pytest.mark.parametrize("name", MODELS)
def test_docstrings_are_complete(name):
    model = MODELS[name]
    doc = model.structure.__doc__
    assert all(part in doc for part in ("Parameters\n", "Returns\n", "References\n"))
    assert re.search(r"mass : float  \[solMass\]", doc)
    assert "Parameters\n" in model.prepare.__doc__ and "Returns\n" in model.prepare.__doc__
    assert model.keys.__doc__.startswith("Keys of ")


@EVERY
def test_keys_are_floats_and_tuples_of_floats(sample):
    for name, value in sample.keys._asdict().items():
        flat = value if isinstance(value, tuple) else (value,)
        assert flat and all(isinstance(x, float) for x in flat), name


@EVERY
def test_none_and_nan_are_as_good_as_absent(sample):
    """The completed config holds None where nothing was given."""
    model = MODELS[sample.model]
    absent = {
        name: nothing
        for name, nothing in zip(
            [*described_keys(model.keys), "table", "luminosity", "temperature"],
            [None, nan] * 20,
        )
        if name not in sample.values and not (name == "table" and nothing is not None)
    }
    again = model.prepare(sample.mass, absent | sample.values)
    for ours, theirs in zip(again, sample.keys):
        assert ours == theirs or (isnan(ours) and isnan(theirs))


def test_radius_in_words_is_refused_where_it_is_the_models_own():
    with pytest.raises(DomainError, match='radius = "lobe"'):
        MODELS["expanding"].prepare(1.0, {"radius": "lobe", "growth_time": 1e8})


def test_phases_carry_their_ends():
    ends = {
        name: (sample.keys.phase_low, sample.keys.phase_high)
        for name, sample in SAMPLES.items()
        if hasattr(sample.keys, "phase_high")
    }
    assert ends["main sequence"] == (0.0, 1.0)
    assert ends["giant"] == (0.16, 0.45)
    assert ends["track"] == (0.0, 4.5e6)


def test_the_flow_of_a_phase_is_not_held_at_its_end():
    """An event is a crossing: the phase must go on past its end, and nothing may jump there."""
    for name in ("main sequence", "giant", "track"):
        sample = SAMPLES[name]
        keys, end = sample.keys, sample.phases[1]
        mass = sqrt(sample.masses[0] * sample.masses[1])
        inside, outside = (
            sample.structure(mass, 1.0, end * (1.0 + s), keys) for s in (-1e-9, 1e-9)
        )
        assert outside.phase_rate > 0.0
        assert tuple(outside) == pytest.approx(tuple(inside), rel=1e-6)
