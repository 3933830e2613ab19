"""xsec-fem sketch FILE: read and check a section file and draw it, without solving; works without gmsh."""

from __future__ import annotations

import argparse
import sys
from dataclasses import replace
from pathlib import Path

from xsec_fem.cli.exit_codes import FINE, report_error
from xsec_fem.cli.output_files import output_folders, writing_to
from xsec_fem.errors import MissingLibraryError
from xsec_fem.fem.mesh import Mesh
from xsec_fem.meshing.front import make_mesh
from xsec_fem.model.reader import read_section
from xsec_fem.model.section import Section
from xsec_fem.report.blocks import print_blocks
from xsec_fem.report.picture_files import write_sketch
from xsec_fem.report.section_summary import section_summary


def add_args(parser: argparse.ArgumentParser) -> None:
    """Declare the arguments of sketch."""
    parser.add_argument("file", metavar="FILE", help="section file (TOML)")
    parser.add_argument("--out", type=Path, metavar="DIR", help="folder for the sketch (default: out/<file's name>)")
    parser.add_argument("--svg", action="store_true", help="write sketch.svg too")


def run(args: argparse.Namespace) -> int:
    """Check and draw one section file and return the exit code; raises XsecError for faults of the input."""
    section = read_section(args.file)
    folder = output_folders([Path(args.file)], args.out)[0]
    code, mesh, files = FINE, None, []
    try:
        mesh = mesh_of_file_parts(section)
        with writing_to(folder):
            folder.mkdir(parents=True, exist_ok=True)
            files = write_sketch(section, folder, args.svg, mesh)
    except MissingLibraryError as error:
        code = report_error(error, args.file)
    print_blocks(section_summary(section, [str(file) for file in files], mesh), sys.stdout)
    return code


def mesh_of_file_parts(section: Section) -> Mesh | None:
    """Return the mesh of a section whose parts come from a file, nothing written; None for a drawn section."""
    if all(part.mesh_region is None for part in section.parts):
        return None
    return make_mesh(replace(section, solve=replace(section.solve, mesh_file=None)))
