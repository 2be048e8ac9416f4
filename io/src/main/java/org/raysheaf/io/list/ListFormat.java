package org.raysheaf.io.list;

import java.security.MessageDigest;
import org.raysheaf.io.file.Sha256;

/**
 * The list format, version 1: an HDF5 file with these members.
 *
 * <pre>
 * /                        attributes of the list
 *     raysheaf             "list/1" or "singles/1": what this is, the version   required
 *     live_time_s          time in which events could be recorded (s)           required
 *     duration_s           length of the acquisition by the clock (s)           else live_time_s
 *     start                when it began, ISO 8601 with zone                    else 1970-01-01T00:00:00Z, with a warning
 *     nuclide              name of what decayed                                 else no decay and no branching
 *     half_life_s          its half-life (s)                                    required with nuclide
 *     positron_branching   its positrons per decay                              required with nuclide
 *     window_ns crowds     how pairs were made: window, rule for crowds,        else not known; some corrections need it
 *     lowest_keV …           energies, delay_ns, disorder_ns, and what
 *     singles_alone …        became of the singles, by number
 *     events               number of events                                     else the length of the columns
 *     writer               program and version that wrote the file              for people
 * /system                  text of the system description (UTF-8);              else an attribute of that name,
 *     sha256               SHA-256 of that text in hexadecimal                  else empty, with a warning
 * /element_a /element_b    one column per attribute, all of the same length     these two required in a list,
 * /time_ps …               (every {@link org.raysheaf.geometry.event.Attribute} has its column name)     element and time_ps in singles
 *     unit meaning         of the column's values                               else the format's own unit
 * /singles                 singles within the energies in each element          else not known
 * /crc32c/element_a …      CRC-32C of every chunk of that column                else a warning
 * /truth/decay …           what only a simulation knows, in the same way        else none; reconstruction never reads it
 * </pre>
 *
 * <p>We write columns in chunks of 2¹⁸ values of the type that the attribute declares. Read is more: columns of any integer type (for
 * energies and time differences any real type too), contiguous or chunked, plain or compressed; attributes of any numeric type. Members
 * of other names are passed over with a warning.
 */
final class ListFormat {
    /** Attribute that says what the file is. */
    static final String MARK = "raysheaf";

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

    static final String WINDOW = "window_ns";
    static final String LOWEST = "lowest_keV";
    static final String HIGHEST = "highest_keV";
    static final String DELAY = "delay_ns";
    static final String DISORDER = "disorder_ns";
    static final String CROWDS = "crowds";
    static final String OUTSIDE_ENERGIES = "singles_outside_energies";
    static final String ALONE = "singles_alone";
    static final String CROWDED = "singles_crowded";
    static final String TOO_CLOSE = "singles_too_close";
    static final String PAIRED = "singles_paired";
    static final String PROMPTS = "pairs_prompt";
    static final String DELAYED = "pairs_delayed";
    static final String SINGLES = "singles";

    /** Group of the checksums. */
    static final String CHECKSUMS = "crc32c";

    /** Group of the columns that only a simulation knows. */
    static final String TRUTH = "truth";

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
