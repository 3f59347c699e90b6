"""A digest of everything in a file: a flipped byte in an attribute has no checksum of its own."""

import hashlib

import numpy as np

SKIPPED = {"digest", "DIMENSION_LIST", "REFERENCE_LIST"}


def digest_of(file):
    """SHA-256 over every dataset and attribute of an open HDF5 file, in order of their names.

    Parameters
    ----------
    file : h5py.File

    Returns
    -------
    str
        Hexadecimal.
    """
    import h5py

    total = hashlib.sha256()

    def add(name, thing):
        total.update(name.encode())
        for key in sorted(thing.attrs):
            if key not in SKIPPED:
                total.update(key.encode())
                total.update(_bytes(thing.attrs[key]))
        if isinstance(thing, h5py.Dataset):
            total.update(str(thing.shape).encode())
            total.update(_bytes(thing[()]))

    add("/", file)
    names = []
    file.visit(names.append)
    for name in sorted(names):
        add(name, file[name])
    return total.hexdigest()


def _bytes(value):
    if isinstance(value, bytes):
        return value
    if isinstance(value, str):
        return value.encode()
    array = np.asarray(value)
    if array.dtype.kind in "OSU":
        parts = [x if isinstance(x, bytes) else str(x).encode() for x in array.ravel()]
        return b"\0".join(parts)
    return array.tobytes()
