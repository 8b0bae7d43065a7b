"""Lowest factors of (K + lambda G) x = 0 from Matrix Market files by SciPy, against those stored."""
import os
import sys

import h5py
import numpy as np
import scipy.io
import scipy.linalg
import scipy.sparse.linalg

folder, results = sys.argv[1], sys.argv[2]
compared = 0
with h5py.File(results) as f:
    cases = f["cases"]
    for name in cases:
        stem = os.path.join(folder, name)
        if not os.path.exists(stem + ".K.mtx"):
            continue
        group = cases[name]
        stored = None

        def take(path, item):
            global stored
            if stored is None and isinstance(item, h5py.Dataset) and path.split("/")[-1] == "factor" and item.ndim == 1:
                stored = np.sort(item[()])
        group.visititems(take)
        if stored is None or len(stored) == 0:
            continue
        K = scipy.io.mmread(stem + ".K.mtx").tocsc()
        G = scipy.io.mmread(stem + ".G.mtx").tocsc()
        if os.path.exists(stem + ".C.mtx"):  # a free body: shapes obey C'x = 0
            C = scipy.io.mmread(stem + ".C.mtx")
            Z = scipy.linalg.null_space(np.asarray(C).T)
            mu = scipy.linalg.eigh(-(Z.T @ (G @ Z)), Z.T @ (K @ Z), eigvals_only=True)[::-1][: len(stored)]
        else:
            mu = scipy.sparse.linalg.eigsh(-G, k=len(stored), M=K, which="LA", return_eigenvectors=False, tol=1e-12)
        found = np.sort(1 / mu)
        worst = np.max(np.abs(found / stored - 1))
        print("%-28s %d factors, %d unknowns, largest difference %.1e" % (name, len(stored), K.shape[0], worst))
        if not worst < 1e-8:
            print(found, stored)
            sys.exit(1)
        compared += 1
sys.exit(0 if compared >= 4 else 1)
