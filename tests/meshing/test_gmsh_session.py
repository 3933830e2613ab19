"""gmsh is started clean, put away always, and its failures are ours."""

from __future__ import annotations

import builtins
import sys
import threading

import pytest

from tests.meshing.sections import rectangle, section
from xsec_fem.errors import MeshingError, MissingLibraryError
from xsec_fem.meshing.gmsh_mesher import mesh_section
from xsec_fem.meshing.gmsh_session import gmsh_session, load_gmsh

gmsh = load_gmsh()


def test_the_session_is_finalised_also_after_an_error():
    with pytest.raises(ZeroDivisionError), gmsh_session() as session:
        print(1 / (session.isInitialized() - 1))
    assert not gmsh.isInitialized()


def test_gmsh_errors_carry_its_last_words():
    with pytest.raises(MeshingError, match=r"gmsh failed: .*nowhere\.msh"), gmsh_session() as session:
        session.merge("nowhere.msh")
    assert not gmsh.isInitialized()


def test_nothing_is_printed(capfd):
    mesh_section(section({"r": rectangle(0, 0, 2, 1)}), 2)
    assert capfd.readouterr() == ("", "")


def test_a_running_gmsh_is_borrowed_and_left_as_it_was():
    gmsh.initialize(readConfigFiles=False, interruptible=False)
    try:
        gmsh.option.setNumber("General.Terminal", 0)
        gmsh.option.setNumber("Mesh.Algorithm", 5)
        gmsh.model.add("mine")
        gmsh.model.occ.addDisk(0, 0, 0, 1, 1)
        gmsh.model.occ.synchronize()
        mesh = mesh_section(section({"r": rectangle(0, 0, 2, 1)}), 2)
        assert gmsh.isInitialized()
        assert gmsh.model.getCurrent() == "mine"
        assert gmsh.model.getEntities(2) == [(2, 1)]
        assert gmsh.option.getNumber("Mesh.Algorithm") == 5
        assert "xsec_fem" not in gmsh.model.list()
        with pytest.raises(MeshingError, match="gmsh failed"), gmsh_session() as session:
            session.merge("nowhere.msh")
        assert gmsh.model.list().count("xsec_fem") == 0
    finally:
        gmsh.finalize()
    alone = mesh_section(section({"r": rectangle(0, 0, 2, 1)}), 2)
    assert alone.nodes.tobytes() == mesh.nodes.tobytes()


def test_threads_wait_for_each_other():
    found = {}

    def work(name):
        found[name] = mesh_section(section({name: rectangle(0, 0, 2, 1)}), 2)

    threads = [threading.Thread(target=work, args=(name,)) for name in "abcd"]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    assert {name: mesh.part_names for name, mesh in found.items()} == {name: (name,) for name in "abcd"}
    assert len({mesh.nodes.tobytes() for mesh in found.values()}) == 1


@pytest.mark.parametrize(
    ("error", "what"),
    [
        (OSError("libGLU.so.1: cannot open shared object file: No such file"), r"libGLU\.so\.1 is missing"),
        (ImportError("No module named 'gmsh'"), "No module named 'gmsh'"),
        (TypeError("LoadLibrary() argument 1 must be str, not None"), r"LoadLibrary\(\) argument 1 must be str"),
    ],
)
def test_a_gmsh_that_cannot_be_loaded_names_the_remedy(monkeypatch, error, what):
    original = builtins.__import__

    def fail(name, *args, **kwargs):
        if name == "gmsh":
            raise error
        return original(name, *args, **kwargs)

    monkeypatch.setattr(builtins, "__import__", fail)
    monkeypatch.delitem(sys.modules, "gmsh")
    with pytest.raises(MissingLibraryError, match=rf"gmsh cannot be loaded \({what}.*\): run `xsec-fem doctor`"):
        load_gmsh()
