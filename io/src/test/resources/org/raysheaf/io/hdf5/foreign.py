# Makes foreign.h5: the same 60 numbers in every form that the reader knows, as the HDF5 library writes them. Needs h5py.
import sys
import h5py
import numpy as np

n = np.arange(60)
with h5py.File(sys.argv[1], "w") as f:
    for kind in ["u1", "i1", "u2", "i2", "u4", "i4", "u8", "i8", "f4", "f8", ">u2", ">i4", ">i8", ">f4", ">f8"]:
        f["type_" + kind.replace(">", "big_")] = n.astype(kind)
    f["negative"] = (n - 30).astype("i2")
    f["bool"] = n % 2 == 1
    f["cube"] = n.reshape(3, 4, 5).astype("f4")
    f.create_dataset("chunks", data=n, chunks=(7,))
    f.create_dataset("gzip", data=n, chunks=(7,), compression="gzip")
    f.create_dataset("shuffle_gzip_fletcher", data=n, chunks=(7,), compression="gzip", shuffle=True, fletcher32=True)
    f.create_dataset("fletcher_odd", data=n.astype("u1"), chunks=(7,), fletcher32=True)
    f.create_dataset("growing", data=n[:30], maxshape=(None,), chunks=(4,))
    f["growing"].resize((60,))
    f["growing"][30:] = n[30:]
    f.create_dataset("chunked_cube", data=n.reshape(3, 4, 5).astype("f8"), chunks=(2, 3, 2), compression="gzip")
    f.create_dataset("never_written", shape=(60,), dtype="i4")
    f.create_dataset("half_written", shape=(60,), dtype="i4", chunks=(20,))
    f["half_written"][:20] = n[:20]
    f.create_dataset("lzf", data=n, chunks=(60,), compression="lzf")
    f["big_unsigned"] = np.array([1, 2**63 + 1], dtype="u8")
    f["text"] = "long µ text"
    f["fixed_text"] = np.bytes_("fixed")
    f["complex"] = n.astype("c8")
    a = f.create_group("many").attrs
    a["text"] = "µ"
    a["fixed"] = np.bytes_("fixed")
    a["float32"] = np.float32(0.5)
    a["big_endian"] = np.array([1.5, -2], dtype=">f8")
    a["one"] = np.array([7], dtype="u2")
    a["minus"] = np.int8(-3)
    a["texts"] = ["a", "b"]
    a["bool"] = True
    a["empty"] = ""
    for i in range(40):
        f["many/member%d" % i] = i
