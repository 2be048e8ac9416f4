package org.raysheaf.engine.ray;

/** Which of a list's used events take part. The odd and the even ones are two independent halves of the same scan. */
public enum EventSelection {
    /** Every event. */
    ALL(1, 0),
    /** The first, third, fifth … event used. */
    ODD(2, 0),
    /** The second, fourth, sixth … event used. */
    EVEN(2, 1);

    private final int stride;
    private final int offset;

    EventSelection(int stride, int offset) {
        this.stride = stride;
        this.offset = offset;
    }

    /**
     * Whether an event takes part.
     *
     * @param used how many events were used before it
     * @return true if it does
     */
    public boolean takes(long used) {
        return used % stride == offset;
    }
}
