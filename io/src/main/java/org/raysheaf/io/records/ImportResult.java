package org.raysheaf.io.records;

import java.util.List;
import java.util.Map;

/**
 * What an import found and did. Everything is accounted for: {@code records = written + set_aside}, reason by reason; marks and unreadable records
 * are counted beside them.
 *
 * @param records event records that were read
 * @param written events of the list
 * @param setAside records set aside, by reason
 * @param marks records of other types, by type
 * @param unreadable records that could not be read, by reason
 * @param unreadableExamples some of them, with place, reason and content
 * @param bytesPassedOver bytes that belong to unreadable records (binary streams)
 * @param unmapped fields that were read and serve nothing; each has as many values as there are records
 * @param unread columns, members and datasets of the files that no field reads
 * @param clocks for every clock, how often it wrapped around and how often it went back
 * @param lastTimePs time of the last event (ps), 0 without times
 * @param bytes bytes of data, uncompressed
 */
public record ImportResult(
        long records,
        long written,
        Map<String, Long> setAside,
        Map<String, Long> marks,
        Map<String, Long> unreadable,
        List<String> unreadableExamples,
        long bytesPassedOver,
        List<String> unmapped,
        List<String> unread,
        Map<String, Clock> clocks,
        long lastTimePs,
        long bytes) {

    /**
     * What a clock did.
     *
     * @param wraps times that it wrapped around
     * @param stepsBack counts earlier than the one before
     */
    public record Clock(long wraps, long stepsBack) {}

    /**
     * Whether the numbers add up; a mistake of the program otherwise.
     *
     * @return true if records = written + all set aside
     */
    public boolean addsUp() {
        return records == written + sum(setAside);
    }

    /**
     * Unreadable records of all reasons.
     *
     * @return their number
     */
    public long unreadableRecords() {
        return sum(unreadable);
    }

    private static long sum(Map<String, Long> counts) {
        return counts.values().stream().mapToLong(Long::longValue).sum();
    }
}
