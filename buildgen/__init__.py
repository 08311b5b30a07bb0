"""buildgen: from one definition of a small electric aeroplane to its whole build package.

from buildgen import build, load

kit = build(load("marram"))
kit.write("out")
"""

from buildgen.build import Build, build
from buildgen.design import Design, load
from buildgen.problems import DesignError, Problem

__version__ = "0.1.0"

__all__ = ["Build", "Design", "DesignError", "Problem", "__version__", "build", "load"]
