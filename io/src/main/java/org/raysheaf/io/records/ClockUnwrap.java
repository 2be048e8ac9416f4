package org.raysheaf.io.records;

import java.math.BigDecimal;
import java.math.BigInteger;
import org.jspecify.annotations.Nullable;

/**
 * Turns counts of a clock that wraps around into times. With range R and the count before at U (unwrapped), count c becomes U + d, where d is c − U modulo R,
 * taken from −R/2 to below R/2. Ticks become ps exactly where the tick is a decimal fraction of at most six digits. One thread.
 */
final class ClockUnwrap implements Op {
    private static final int SLOTS = 1 << 16;
    private static final int MOST_DIGITS = 6;

    private final long[] from;
    private final long[] slots;
    private final long[] to;
    private final long range;
    private final double tickPs;
    private final long times;
    private final long by;
    private final int beyond;
    private final int outside;

    private final long[] last;
    private final boolean[] seen;
    private long wraps;
    private long back;

    ClockUnwrap(FieldStep.ClockStep step, Column of, @Nullable Column per, Column result, int beyond, int outside) {
        this.from = of.longs();
        this.slots = per == null ? new long[FieldBlock.CAPACITY] : per.longs();
        this.to = result.longs();
        this.range = step.bits() == null ? 0 : 1L << step.bits();
        this.tickPs = step.tickPs();
        this.beyond = beyond;
        this.outside = outside;
        BigDecimal tick = BigDecimal.valueOf(step.tickPs()).stripTrailingZeros();
        int digits = tick.precision() - tick.scale(); // before the decimal point
        boolean exact = tick.scale() <= 0 ? digits <= 12 : tick.scale() <= MOST_DIGITS && digits <= MOST_DIGITS;
        BigInteger scale = BigInteger.TEN.pow(exact ? Math.max(0, tick.scale()) : 0);
        this.by = exact ? scale.longValueExact() : 0;
        this.times = exact ? tick.multiply(new BigDecimal(scale)).longValueExact() : 0;
        this.last = new long[per == null ? 1 : SLOTS];
        this.seen = new boolean[last.length];
    }

    @Override
    public void run(int size, int[] fates) {
        for (int i = 0; i < size; i++) {
            if (fates[i] != 0) {
                continue;
            }
            long slot = slots[i];
            if (slot < 0 || slot >= last.length) {
                fates[i] = outside;
                continue;
            }
            long count = from[i];
            if (range != 0 && (count < 0 || count >= range)) {
                fates[i] = beyond;
                continue;
            }
            long ticks = unwrapped((int) slot, count);
            if (!(Math.abs(ticks * tickPs) < 0x1p63)) {
                fates[i] = beyond;
                continue;
            }
            to[i] = by == 0
                    ? (long) Math.rint(ticks * tickPs)
                    : Math.floorDiv(ticks, by) * times
                            + Math.floorDiv(2 * Math.floorMod(ticks, by) * times + by, 2 * by);
        }
    }

    private long unwrapped(int slot, long count) {
        if (!seen[slot]) {
            seen[slot] = true;
            last[slot] = count;
            return count;
        }
        long before = last[slot];
        if (range == 0) {
            back += count < before ? 1 : 0;
            last[slot] = count;
            return count;
        }
        long step = Math.floorMod(count - before, range);
        step -= step >= range / 2 ? range : 0;
        long now = before + step;
        back += step < 0 ? 1 : 0;
        wraps += Math.max(0, Math.floorDiv(now, range) - Math.floorDiv(before, range));
        last[slot] = now;
        return now;
    }

    /** Times that the counter wrapped around. */
    long wraps() {
        return wraps;
    }

    /** Counts that were earlier than the one before. */
    long back() {
        return back;
    }
}
