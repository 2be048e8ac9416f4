# Makes latest.h5: the library's newest structures, of which most are refused by name. Needs h5py.
import sys
import h5py
import numpy as np

with h5py.File(sys.argv[1], "w", libver="latest") as f:
    f["plain"] = np.arange(5)
    f["plain"].attrs["unit"] = "ps"
    f.create_dataset("chunks", data=np.arange(60), chunks=(7,))
    for i in range(20):
        f["members/m%d" % i] = i
    f.create_group("attributes")
    for i in range(20):
        f["attributes"].attrs["a%d" % i] = i
