"""Times SciPy's eigsh, shift-invert, on exported matrices, and prints the ratio to the given seconds."""
import sys
import time

import scipy.io
import scipy.sparse.linalg

folder, case, ours = sys.argv[1], sys.argv[2], float(sys.argv[3])
K = scipy.io.mmread(f"{folder}/{case}.K.mtx").tocsc()
G = scipy.io.mmread(f"{folder}/{case}.G.mtx").tocsc()
start = time.time()
# the six lowest factors: buckling mode of shift-invert about a shift below them
mu = scipy.sparse.linalg.eigsh(-G, k=6, M=K, which="LA", return_eigenvectors=True)[0]
seconds = time.time() - start
print("lattice: %d unknowns, lowest factor %.6g" % (K.shape[0], 1 / max(mu)))
print("eigsh %.1f s, endfix whole process (read, statics, factors, tally, witness, fixity, checks, store) %.1f s: ratio %.1f" % (seconds, ours, seconds / ours))
