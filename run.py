#!/usr/bin/env python3
"""The two commands of this checkout, with nothing installed but Python 3.11 or later.

    python3 run.py check [BOOK or OPTION ...]     recalculate and check the shipped workbooks (or the books named)
    python3 run.py test [PYTEST OPTION ...]       install what the tests need and run them

Without a command it checks. The first start makes a virtual environment, .venv in this checkout, and installs
cellsection into it; later starts use it as it is until pyproject.toml changes. Nothing outside this checkout is
touched, except that `test` installs LibreOffice by apt where it is missing and we are root or CI is set.
Options after `check` go to `cellsection check` (see `check --help`), options after `test` go to pytest.
"""

import hashlib
import importlib
import importlib.util
import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

OLDEST = (3, 11)
if sys.version_info < OLDEST:  # before anything below that an older Python cannot read
    sys.exit(
        "run.py: this is Python {}.{}; cellsection needs Python {}.{} or later. "
        "Start it with a newer one, for example: python3.12 run.py".format(*sys.version_info[:2], *OLDEST)
    )

ROOT = Path(__file__).resolve().parent
VENV = ROOT / ".venv"
PYTHON = str(VENV / ("Scripts/python.exe" if os.name == "nt" else "bin/python"))
STAMP = VENV / "installed.json"
BOOKS = (".xlsx", ".xlsm", ".ods")
IN_CI = os.environ.get("CI", "").lower() not in ("", "0", "false")


class Stop(Exception):  # noqa: N818 - not a fault of the program: one line for the person at the keyboard
    """Ends the run with one clear line."""


def main(arguments: list[str]) -> int:
    """Run the command named by the first argument; exit code of what was run."""
    command, rest = "check", arguments
    if arguments[:1] in (["check"], ["test"]):
        command, rest = arguments[0], arguments[1:]
    elif arguments[:1] in (["-h"], ["--help"], ["help"]):
        print(__doc__.strip())
        return 0
    elif arguments and not arguments[0].startswith("-"):
        raise Stop(f"there is no command {arguments[0]!r}; the two are check and test")
    return check(rest) if command == "check" else test(rest)


def check(arguments: list[str]) -> int:
    """Check the books named among the arguments, else the shipped ones."""
    install()
    if not any(Path(each).exists() for each in arguments):
        shipped = sorted(each for each in (ROOT / "workbooks").glob("*") if is_book(each))
        if not shipped:
            raise Stop("this checkout ships no workbooks; name the book to check: run.py check BOOK.xlsx")
        arguments = [*arguments, *(shown(each) for each in shipped)]
    return run([PYTHON, "-m", "cellsection", "check", *arguments])


def test(arguments: list[str]) -> int:
    """Run pytest on all cores, in this checkout."""
    install("dev")
    provide_libreoffice()
    return run([PYTHON, "-m", "pytest", "-n", "auto", *arguments], cwd=ROOT)


# The virtual environment


def install(extra: str = "") -> None:
    """Install the package, editable and with its extra, into .venv; nothing to do where the stamp says it is there."""
    wanted = {"project": hashlib.sha256((ROOT / "pyproject.toml").read_bytes()).hexdigest(), "checkout": str(ROOT)}
    stamp = read_stamp()
    present = stamp.pop("extra", "")
    if Path(PYTHON).exists() and stamp == wanted and extra in ("", present):
        return
    pip = environment()
    say(f"Installing cellsection{' and what its tests need' if extra else ''} into .venv (once, about a minute) ...")
    STAMP.unlink(missing_ok=True)
    done = quiet([*pip, "install", "--quiet", "--editable", f"{ROOT}[{extra}]" if extra else str(ROOT)])
    if done.returncode:
        say(done.stdout.strip())
        raise Stop("pip could not install cellsection (its words are above). Look to the network, then start again")
    quiet([PYTHON, "-m", "compileall", "-q", str(ROOT / "cellsection")])  # pip does it for all but an editable package
    STAMP.write_text(json.dumps({**wanted, "extra": extra}), encoding="utf-8")


def read_stamp() -> dict[str, str]:
    """What the last complete installation was made of; empty where there was none."""
    try:
        return dict(json.loads(STAMP.read_text(encoding="utf-8")))
    except (OSError, ValueError):
        return {}


def environment() -> list[str]:
    """Make .venv where it is missing or broken; the pip command that installs into it."""
    own_pip = [PYTHON, "-m", "pip"]
    if (
        Path(PYTHON).exists()
        and quiet([PYTHON, "-c", "import sys; sys.exit(sys.version_info < (3, 11))"]).returncode == 0
    ):
        if quiet([*own_pip, "--version"]).returncode == 0:
            return own_pip
        if system_pip():
            return system_pip()
    say("Making a virtual environment in .venv ...")
    making = [sys.executable, "-m", "venv", "--clear", str(VENV)]
    if not has_ensurepip() and not system_pip():
        package = f"python{sys.version_info[0]}.{sys.version_info[1]}-venv"
        apt_install(package, why="this Python comes without the part that makes virtual environments")
    made = quiet(making) if has_ensurepip() else None
    if made and made.returncode == 0:
        return own_pip
    if system_pip():  # Debian without python3-venv: an environment without pip, filled by the pip outside
        made = quiet([*making, "--without-pip"])
        if made.returncode == 0:
            return system_pip()
    say(made.stdout.strip() if made else "")
    raise Stop(f"{sys.executable} could not make a virtual environment (its words are above)")


