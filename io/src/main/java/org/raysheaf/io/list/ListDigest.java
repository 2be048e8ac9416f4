package org.raysheaf.io.list;

import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.util.HexFormat;
import java.util.Map;
import java.util.Optional;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.matter.Nuclide;

/** One fingerprint for a whole list without reading it: SHA-256 over its header and the checksums of all chunks. */
final class ListDigest {
    private ListDigest() {}

    /**
     * Computes the fingerprint.
     *
     * @param header what the list says about itself
     * @param events its number of events
     * @param columns its columns
     * @return hexadecimal digits, or empty if a column has no checksums
     */
    static Optional<String> of(ListHeader header, long events, Map<Attribute, ColumnsReader.Column> columns) {
        MessageDigest digest = ListFormat.newSha256();
        add(digest, ListFormat.sha256(header.systemDescription()));
        add(digest, "\n" + header.durationS() + "\n" + header.liveTimeS() + "\n" + header.start());
        Nuclide nuclide = header.nuclide();
        if (nuclide != null) {
            add(digest, "\n" + nuclide.name() + "\n" + nuclide.halfLifeS() + "\n" + nuclide.positronBranching());
        }
        if (header.pairing() != null) {
            add(digest, "\n" + header.pairing());
        }
        add(digest, "\n" + events);
        for (Map.Entry<Attribute, ColumnsReader.Column> column : columns.entrySet()) {
            int[] checksums = column.getValue().checksums;
            if (checksums == null) {
                return Optional.empty();
            }
            add(digest, "\n" + column.getKey().columnName() + "\n");
            ByteBuffer bytes = ByteBuffer.allocate(4 * checksums.length);
            bytes.asIntBuffer().put(checksums);
            digest.update(bytes);
        }
        return Optional.of(HexFormat.of().formatHex(digest.digest()));
    }

    private static void add(MessageDigest digest, String text) {
        digest.update(text.getBytes(StandardCharsets.UTF_8));
    }
}
