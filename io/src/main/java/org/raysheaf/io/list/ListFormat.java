package org.raysheaf.io.list;

import java.security.MessageDigest;
import org.raysheaf.io.file.Sha256;

/**
 * The list format, version 1: an HDF5 file with these members.
 *
 * <pre>
 * /                        attributes of the list
 *     raysheaf             "list/1": what this is, and the version              required
 *     live_time_s          time in which events could be recorded (s)           required
 *     duration_s           length of the acquisition by the clock (s)           else live_time_s
 *     start                when it began, ISO 8601 with zone                    else 1970-01-01T00:00:00Z, with a warning
 *     nuclide              name of what decayed                                 else no decay and no branching
 *     half_life_s          its half-life (s)                                    required with nuclide
 *     positron_branching   its positrons per decay                              required with nuclide
 *     events               number of events                                     else the length of the columns
 *     writer               program and version that wrote the file              for people
 * /system                  text of the system description (UTF-8);              else an attribute of that name,
 *     sha256               SHA-256 of that text in hexadecimal                  else empty, with a warning
 * /element_a /element_b    one column per attribute, all of the same length     these two required
 * /time_ps …               (every {@link org.raysheaf.geometry.event.Attribute} has its column name)
 *     unit meaning         of the column's values                               else the format's own unit
 * /crc32c/element_a …      CRC-32C of every chunk of that column                else a warning
 * </pre>
 *
 * <p>We write columns in chunks of 2¹⁸ values of the type that the attribute declares. Read is more: columns of any integer type (for
 * energies and time differences any real type too), contiguous or chunked, plain or compressed; attributes of any numeric type. Members
 * of other names are passed over with a warning.
 */
final class ListFormat {
    /** Attribute that says what the file is. */
    static final String MARK = "raysheaf";

    /** What it says, before the version. */
    static final String KIND = "list/";

    /** Newest version that is read, and the one that is written. */
    static final int VERSION = 1;

    static final String LIVE_TIME = "live_time_s";
    static final String DURATION = "duration_s";
    static final String START = "start";
    static final String NUCLIDE = "nuclide";
    static final String HALF_LIFE = "half_life_s";
    static final String BRANCHING = "positron_branching";
    static final String EVENTS = "events";
    static final String WRITER = "writer";
    static final String SYSTEM = "system";
    static final String SHA256 = "sha256";
    static final String UNIT = "unit";
    static final String MEANING = "meaning";

    /** Group of the checksums. */
    static final String CHECKSUMS = "crc32c";

    /** Values in a chunk. */
    static final int CHUNK_LENGTH = 1 << 18;

    private ListFormat() {}

    /** SHA-256 of a text's UTF-8 bytes, in hexadecimal. */
    static String sha256(String text) {
        return Sha256.ofText(text);
    }

    static MessageDigest newSha256() {
        return Sha256.start();
    }
}
