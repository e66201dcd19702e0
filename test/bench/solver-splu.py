"""Seconds that scipy.sparse.linalg.splu needs for one symmetric matrix in Matrix Market form: [factor, solve, processor]."""
import sys
import time

import numpy
from scipy.io import mmread
from scipy.sparse.linalg import splu

matrix = mmread(sys.argv[1]).tocsc()
right = numpy.ones(matrix.shape[0])
processor = time.process_time()
begin = time.perf_counter()
factor = splu(matrix, permc_spec='MMD_AT_PLUS_A', options=dict(SymmetricMode=True), diag_pivot_thresh=0.0)
middle = time.perf_counter()
factor.solve(right)
end = time.perf_counter()
print([middle - begin, end - middle, time.process_time() - processor])
