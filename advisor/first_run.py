"""Set up and start from a fresh clone, with nothing but Python 3.11 or newer.

python3 advisor/first_run.py              set up the program and its tests
python3 advisor/first_run.py dashboard    set up, then open the dashboard on demo_plant
python3 advisor/first_run.py tests        set up, then run every test

Words after `dashboard` go to the dashboard, words after `tests` go to pytest. Everything is put
in the folder .venv beside pyproject.toml; to start over, delete that folder.
"""

# The grammar of this file is kept old, so that an old Python says what it lacks, not SyntaxError.
import sys

if sys.version_info < (3, 11):  # noqa: UP036
    sys.exit(
        "This program needs Python 3.11 or newer; this is Python {}.{}.\n"
        "Install a newer Python from your system or python.org, then give the same command "
        "with it, for example: python3.13 advisor/first_run.py".format(*sys.version_info)
    )

import hashlib
import importlib.util
import json
import os
import subprocess
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
ENVIRONMENT = ROOT / ".venv"
PYTHON = ENVIRONMENT / ("Scripts/python.exe" if os.name == "nt" else "bin/python")
STAMP = ENVIRONMENT / "first_run.json"

NO_NETWORK = ("NewConnectionError", "NameResolutionError", "ProxyError", "timed out")


def main(words: list[str]) -> int:
    """Exit code of the command in ``words``, after setting up what it needs."""
    command, rest = (words[0], words[1:]) if words else ("", [])
    if command not in ("", "dashboard", "tests"):
        print(__doc__)
        return 0 if command in ("-h", "--help") else 2
    set_up(with_tests=command != "dashboard")
    if command == "dashboard":
        return run("-m", "advisor", "dashboard", "demo_plant", *rest)
    if command == "tests":
        return run("-m", "pytest", *rest)
    print("Next: python3 advisor/first_run.py dashboard")
    return 0


def set_up(with_tests: bool) -> None:
    """Make .venv and install the program in it, unless an earlier run did with these versions."""
    wanted = state(with_tests)
    if PYTHON.exists() and held() in (wanted, state(with_tests=True)):
        return
    if not works(PYTHON):
        make_environment()
    extra = "[tests]" if with_tests else ""
    say("installing the libraries; the first time takes some minutes and 1 GB of disk")
    install("--editable", "." + extra)
    STAMP.write_text(json.dumps(wanted), encoding="utf-8")
    say("set up")


def state(with_tests: bool) -> dict[str, object]:
    """What an environment was made from; another state means it must be brought up to date."""
    digest = hashlib.sha256()
    for name in ("pyproject.toml", "constraints.txt"):
        digest.update((ROOT / name).read_bytes())
    return {"folder": str(ROOT), "versions": digest.hexdigest(), "tests": with_tests}


def held() -> object:
    """The state that the last complete set-up left in .venv."""
    try:
        return json.loads(STAMP.read_text(encoding="utf-8"))
    except (OSError, ValueError):
        return None


def works(python: Path) -> bool:
    """Whether ``python`` is there, starts, is new enough and has pip."""
    ask = "import sys, pip; sys.exit(sys.version_info < (3, 11))"
    try:
        return subprocess.run([python, "-c", ask], capture_output=True).returncode == 0
    except OSError:
        return False


def make_environment() -> None:
    """A new, empty .venv in place of a missing or broken one."""
    if not (importlib.util.find_spec("venv") and importlib.util.find_spec("ensurepip")):
        sys.exit(
            "This Python cannot make an environment: its module venv or ensurepip is missing.\n"
            "On Debian or Ubuntu: sudo apt install python{}.{}-venv\n"
            "Elsewhere install Python from python.org. Then give the same command again.".format(
                *sys.version_info
            )
        )
    say("making an environment in .venv with Python {}.{}.{}".format(*sys.version_info))
    made = subprocess.run([sys.executable, "-m", "venv", "--clear", str(ENVIRONMENT)])
    if made.returncode:
        sys.exit("The environment could not be made; the reason stands above.")


def install(*what: str) -> None:
    """Install with the versions of constraints.txt, for the isolated build of a wheel too."""
    versions = {
        "PIP_CONSTRAINT": "constraints.txt",
        "PIP_BUILD_CONSTRAINT": "constraints.txt",
        "PIP_DISABLE_PIP_VERSION_CHECK": "1",
        "PIP_NO_INPUT": "1",
    }
    complaints = []
    with subprocess.Popen(
        [PYTHON, "-m", "pip", "install", *what],
        cwd=ROOT,
        env={**os.environ, **versions},
        stderr=subprocess.PIPE,
        text=True,
        errors="replace",
    ) as pip:
        for line in pip.stderr or ():
            sys.stderr.write(line)
            complaints.append(line)
    if pip.returncode == 0:
        return
    if any(sign in line for sign in NO_NETWORK for line in complaints):
        sys.exit(
            "The libraries could not be fetched: no answer from the package index. Check the "
            "network; behind a proxy set HTTPS_PROXY. Then give the same command again."
        )
    sys.exit("The libraries could not be installed; the reason stands above.")


def run(*words: str) -> int:
    """Exit code of .venv's Python with ``words``, in the project's folder."""
    try:
        return subprocess.run([PYTHON, *words], cwd=ROOT).returncode
    except KeyboardInterrupt:
        return 130


def say(words: str) -> None:
    print("first run: " + words, flush=True)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
