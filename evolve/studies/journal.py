"""An append-only journal of finished points: whatever kills a study, what was done stays.

One file beside the study's archive. A header line names the study by its digest; then come
records of fixed size, each with its checksum. A record that is cut or does not fit its
checksum was never written, for all that anybody can tell, and its point is computed again.
"""

import fcntl
import os
import struct
import time
import zlib
from pathlib import Path

from evolve.errors import ConfigError

MESSAGE = 240
"""Bytes kept of a failed point's reason."""
SYNC = 1.0
"""Seconds between two syncs to the disk: as much as a power cut may lose. A kill loses nothing
that was added."""
PATIENCE = 3.0
"""Seconds to wait for the lock: workers of a killed process take a moment to end."""


def clipped(message):
    """As much of a message as a record holds: what goes on must not differ from what was told."""
    return message.encode()[:MESSAGE].decode("utf-8", "ignore")


class Journal:
    """The journal of one study, locked while it is open.

    Parameters
    ----------
    path : str or Path
    digest : str
        Of the study, and of all that its bits rest on.
    n_values : int
        Numbers a record holds.
    replace : bool
        Whether a journal of another study may be replaced. One of this study goes on anyway.

    Raises
    ------
    ConfigError
        If the journal is another study's, or another process works on it.
    """

    def __init__(self, path, digest, n_values, replace=False):
        self.path, self.layout = Path(path), struct.Struct(f"<q{n_values}di{MESSAGE}s")
        self.size = self.layout.size + 4
        self.header = f"evolve-journal 2 {digest} {n_values}\n".encode()
        self.file = open(self.path, "a+b")
        self._lock()
        self.synced = time.monotonic()
        self._start(replace)

    def _lock(self):
        start = time.monotonic()
        while True:
            try:
                return fcntl.flock(self.file, fcntl.LOCK_EX | fcntl.LOCK_NB)
            except OSError as error:
                if time.monotonic() - start > PATIENCE:
                    self.file.close()
                    raise ConfigError(f"{self.path}: another process works on this study") from error
            time.sleep(0.05)

    def _start(self, replace):
        """Check the header, cut what is broken at the end."""
        self.file.seek(0)
        head = self.file.read(len(self.header))
        if not head:
            self.file.write(self.header)
        elif head != self.header:
            whole = self.header.startswith(head)
            if not whole and not replace:
                self.close()
                raise ConfigError(
                    f"{self.path}: was written by another study or version, or the study has "
                    "changed since; give --replace to start afresh, or another output"
                )
            self.file.truncate(0)
            self.file.write(self.header)
        self.file.flush()
        end = self.file.seek(0, os.SEEK_END)
        records = max(end - len(self.header), 0) // self.size
        self.file.truncate(len(self.header) + records * self.size)

    def records(self):
        """What is there: (index, values, code, message) of every whole record."""
        self.file.flush()
        with open(self.path, "rb") as file:
            file.seek(len(self.header))
            while len(data := file.read(self.size)) == self.size:
                body, check = data[:-4], data[-4:]
                if zlib.crc32(body) == int.from_bytes(check, "little"):
                    index, *values, code, message = self.layout.unpack(body)
                    yield index, values, code, message.rstrip(b"\0").decode("utf-8", "replace")

    def add(self, index, values, code, message=""):
        """Append a record."""
        text = clipped(message).encode()
        body = self.layout.pack(index, *values, code, text)
        self.file.write(body + zlib.crc32(body).to_bytes(4, "little"))
        self.file.flush()
        if time.monotonic() - self.synced > SYNC:
            self.sync()

    def sync(self):
        """Everything written is on the disk after this."""
        self.file.flush()
        os.fsync(self.file.fileno())
        self.synced = time.monotonic()

    def close(self):
        """Sync and let go of the lock."""
        if not self.file.closed:
            self.sync()
            self.file.close()

    def __enter__(self):
        return self

    def __exit__(self, *error):
        self.close()
