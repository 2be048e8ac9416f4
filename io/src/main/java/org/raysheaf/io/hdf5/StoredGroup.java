package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** A group of an open file: its attributes and the members that it links to directly. Not safe for use by several threads. */
public final class StoredGroup {
    private static final int HARD = 0;

    private final FileBytes file;
    private final String path;
    private final StoredAttributes attributes;
    private final Map<String, Long> links = new LinkedHashMap<>();

    StoredGroup(FileBytes file, String path, ObjectHeader header) throws IOException {
        this.file = file;
        this.path = path;
        this.attributes = StoredAttributes.read(header);
        Optional<Fields> table = header.message(Messages.SYMBOL_TABLE);
        if (table.isPresent()) {
            SymbolTable.read(table.get(), links);
        }
        for (Fields link : header.messages(Messages.LINK)) {
            addLink(link);
        }
        Optional<Fields> info = header.message(Messages.LINK_INFO);
        if (info.isPresent()) {
            refuseDense(info.get());
        }
    }

    private void addLink(Fields link) throws Hdf5Exception {
        link.skip(1);
        int flags = link.u8();
        int kind = (flags & 0x08) != 0 ? link.u8() : HARD;
        link.skip((flags & 0x04) != 0 ? 8 : 0); // order of creation
        link.skip((flags & 0x10) != 0 ? 1 : 0); // character set
        String name = link.text(link.unsigned(1 << (flags & 3)));
        if (kind == HARD) {
            links.put(name, link.i64());
        }
    }

    private static void refuseDense(Fields info) throws Hdf5Exception {
        info.skip(1);
        info.skip((info.u8() & 1) != 0 ? 8 : 0);
        if (info.i64() != Messages.UNDEFINED) {
            throw info.unsupported("keeps its members in the newest way; write it without libver=\"latest\"");
        }
    }

    /**
     * The attributes of the group.
     *
     * @return all of them
     */
    public StoredAttributes attributes() {
        return attributes;
    }

    /**
     * The names of the members.
     *
     * @return the names of datasets and groups
     */
    public Set<String> names() {
        return Collections.unmodifiableSet(links.keySet());
    }

    /**
     * A dataset of this group.
     *
     * @param name its name
     * @return the dataset, or empty if there is no member of that name or it is a group
     * @throws Hdf5Exception if its header is damaged or uses what is not read here
     * @throws IOException if the file cannot be read
     */
    public Optional<StoredDataset> dataset(String name) throws IOException {
        Optional<ObjectHeader> header = header(name);
        if (header.isEmpty() || header.get().message(Messages.LAYOUT).isEmpty()) {
            return Optional.empty();
        }
        return Optional.of(new StoredDataset(file, placeOf(name), header.get()));
    }

    /**
     * A group in this group.
     *
     * @param name its name
     * @return the group, or empty if there is no member of that name or it is a dataset
     * @throws Hdf5Exception if its header is damaged or uses what is not read here
     * @throws IOException if the file cannot be read
     */
    public Optional<StoredGroup> group(String name) throws IOException {
        Optional<ObjectHeader> header = header(name);
        if (header.isEmpty() || header.get().message(Messages.LAYOUT).isPresent()) {
            return Optional.empty();
        }
        return Optional.of(new StoredGroup(file, placeOf(name), header.get()));
    }

    /**
     * The checksums kept beside a column ({@link ColumnWriter} says over what).
     *
     * @param name the column's name
     * @return one CRC-32C per chunk, or null if none are kept
     * @throws Hdf5Exception if they are damaged
     * @throws IOException if the file cannot be read
     */
    public int @Nullable [] checksums(String name) throws IOException {
        Optional<StoredGroup> beside = group(GroupWriter.CHECKSUMS);
        Optional<StoredDataset> sums =
                beside.isEmpty() ? Optional.empty() : beside.get().dataset(name);
        return sums.isEmpty() ? null : sums.get().ints();
    }

    private Optional<ObjectHeader> header(String name) throws IOException {
        Long address = links.get(name);
        return address == null ? Optional.empty() : Optional.of(ObjectHeader.read(file, address, placeOf(name)));
    }

    private String placeOf(String name) {
        return path.isEmpty() ? name : path + "/" + name;
    }
}
