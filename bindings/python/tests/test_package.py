"""The package as a whole: documentation, types, wheel, and what it refuses to load."""

import doctest
import importlib
import inspect
import os
import pathlib
import pkgutil
import pydoc
import shutil
import subprocess
import sys

import pytest

import rampwise
from rampwise import _library

LIBRARY = os.path.realpath(_library._loaded._name)
HERE = pathlib.Path(__file__).parents[1]
MODULES = ["rampwise"] + [f"rampwise.{module.name}" for module in pkgutil.iter_modules(rampwise.__path__)]


@pytest.mark.parametrize("name", MODULES)
def test_examples_in_docstrings(name):
    assert doctest.testmod(importlib.import_module(name)).failed == 0


@pytest.mark.parametrize("name", rampwise.__all__)
def test_everything_public_is_documented(name):
    thing = getattr(rampwise, name)
    if not callable(thing):
        return
    assert inspect.getdoc(thing)
    text = pydoc.render_doc(thing)
    assert "_library" not in text and name in text
    members = [member for key, member in vars(thing).items() if not key.startswith("_")] if inspect.isclass(thing) else []
    for member in members:
        if callable(member) or isinstance(member, (property, classmethod)):
            assert inspect.getdoc(member), member


def test_types():
    result = subprocess.run([shutil.which("mypy") or "mypy", "--python-executable", sys.executable, "rampwise"],
                            cwd=HERE, capture_output=True, text=True)  # fmt: skip
    assert result.returncode == 0, result.stdout + result.stderr


def test_nothing_but_the_library_knows_ctypes():
    for path in (HERE / "rampwise").glob("*.py"):
        assert path.name == "_library.py" or "ctypes" not in path.read_text(), path


def loaded(directory, **environment):
    said = "rampwise.__file__, rampwise.library_version, *{'scipy', 'matplotlib'} & set(sys.modules)"
    return subprocess.run([sys.executable, "-c", f"import sys, rampwise; print({said})"],
                          cwd=directory, capture_output=True, text=True,
                          env={**os.environ, "PYTHONPATH": str(directory), **environment})  # fmt: skip


def test_another_version_is_refused(tmp_path):
    shutil.copytree(HERE / "rampwise", tmp_path / "rampwise", ignore=shutil.ignore_patterns("__pycache__"))
    version = tmp_path / "rampwise" / "_version.py"
    version.write_text('__version__ = "0.99.0"\n')
    result = loaded(tmp_path, RAMPWISE_LIBRARY=LIBRARY)
    assert result.returncode != 0
    assert "The package rampwise 0.99.0 does not fit the shared library, which is version" in result.stderr


def test_other_sizes_are_refused():
    with pytest.raises(ImportError, match="The package takes rampwise_system to have 24 bytes, the shared library 32"):
        _library._check_sizes(lambda name: 32)


def test_other_libraries_are_refused():
    import ctypes.util

    result = loaded(HERE, RAMPWISE_LIBRARY=ctypes.util.find_library("m"))
    assert result.returncode != 0 and "The shared library is not rampwise" in result.stderr
    result = loaded(HERE, RAMPWISE_LIBRARY="/nowhere/librampwise.so")
    assert result.returncode != 0 and "cannot be loaded" in result.stderr and "RAMPWISE_LIBRARY" in result.stderr


def test_a_wheel_carries_its_library(tmp_path):
    """Built of a copy, with the library at hand, and loaded without any help."""
    source = tmp_path / "source"
    shutil.copytree(HERE, source, ignore=shutil.ignore_patterns("__pycache__", "build", "*.egg-info", ".*"))
    environment = {**os.environ, "RAMPWISE_LIBRARY": LIBRARY}
    made = subprocess.run([sys.executable, "-m", "pip", "install", "--no-build-isolation", "--no-deps", "--no-index",
                           "--quiet", "--target", tmp_path / "installed", source],
                          env=environment, capture_output=True, text=True)  # fmt: skip
    assert made.returncode == 0, made.stdout + made.stderr
    assert (tmp_path / "installed" / "rampwise" / "librampwise.so").exists()
    environment.pop("RAMPWISE_LIBRARY")
    result = loaded(tmp_path / "installed", RAMPWISE_LIBRARY="")
    assert result.returncode == 0, result.stderr
    assert result.stdout.startswith(str(tmp_path / "installed"))
    assert result.stdout.strip().endswith(rampwise.library_version)  # and nothing loaded that is not needed yet
