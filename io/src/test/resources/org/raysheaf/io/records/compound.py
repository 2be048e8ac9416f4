# Makes compound.h5: 60 compound values as the HDF5 library writes them, with an enumeration among the members. Needs h5py.
import sys
import h5py
import numpy as np

n = np.arange(60)
kind = np.dtype([("c", "<u2"), ("flag", "?"), ("t", ">i8"), ("e", "<f4"), ("more", "<f8")])
table = np.zeros(60, kind)
table["c"], table["flag"], table["t"], table["e"] = n, n % 2 == 1, 1000 * n, 500 + n
with h5py.File(sys.argv[1], "w") as f:
    f.create_group("g").create_dataset("hits", data=table, chunks=(32,), compression="lzf", shuffle=True)
