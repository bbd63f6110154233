"""What a file must never bring about, seen through the interpreter's own audit events.

A book that is read may not start a program, open a connection, or touch a file outside the folder of its trial.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

__all__ = ["Trespass", "watched"]

NEVER = (
    "socket.", "subprocess.", "os.system", "os.exec", "os.posix_spawn", "os.fork", "os.startfile", "webbrowser.",
    "urllib.", "http.client", "ftplib.", "smtplib.", "pty.", "shutil.rmtree", "os.chmod", "os.symlink", "os.link",
)  # fmt: skip
CHANGING = ("os.rename", "os.remove", "os.mkdir", "os.rmdir", "os.truncate", "shutil.move", "shutil.copyfile")
READABLE = tuple(
    os.path.realpath(each)
    for each in (
        sys.prefix,
        sys.base_prefix,
        Path(__file__).parents[2],
        "/usr/lib",
        "/usr/share",
        "/etc/localtime",
        "/proc/self",
    )
)


class Trespass(AssertionError):  # noqa: N818 - a deed, not a fault of the program
    """Something was touched that a file has no say in."""


class Watch:
    """The folder that may be touched just now; None while nothing is watched."""

    def __init__(self) -> None:
        self.folder: str | None = None
        self.installed = False

    def see(self, event: str, arguments: tuple[object, ...]) -> None:
        """Take an audit event."""
        if self.folder is None:
            return
        if event.startswith(NEVER):
            raise Trespass(f"{event} {arguments!r}")
        if event == "open":
            path, mode, flags = arguments[0], arguments[1], arguments[2]
            writes = bool(isinstance(flags, int) and flags & (os.O_WRONLY | os.O_RDWR | os.O_CREAT | os.O_TRUNC))
            if isinstance(path, (str, bytes, os.PathLike)) and not self.allowed(os.fsdecode(path), writes):
                raise Trespass(f"open {path!r} {mode!r}")
        elif event in CHANGING:
            for path in arguments:
                if isinstance(path, (str, bytes, os.PathLike)) and not self.allowed(os.fsdecode(path), True):
                    raise Trespass(f"{event} {arguments!r}")

    def allowed(self, path: str, writes: bool) -> bool:
        """Whether a file may be opened: any below the folder; for reading, the program's own ones too."""
        assert self.folder is not None
        real = os.path.realpath(path)
        return real.startswith(self.folder) or real == os.devnull or (not writes and real.startswith(READABLE))


WATCH = Watch()


@contextmanager
def watched(folder: Path) -> Iterator[None]:
    """While inside, raise Trespass at whatever reaches outside the folder."""
    if not WATCH.installed:
        sys.dont_write_bytecode = True
        sys.addaudithook(WATCH.see)
        WATCH.installed = True
    before, WATCH.folder = WATCH.folder, os.path.realpath(folder)
    try:
        yield
    finally:
        WATCH.folder = before
