package org.raysheaf.geometry.event;

import java.util.EnumMap;
import java.util.Map;

/**
 * Accounts for every event that is read: used + set aside, by reason, = read. Not safe for use by several threads.
 */
public final class EventTally {
    private final Map<Reason, Long> setAside = new EnumMap<>(Reason.class);
    private long used;

    /** Why an event does not take part. */
    public enum Reason {
        /** Its two elements are too near each other on the detector to be paired. */
        BLOCKS_TOO_CLOSE("blocks closer than blocks_apart"),
        /** Its time difference is no number, where times of flight are used. */
        NO_TIME_DIFFERENCE("time difference is no number"),
        /** Its line misses the field of view. */
        OUTSIDE_FIELD_OF_VIEW("line misses the field of view"),
        /** One of its elements was found to be dead or was left out. */
        SILENT_ELEMENT("an element that counts for nothing"),
        /** It comes from the delayed window. */
        DELAYED("from the delayed window"),
        /** Its line misses the image grid, or no voxel on it can hold activity. */
        OUTSIDE_IMAGE("line misses the image");

        private final String words;

        Reason(String words) {
            this.words = words;
        }

        /**
         * The reason in plain words.
         *
         * @return a short phrase
         */
        public String words() {
            return words;
        }
    }

    /** Counts one event as used. */
    public void use() {
        used++;
    }

    /**
     * Counts one event as set aside.
     *
     * @param reason why
     */
    public void setAside(Reason reason) {
        setAside.merge(reason, 1L, Long::sum);
    }

    /**
     * Moves events that were counted as used to those set aside, when a later step finds it cannot use them.
     *
     * @param reason why
     * @param events how many
     */
    public void withdraw(Reason reason, long events) {
        if (events > used) {
            throw new IllegalArgumentException("only " + used + " events were used, cannot withdraw " + events);
        }
        used -= events;
        setAside.merge(reason, events, Long::sum);
    }

    /**
     * Adds all counts to those of another tally, and starts again from nothing.
     *
     * @param other receives them
     */
    public void moveTo(EventTally other) {
        other.used += used;
        setAside.forEach((reason, events) -> other.setAside.merge(reason, events, Long::sum));
        used = 0;
        setAside.clear();
    }

    /**
     * Events used.
     *
     * @return the count
     */
    public long used() {
        return used;
    }

    /**
     * Events set aside for one reason.
     *
     * @param reason the reason
     * @return the count
     */
    public long setAsideFor(Reason reason) {
        return setAside.getOrDefault(reason, 0L);
    }

    /**
     * All events seen.
     *
     * @return used plus set aside
     */
    public long read() {
        return used + setAside.values().stream().mapToLong(Long::longValue).sum();
    }
}
