"""Hidden environments: made once, made again when stale, never taken for whole when they are not."""

from __future__ import annotations

import subprocess

import pytest

import bootstrap


class Machine:
    """A machine on which making an environment and fetching into it are counted, not done. status -- what the next fetches exit with."""

    def __init__(self, lock):
        self.lock = lock
        self.made = 0
        self.fetched = []
        self.status = 0

    def create(self, folder, **options):
        self.made += 1
        folder.mkdir(parents=True)

    def run(self, *command, **options):
        self.fetched.append([str(part) for part in command])
        return self.status


@pytest.fixture
def machine(monkeypatch, tmp_path):
    """A machine whose environments go to a folder of the test's own."""
    made = Machine(tmp_path / "some.lock")
    made.lock.write_text("one==1 --hash=sha256:00\n", encoding="utf-8")
    monkeypatch.setattr(bootstrap, "HIDDEN", tmp_path / "hidden")
    monkeypatch.setattr(bootstrap, "ROOT", tmp_path)
    monkeypatch.setattr(bootstrap.venv, "create", made.create)
    monkeypatch.setattr(bootstrap, "run", made.run)
    return made


def test_environment_is_made_once(machine):
    """The second call fetches nothing, so a second run needs no network."""
    assert bootstrap.environment("some", machine.lock) == bootstrap.environment("some", machine.lock)
    assert machine.made == 1
    assert len(machine.fetched) == 1


def test_packages_are_held_to_their_hashes(machine):
    """Every fetch of packages asks pip to refuse what is not the locked bytes."""
    bootstrap.environment("some", machine.lock)
    assert "--require-hashes" in machine.fetched[0]
    assert machine.fetched[0][-1] == str(machine.lock)


def test_changed_lock_makes_it_anew(machine):
    """An environment belongs to the bytes of its lock."""
    bootstrap.environment("some", machine.lock)
    machine.lock.write_text("one==2 --hash=sha256:00\n", encoding="utf-8")
    bootstrap.environment("some", machine.lock)
    assert machine.made == 2


@pytest.mark.parametrize("changed", ["version", "executable"])
def test_another_python_makes_it_anew(machine, monkeypatch, changed):
    """An environment belongs to the Python that made it."""
    bootstrap.environment("some", machine.lock)
    monkeypatch.setattr(bootstrap.sys, changed, "/another/python3.13")
    bootstrap.environment("some", machine.lock)
    assert machine.made == 2


def test_moved_tree_makes_it_anew(machine, monkeypatch, tmp_path):
    """Scripts of an environment hold absolute paths, so one that was moved along with its tree is made again."""
    bootstrap.environment("some", machine.lock)
    (tmp_path / "hidden").rename(tmp_path / "moved")
    monkeypatch.setattr(bootstrap, "HIDDEN", tmp_path / "moved")
    bootstrap.environment("some", machine.lock)
    assert machine.made == 2


def test_interrupted_fetch_is_not_whole(machine):
    """When a fetch fails it says so in one sentence, and the next call starts again."""
    machine.status = 1
    with pytest.raises(bootstrap.MissingToolError, match=r"some\.lock could not be fetched; connect to the network"):
        bootstrap.environment("some", machine.lock)
    machine.status = 0
    bootstrap.environment("some", machine.lock)
    assert machine.made == 2


def test_python_without_venv(machine, monkeypatch):
    """Where Python cannot make environments one sentence names the package that can."""

    def create(folder, **options):
        raise subprocess.CalledProcessError(1, "ensurepip")

    monkeypatch.setattr(bootstrap.venv, "create", create)
    with pytest.raises(bootstrap.MissingToolError, match="apt-get install python3-venv"):
        bootstrap.environment("some", machine.lock)


def test_machine_without_node(machine, monkeypatch):
    """Where no npm is on the path and none can be fetched, one sentence says what to install."""
    monkeypatch.setattr(bootstrap.shutil, "which", lambda name: None)
    monkeypatch.setenv("PATH", "")
    lock = bootstrap.ROOT / "webui" / "node.lock"
    lock.parent.mkdir()
    lock.write_text("", encoding="utf-8")
    with pytest.raises(bootstrap.MissingToolError, match="install Node"):
        bootstrap.npm()