def has_ensurepip() -> bool:
    """Whether our Python can put a pip of its own into an environment."""
    importlib.invalidate_caches()
    found = importlib.util.find_spec("ensurepip")
    return found is not None and found.loader is not None  # an empty folder of that name has no loader


def system_pip() -> list[str]:
    """The pip of the Python we run under, told to install into .venv; empty where there is none that can."""
    asked = quiet([sys.executable, "-m", "pip", "--version"])
    if asked.returncode:
        return []
    version = asked.stdout.split()[1].split(".")
    able = (int(version[0]), int(version[1])) >= (22, 3)  # the first with --python
    return [sys.executable, "-m", "pip", "--python", PYTHON] if able else []


# LibreOffice, for the tests that start it


def provide_libreoffice() -> None:
    """Install LibreOffice where that is ours to do, else say how to get it: its tests are skipped meanwhile."""
    if find_libreoffice():
        return
    if shutil.which("apt-get") and (is_root() or IN_CI):
        apt_install("libreoffice-calc", why="the tests that start LibreOffice need it")
    elif IN_CI:
        raise Stop("LibreOffice is missing and CI is set: install it (https://www.libreoffice.org/download) first")
    else:
        remedy = "sudo apt-get install libreoffice-calc" if shutil.which("apt-get") else "https://www.libreoffice.org"
        say(f"LibreOffice is missing, so the tests that start it are skipped. To get it: {remedy}")


def find_libreoffice() -> bool:
    """Whether there is a LibreOffice where the tests look for it (tests/conftest.py)."""
    mac, windows = "/Applications/LibreOffice.app/Contents/MacOS", r"C:\Program Files\LibreOffice\program"
    return any(shutil.which("soffice", path=place) for place in (None, mac, windows))


def apt_install(package: str, why: str) -> None:
    """Install a Debian package, as root or in CI; otherwise stop with the line that does it."""
    if not shutil.which("apt-get"):
        raise Stop(f"{why}. Install a Python from https://www.python.org and start again")
    if not (is_root() or IN_CI):
        raise Stop(f"{why}. Run: sudo apt-get install {package}")
    say(f"Installing {package} by apt ({why}) ...")
    sudo = [] if is_root() else ["sudo", "-n"]
    for step in (["update", "-q"], ["install", "-y", "-q", "--no-install-recommends", package]):
        done = quiet([*sudo, "apt-get", *step], DEBIAN_FRONTEND="noninteractive")
    if done.returncode:
        say(done.stdout.strip())
        raise Stop(f"apt-get could not install {package} (its words are above)")


# Small things


def is_root() -> bool:
    """Whether we may install system packages."""
    return os.name == "posix" and os.geteuid() == 0


def is_book(path: Path) -> bool:
    """Whether a file is a workbook, not the lock file of an open one."""
    return path.suffix.lower() in BOOKS and not path.name.startswith((".~lock.", "~$"))


def shown(path: Path) -> str:
    """A path as short as it can be said from where we stand."""
    try:
        return str(path.relative_to(Path.cwd()))
    except ValueError:
        return str(path)


def clean(**more: str) -> dict[str, str]:
    """The environment for what we start: no Python settings of elsewhere, no questions from pip."""
    kept = {name: value for name, value in os.environ.items() if name not in ("PYTHONHOME", "PYTHONPATH", "PIP_USER")}
    return {**kept, "PIP_DISABLE_PIP_VERSION_CHECK": "1", "PIP_NO_INPUT": "1", "PIP_USER": "0", **more}


def quiet(command: list[str], **more: str) -> "subprocess.CompletedProcess[str]":
    """Run a step and keep what it prints for the case that it fails."""
    return subprocess.run(
        command,
        env=clean(**more),
        stdin=subprocess.DEVNULL,
        stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT,
        text=True,
        errors="replace",
        check=False,
    )


def run(command: list[str], cwd: Path | None = None) -> int:
    """Run the command itself, seen by the person at the keyboard; its exit code."""
    return subprocess.run(command, cwd=cwd, env=clean(), check=False).returncode


def say(line: str) -> None:
    """One line of progress, beside the result rather than in it."""
    print(line, file=sys.stderr, flush=True)


if __name__ == "__main__":
    try:
        sys.exit(main(sys.argv[1:]))
    except Stop as stop:
        sys.exit(f"run.py: {stop}.")
    except KeyboardInterrupt:
        sys.exit(130)
