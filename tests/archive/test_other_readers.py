"""xarray and astropy read what is written here, with names, units and dimensions."""

import numpy as np
import pytest
import xarray
from astropy import units as u
from astropy.table import Table

from evolve.archive import write_archive
from evolve.archive.export import table_text
from evolve.errors import ConfigError
from evolve.history import COLUMNS
from synthetic import ROWS, bits, synthetic

HISTORY = synthetic()


@pytest.fixture(scope="module")
def path(tmp_path_factory):
    """An archive on disk."""
    path = tmp_path_factory.mktemp("archive") / "x.h5"
    write_archive(HISTORY, path)
    return path


def opened(path, group):
    """A group as xarray reads it, warnings being errors."""
    with xarray.open_dataset(path, group=group, engine="h5netcdf") as data:
        return data.load()


@pytest.mark.filterwarnings("error")
def test_xarray_reads_the_trajectory(path):
    data = opened(path, "trajectory")
    assert dict(data.sizes) == {"time": 4 * ROWS}
    assert [name for name in HISTORY.columns if name not in data] == []
    for name in ("time", "period", "mass_A", "zeta_lobe", "transfer_time"):
        assert bits(data[name]) == bits(HISTORY[name]) and data[name].dtype == np.float64
        assert data[name].attrs["units"] == COLUMNS[name].unit
        assert data[name].attrs["long_name"] == COLUMNS[name].long_name
    assert data["donor"].dtype == np.int8
    assert float(data["period"].sel(time=1e6, method="nearest")) == HISTORY["period"][ROWS - 1]


@pytest.mark.filterwarnings("error")
def test_xarray_selects_on_both_sides_of_a_chapters_end(path):
    """The row after a jump is the next float, so that no time stands twice."""
    data = opened(path, "trajectory")
    assert data.indexes["time"].is_unique
    both = data["period"].sel(time=slice(1e6, np.nextafter(1e6, np.inf)))
    assert both.values.tolist() == HISTORY["period"][ROWS - 1 : ROWS + 1].tolist()


@pytest.mark.filterwarnings("error")
def test_xarray_reads_events_chapters_and_ledger(path):
    events = opened(path, "events")
    assert events["name"].dims == ("event",)
    assert events["name"].values.tolist() == [event.name for event in HISTORY.events]
    assert events["component"].values.tolist() == ["", "A", "A", "A", ""]
    assert events["time"].values.tolist() == [event.time for event in HISTORY.events]
    chapters = opened(path, "chapters")
    assert chapters["regime"].dims == ("chapter",) and chapters["end"].attrs["units"] == "yr"
    assert chapters["ended_by"].values.tolist() == [c.ended_by for c in HISTORY.chapters]
    ledger = opened(path, "ledger")
    assert ledger["angular_momentum_braking_A"].values.tolist() == [-3.0, 0.0, 0.0, -2.0]
    assert ledger["mass_overflow_A"].attrs["units"] == "solMass"


def test_xarray_finds_the_engine_by_itself(path):
    with xarray.open_dataset(path, group="events") as data:
        assert data.sizes["event"] == 5


@pytest.mark.filterwarnings("error")
def test_astropy_reads_every_column_of_ecsv_exactly():
    table = Table.read(table_text(HISTORY, form="ecsv").splitlines(), format="ascii.ecsv")
    assert table.colnames == list(HISTORY.columns)
    for name in table.colnames:
        assert bits(table[name]) == bits(HISTORY[name]), name
        assert table[name].description == COLUMNS[name].long_name
        assert (table[name].unit or u.dimensionless_unscaled) == u.Unit(COLUMNS[name].unit)
    assert table["donor"].dtype == np.int8


@pytest.mark.filterwarnings("error")
def test_astropy_reads_a_header_with_every_column_there_is():
    """Apostrophes, commas and slashes in units and names included."""
    history = synthetic(columns={name: np.array([0.0, 1.0]) for name in COLUMNS}, chapters=[])
    table = Table.read(table_text(history, form="ecsv").splitlines(), format="ascii.ecsv")
    assert table.colnames == list(COLUMNS)


@pytest.mark.parametrize(
    ("column", "unit", "astropy_unit"),
    [("period", "d", "d"), ("time", "Myr", "Myr"), ("mass_A", "kg", "kg"),
     ("overflow_A", "Msun/yr", "Msun/yr"), ("overflow_A", "g/s", "g/s")],
)  # fmt: skip
def test_units_convert_as_astropy_converts_them(column, unit, astropy_unit):
    """To 3e-5: kilograms of a solar mass depend on G, of which astropy has another value."""
    text = table_text(HISTORY, [column], {column: unit}, form="ecsv")
    table = Table.read(text.splitlines(), format="ascii.ecsv")
    assert table[column].unit == u.Unit(astropy_unit)
    expected = (HISTORY[column] * u.Unit(COLUMNS[column].unit)).to_value(astropy_unit)
    assert np.asarray(table[column]) == pytest.approx(expected, rel=3e-5)


def test_csv_has_names_and_units_first_and_reads_back_exactly():
    lines = table_text(HISTORY, ["time", "donor", "period", "zeta_lobe"]).splitlines()
    assert lines[0] == "time [yr],donor,period [h],zeta_lobe"
    assert len(lines) == 1 + 4 * ROWS
    table = np.genfromtxt(lines, delimiter=",", skip_header=1)
    for number, name in enumerate(("time", "donor", "period", "zeta_lobe")):
        assert bits(table[:, number]) == bits(HISTORY[name])
    assert lines[1 + ROWS].split(",")[1] == "1"


def test_a_column_asked_for_twice_comes_once():
    assert table_text(HISTORY, ["period", "period"]).startswith("period [h]\n")


def test_sampled_rows():
    lines = table_text(HISTORY, ["time"], every=5e8).splitlines()
    assert lines == ["time [yr]", "0.0", "500000000.0", "1000000000.0"]
    lines = table_text(HISTORY, ["time", "mass_A"], {"time": "Gyr"}, rows=2, on="mass_A").splitlines()
    assert [line.split(",")[0] for line in lines] == ["time [Gyr]", "0.0", "1.0"]


@pytest.mark.parametrize(
    ("arguments", "message"),
    [({"columns": ["periods"]}, 'no column "periods"; there are time'),
     ({"units": {"period": "kg"}}, "--unit period=kg: "),
     ({"units": {"period": "dd"}}, "--unit period=dd: "),
     ({"units": {"donor": "d"}}, "--unit donor=d: "),
     ({"units": {"zeta_lobe": "h"}}, "--unit zeta_lobe=h: "),
     ({"columns": ["time"], "units": {"period": "d"}}, "no column .period. is exported")],
)  # fmt: skip
def test_tables_that_cannot_be(arguments, message):
    with pytest.raises(ConfigError, match=message):
        table_text(HISTORY, **arguments)
