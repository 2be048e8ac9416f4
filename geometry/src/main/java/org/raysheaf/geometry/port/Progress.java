package org.raysheaf.geometry.port;

/**
 * Hears how long work goes on. Calls come from any thread, are cheap, and must not throw. The default implementation of every call is
 * silence, so code that does not care passes {@link #SILENT}.
 */
public interface Progress {
    /** Hears nothing. */
    Progress SILENT = new Progress() {};

    /**
     * A stage begins.
     *
     * @param stage what is being done, in a few plain words
     * @param total how much there is to do, in units of the stage's own
     * @param unit what is counted, for example {@code "events"}
     */
    default void begin(String stage, long total, String unit) {}

    /**
     * More of the current stage is done.
     *
     * @param amount how much more
     */
    default void advance(long amount) {}

    /**
     * Something worth showing beside how far the stage is; it replaces the remark before.
     *
     * @param remark a few words
     */
    default void remark(String remark) {}

    /**
     * The current stage ended.
     *
     * @param outcome a short remark worth keeping, or an empty text
     */
    default void end(String outcome) {}
}
