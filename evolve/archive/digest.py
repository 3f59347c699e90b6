"""What tells a damaged archive from a sound one: a digest inside it, and a seal behind it.

The digest covers the contents, so it holds for a file that a tool has packed anew; the seal
covers the bytes, and is judged before HDF5 sees them: on a flipped byte in its own
structures the HDF5 library can end the whole process (measured with HDF5 2.0).
"""

import hashlib

import numpy as np

SEAL = b"\nevolve-archive sha256 "
"""Followed by 64 hexadecimal digits and a newline, after the end of what HDF5 reads."""
SEAL_LENGTH = len(SEAL) + 65

SKIPPED = {"digest", "DIMENSION_LIST", "REFERENCE_LIST"}


def seal_of(content):
    """The seal that stands behind the bytes of an archive.

    Parameters
    ----------
    content : bytes

    Returns
    -------
    bytes (SEAL_LENGTH,)
    """
    return SEAL + hashlib.sha256(content).hexdigest().encode() + b"\n"


def is_sealed(content):
    """True if a seal stands at the end, whether or not it fits."""
    return content[-SEAL_LENGTH:].startswith(SEAL)


def seal_fits(content):
    """True if the seal at the end is that of all before it."""
    return content[-SEAL_LENGTH:] == seal_of(content[:-SEAL_LENGTH])


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
