"""The set-up from a fresh clone: what it says when it cannot, and that it does nothing twice."""

from __future__ import annotations

import ast
import importlib.util
import json
import sys
from pathlib import Path

import pytest

from advisor import first_run
from project.sources import ROOT


@pytest.fixture
def clone(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A folder that first_run takes for the project's; an interpreter stands in .venv."""
    for name in ("pyproject.toml", "constraints.txt"):
        (tmp_path / name).write_text((ROOT / name).read_text("utf-8"), "utf-8")
    environment = tmp_path / ".venv"
    environment.mkdir()
    monkeypatch.setattr(first_run, "ROOT", tmp_path)
    monkeypatch.setattr(first_run, "ENVIRONMENT", environment)
    monkeypatch.setattr(first_run, "PYTHON", Path(sys.executable))
    monkeypatch.setattr(first_run, "STAMP", environment / "first_run.json")
    return tmp_path


@pytest.fixture
def installed(monkeypatch: pytest.MonkeyPatch) -> list[str]:
    """What would have been installed, call by call."""
    asked: list[str] = []
    monkeypatch.setattr(first_run, "install", lambda *what: asked.append(" ".join(what)))
    return asked


def test_a_second_run_installs_nothing(clone: Path, installed: list[str]) -> None:
    first_run.set_up(with_tests=True)
    first_run.set_up(with_tests=True)
    first_run.set_up(with_tests=False)
    assert installed == ["--editable .[tests]"]


def test_the_tests_add_to_what_the_dashboard_has_installed(
    clone: Path, installed: list[str]
) -> None:
    first_run.set_up(with_tests=False)
    first_run.set_up(with_tests=True)
    assert installed == ["--editable .", "--editable .[tests]"]


@pytest.mark.parametrize("name", ["pyproject.toml", "constraints.txt"])
def test_other_versions_are_installed_anew(clone: Path, installed: list[str], name: str) -> None:
    first_run.set_up(with_tests=False)
    with (clone / name).open("a", encoding="utf-8") as file:
        file.write("# one line more\n")
    first_run.set_up(with_tests=False)
    assert len(installed) == 2


def test_an_interrupted_set_up_is_done_again(clone: Path, installed: list[str]) -> None:
    first_run.STAMP.write_text('{"folder": "', "utf-8")
    first_run.set_up(with_tests=False)
    assert len(installed) == 1
    assert json.loads(first_run.STAMP.read_text("utf-8"))["folder"] == str(clone)


def test_a_missing_interpreter_does_not_work() -> None:
    assert first_run.works(Path(sys.executable))
    assert not first_run.works(ROOT / "no" / "python")


def test_a_python_without_ensurepip_is_told_what_to_install(
    clone: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(importlib.util, "find_spec", lambda name: None)
    with pytest.raises(SystemExit, match="sudo apt install python3"):
        first_run.make_environment()


def test_no_network_is_told(
    clone: Path, monkeypatch: pytest.MonkeyPatch, capfd: pytest.CaptureFixture[str]
) -> None:
    # Port 9 of this machine discards: nobody answers there.
    monkeypatch.setenv("PIP_INDEX_URL", "http://127.0.0.1:9/")
    monkeypatch.setenv("PIP_EXTRA_INDEX_URL", "")
    monkeypatch.setenv("PIP_RETRIES", "1")
    with pytest.raises(SystemExit, match="Check the network"):
        first_run.install("--target", str(clone / "nowhere"), "a-library-nobody-answers-for")
    assert "first run" not in capfd.readouterr().err


def test_another_failure_is_not_called_a_network_failure(clone: Path) -> None:
    with pytest.raises(SystemExit, match="the reason stands above"):
        first_run.install("--no-such-option")


def test_an_exit_code_is_handed_through(clone: Path) -> None:
    assert first_run.run("-c", "import sys; sys.exit(7)") == 7


def test_an_unknown_word_shows_the_commands(capsys: pytest.CaptureFixture[str]) -> None:
    assert first_run.main(["dashbord"]) == 2
    assert "first_run.py dashboard" in capsys.readouterr().out
    assert first_run.main(["--help"]) == 0


def test_an_old_python_can_read_the_file_far_enough_to_say_it_is_old() -> None:
    text = (ROOT / "advisor" / "first_run.py").read_text("utf-8")
    statements = ast.parse(text, feature_version=(3, 6)).body
    check = next(n for n, part in enumerate(statements) if isinstance(part, ast.If))
    assert "Python 3.11 or newer" in ast.unparse(statements[check])
    assert [ast.unparse(part) for part in statements[1:check]] == ["import sys"]


def test_only_the_standard_library_is_needed() -> None:
    text = (ROOT / "advisor" / "first_run.py").read_text("utf-8")
    names = {
        name
        for node in ast.walk(ast.parse(text))
        for name in (
            [alias.name for alias in node.names]
            if isinstance(node, ast.Import)
            else [node.module or ""]
            if isinstance(node, ast.ImportFrom)
            else []
        )
    }
    assert {name.partition(".")[0] for name in names} <= sys.stdlib_module_names
