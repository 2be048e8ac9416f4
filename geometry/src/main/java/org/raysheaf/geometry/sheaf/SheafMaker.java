package org.raysheaf.geometry.sheaf;

import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;

/**
 * Turns measured events into sheaves of rays. A new kind of detector is a new implementation of this interface and of {@link
 * SheafCatalogue}; nothing downstream changes. Implementations are safe for use by several threads.
 */
public interface SheafMaker {
    /**
     * The attributes that an event must have.
     *
     * @return the columns to read
     */
    Set<Attribute> attributes();

    /**
     * Attributes that are read as well where the list has them.
     *
     * @return further columns, by default none
     */
    default Set<Attribute> alsoReads() {
        return Set.of();
    }

    /**
     * Rays in every sheaf that this maker makes.
     *
     * @return the count, at least 1
     */
    int raysPerSheaf();

    /**
     * The weight along the rays of the sheaves that this maker makes.
     *
     * @return the law, by default plain
     */
    default SheafBundle.WeightLaw law() {
        return SheafBundle.WeightLaw.PLAIN;
    }

    /**
     * Appends the sheaf of every usable event, in order, and counts every event as used or set aside.
     *
     * @param events the events; they have the columns that {@link #attributes()} names
     * @param out receives the sheaves, weights summing to 1; it must have room for all events, and the law of this maker
     * @param tally counts the events
     */
    void make(EventBlock events, SheafBundle out, EventTally tally);
}
