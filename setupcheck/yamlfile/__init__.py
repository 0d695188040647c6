"""YAML files read with places: text, limits, scalar policy. `parse(read_text(path), file)` gives a `Tree`.

Leaf package: standard library and PyYAML only. Every refusal is a JobError that shows the lines.
"""

from setupcheck.yamlfile.reader import parse, parse_plain
from setupcheck.yamlfile.scalars import Scalar, yaml11_surprise
from setupcheck.yamlfile.source import read_text
from setupcheck.yamlfile.tree import Data, Node, Path, Place, Tree

__all__ = ["Data", "Node", "Path", "Place", "Scalar", "Tree", "parse", "parse_plain", "read_text", "yaml11_surprise"]
