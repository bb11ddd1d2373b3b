"""Puts the shared library into the wheel: the file RAMPWISE_LIBRARY, or one that Meson builds of the source tree."""

import os
import pathlib
import subprocess
import tempfile

from setuptools import Distribution, setup
from setuptools.command.build_py import build_py
from wheel.bdist_wheel import bdist_wheel

SOURCE = pathlib.Path(__file__).resolve().parents[2]


def built_library(directory):
    setup_options = ["-Dbuildtype=release", "-Ddefault_library=shared"]
    subprocess.check_call(["meson", "setup", directory, str(SOURCE), *setup_options])
    subprocess.check_call(["meson", "compile", "-C", directory, "rampwise"])
    return pathlib.Path(directory, "librampwise.so")


class BuildWithLibrary(build_py):
    def run(self):
        super().run()
        target = pathlib.Path(self.build_lib, "rampwise", "librampwise.so")
        with tempfile.TemporaryDirectory() as directory:
            given = os.environ.get("RAMPWISE_LIBRARY")
            library = pathlib.Path(given) if given else built_library(directory)
            target.write_bytes(library.read_bytes())


class WithLibrary(Distribution):
    def has_ext_modules(self):
        return True


class WheelOfPlatform(bdist_wheel):
    """For one platform, and any Python: nothing in it is compiled for an interpreter."""

    def get_tag(self):
        return "py3", "none", super().get_tag()[2]


setup(distclass=WithLibrary, cmdclass={"build_py": BuildWithLibrary, "bdist_wheel": WheelOfPlatform})
