"""Reads a results file with h5py alone: names, units, balance of forces, ascending factors, the lines for viewers.
SPDX-License-Identifier: GPL-3.0-or-later"""
import sys

import h5py
import numpy as np


def text(dataset):
    return [name.decode() for name in dataset[:]]


def described(name, thing):
    """Every dataset of ours says its units and what it is."""
    if isinstance(thing, h5py.Dataset) and not name.startswith("VTKHDF"):
        assert isinstance(thing.attrs["units"], (str, bytes)), name
        assert thing.attrs["about"], name


def balanced(f, case):
    """Reactions and loads of the case add up to nothing: forces along the axes."""
    c = f["cases"][case]
    total = c["balance/applied"][:] + c["balance/inertia"][:] + c["balance/reactions"][:]
    assert np.all(np.abs(total) <= 1e-9 * np.abs(c["balance/applied"][:]).max()), total
    assert np.allclose(c["reaction"][:, :3].sum(axis=0), c["balance/reactions"][:3], rtol=1e-9, atol=1e-9)


def lengths(f):
    """Joint to joint from the positions, as any reader would do it."""
    x, t = f["frame/joints/position"][:], f["frame/tubes"]
    far = np.linalg.norm(x[t["to"][:]] - x[t["from"][:]], axis=1)
    assert np.allclose(far, t["length"][:], rtol=1e-14)
    assert len(text(t["name"])) == len(set(text(t["name"]))) == len(far)


def fixity(f, case):
    """own_c = P L^2 / (pi^2 E I) with the least I (Euler, as in results-file terms), from the other datasets."""
    t, z = f["frame/tubes"], f["cases"][case]["fixity"]
    E = dict(zip(text(f["frame/materials/name"]), f["frame/materials/E"][:]))
    EI = np.array([E[m] for m in text(t["material"])]) * np.minimum(t["Iy"][:], t["Iz"][:])
    c = z["own_critical"][:] * t["length"][:] ** 2 / (np.pi**2 * EI)
    known = ~np.isnan(z["own_c"][:])
    assert np.allclose(c[known], z["own_c"][:][known], rtol=1e-9)


def critical(f, case):
    c = f["cases"][case]["critical"]
    nm = len(c["factor"])
    assert np.all(np.diff(np.abs(c["factor"][:])) >= 0)
    assert c["shape"].shape == (nm, len(f["frame/joints/name"]), 6)
    assert sorted(map(int, c["line"])) == list(range(1, nm + 1)) if nm else True
    for share in ("lost", "stored"):
        assert np.allclose(c[share][:].sum(axis=1) + c[share + "_others"][:], 1, atol=1e-6), share
    assert set(text(c["role"][:].reshape(-1))) <= {"idle", "riding", "bracing", "leaning"}


def scales(f):
    d = f["frame/tubes/length"].dims[0]
    assert d.label == "tube" and text(d[0]) == text(f["frame/tubes/name"])


def viewers(f):
    """Layout of an unstructured grid in VTKHDF 1.0 (VTK file format documentation, from memory)."""
    g = f["VTKHDF"]
    assert list(g.attrs["Version"]) == [1, 0] and g.attrs["Type"] == b"UnstructuredGrid"
    points, cells, ids = (int(g["NumberOf" + what][0]) for what in ("Points", "Cells", "ConnectivityIds"))
    assert g["Points"].shape == (points, 3) and g["Offsets"].shape == (cells + 1,)
    assert g["Types"].shape == (cells,) and g["Connectivity"].shape == (ids,)
    assert g["Offsets"][0] == 0 and g["Offsets"][-1] == ids and np.all(np.diff(g["Offsets"][:]) >= 2)
    assert all(d.shape == (points, 3) for d in g.get("PointData", {}).values())
    assert all(d.shape == (cells,) for d in g["CellData"].values())


with h5py.File(sys.argv[1]) as f:
    assert f.attrs["program"] == b"endfix" and int(f.attrs["layout"]) == 1
    f.visititems(described)
    lengths(f)
    scales(f)
    viewers(f)
    names = text(f["results/name"])
    assert sorted(f["cases"]) == sorted(names) and names
    for name in names:
        balanced(f, name)
        fixity(f, name)
        critical(f, name)
print("read by h5py", h5py.version.version, "- cases:", ", ".join(names))
