"""The archive of a study: arrays over its axes, axes as dimension scales."""

from importlib.util import find_spec
from typing import NamedTuple

import numpy as np

from evolve.archive.digest import digest_of
from evolve.archive.paths import check_output, whole_file
from evolve.errors import ArchiveError
from evolve.history.history import present_versions
from evolve.studies.results import OUTCOMES

FORMAT, LAYOUT = "evolve-study", 1


class Scale(NamedTuple):
    """One axis: its key, its numbers (or words), their unit."""

    key: str
    values: np.ndarray
    unit: str


class StudyResult(NamedTuple):
    """What a study found.

    scales    list of Scale, the draws last
    values    dict: result's name -> ndarray over the scales, NaN where a point has none
    units     dict: of the results
    codes     ndarray of int over the scales: end of each point, by OUTCOMES
    messages  dict: number of a failed point (C order) -> its reason
    drawn     dict: key -> ndarray (count,), what was drawn, in the unit written
    draw_units dict
    text, title, note, digest
    """

    scales: list
    values: dict
    units: dict
    codes: np.ndarray
    messages: dict
    drawn: dict
    draw_units: dict
    text: str
    title: str
    note: str
    digest: str

    @classmethod
    def of(cls, study, values, codes, messages):
        """From rows by the points' numbers."""
        shape, scales = study.shape, scales_of(study)
        return cls(
            scales,
            {r.name: values[:, n].reshape(shape) for n, r in enumerate(study.keep)},
            {r.name: r.unit for r in study.keep},
            codes.reshape(shape), dict(sorted(messages.items())), study.drawn(),
            {k: d.unit for k, d in study.draws.keys.items()} if study.draws else {},
            study.text, study.title, study.note, study.digest,
        )  # fmt: skip

    @property
    def failed(self):
        """Number of points without an answer."""
        return len(self.messages)


def scales_of(study):
    """The axes of a study as list of Scale, the draws last."""
    scales = [
        Scale(axis.key, axis.numbers if axis.unit or _numeric(axis) else np.array(axis.values), axis.unit)
        for axis in study.axes
    ]
    return scales + ([Scale("draw", np.arange(study.draws.count), "")] if study.draws else [])


def _numeric(axis):
    return all(isinstance(value, (int, float)) for value in axis.values)


def study_versions():
    """Versions of what computes the histories of a study here; numba's only if it is there."""
    return dict(present_versions(*["numba"] * (find_spec("numba") is not None)))


def write_study(result, path, replace=False):
    """Write a study's archive, whole or not at all.

    Parameters
    ----------
    result : StudyResult
    path : str or Path
    replace : bool

    Raises
    ------
    ConfigError, ArchiveError
        As of `evolve.archive.write_archive`.
    """
    import h5py

    path = check_output(path, replace)
    with whole_file(path) as part, h5py.File(part, "w", track_order=True) as file:
        _write(file, result)


def _write(file, result):
    import h5py

    from evolve import __version__

    file.attrs["format"], file.attrs["layout"] = FORMAT, np.int64(LAYOUT)
    file.attrs["evolve_version"] = __version__
    versions = study_versions() | {"h5py": h5py.__version__, "HDF5": h5py.version.hdf5_version}
    for name, version in versions.items():
        file.attrs[f"{name}_version"] = version
    file.attrs["title"], file.attrs["note"] = result.title, result.note
    file.attrs["study_digest"] = result.digest
    file.create_dataset("study", data=result.text, dtype=h5py.string_dtype())
    group = file.create_group("results", track_order=True)
    scales = []
    for scale in result.scales:
        data = scale.values
        if data.dtype.kind in "OU":
            data = np.array([str(x) for x in data], dtype=object)
            dataset = group.create_dataset(scale.key, data=data, dtype=h5py.string_dtype())
        else:
            dataset = group.create_dataset(scale.key, data=data)
        dataset.attrs["units"], dataset.attrs["long_name"] = scale.unit, scale.key
        dataset.make_scale(scale.key)
        scales.append(dataset)
    packed = {"compression": "gzip", "shuffle": True, "fletcher32": True} if scales else {}
    for name, values in result.values.items():
        _over(group, name, values, scales, packed, units=result.units[name], long_name=name)
    flags = {
        "flag_values": np.arange(len(OUTCOMES), dtype=np.int16),
        "flag_meanings": " ".join(word or "none" for word in OUTCOMES),
    }
    _over(group, "outcome", result.codes.astype(np.int16), scales, packed, units="",
          long_name="how the history ended", **flags)  # fmt: skip
    for key, values in result.drawn.items():
        _over(group, f"drawn:{key}", values, scales[-1:], packed, units=result.draw_units[key],
              long_name=f"drawn {key}")  # fmt: skip
    failed = file.create_group("failed", track_order=True)
    failed.create_dataset("point", data=np.array(list(result.messages), dtype=np.int64))
    failed.create_dataset("reason", data=list(result.messages.values()), dtype=h5py.string_dtype())
    file.attrs["complete"] = np.int8(1)
    file.attrs["digest"] = digest_of(file)


def _over(group, name, values, scales, packed, **attributes):
    dataset = group.create_dataset(name, data=values, **packed)
    for key, value in attributes.items():
        dataset.attrs[key] = value
    for place, scale in enumerate(scales):
        dataset.dims[place].attach_scale(scale)


def is_study(path):
    """True if an HDF5 file is a study's archive."""
    import h5py

    try:
        with h5py.File(path, "r") as file:
            return file.attrs.get("format") == FORMAT
    except OSError:
        return False


def open_study(path):
    """The StudyResult in an archive.

    Raises
    ------
    ArchiveError
        For a file that is no study's archive, damaged, or of a newer layout.
    """
    import h5py

    try:
        with h5py.File(path, "r") as file:
            if file.attrs.get("format") != FORMAT:
                raise ArchiveError(f"{path}: is no archive of a study")
            if int(file.attrs["layout"]) > LAYOUT:
                raise ArchiveError(f"{path}: has a newer layout; install a newer evolve")
            if file.attrs["digest"] != digest_of(file):
                raise ArchiveError(f"{path}: is damaged; run the study again")
            return _read(file)
    except (OSError, KeyError) as error:
        raise ArchiveError(f"{path}: is damaged or no archive ({error})") from error


def _read(file):
    group, scales, values, units, drawn, draw_units = file["results"], [], {}, {}, {}, {}
    codes = None
    for name, data in group.items():
        unit = str(data.attrs["units"])
        if data.is_scale:
            text = data.dtype.kind == "O"
            scales.append(Scale(name, data.asstr()[()] if text else data[()], unit))
        elif name.startswith("drawn:"):
            drawn[name[6:]], draw_units[name[6:]] = data[()], unit
        elif name == "outcome":
            codes = data[()]
        else:
            values[name], units[name] = data[()], unit
    failed = file["failed"]
    messages = dict(zip(failed["point"][()].tolist(), failed["reason"].asstr()[()], strict=True))
    return StudyResult(
        scales, values, units, codes, messages, drawn, draw_units, file["study"].asstr()[()],
        str(file.attrs["title"]), str(file.attrs["note"]), str(file.attrs["study_digest"]),
    )  # fmt: skip
