import sys
import h5py
import numpy as np

with h5py.File(sys.argv[1], "w") as f:
    f.attrs["raysheaf"] = "list/1"
    f.attrs["live_time_s"] = 600
    f.attrs["system"] = "raysheaf: system/1\nname: two panels\n"
    f["element_a"] = np.array([0, 17, 4, 2], dtype=np.uint16)
    f["element_b"] = np.array([100, 117, 104, 102])
