package org.raysheaf.engine;

import java.util.function.Supplier;
import org.raysheaf.geometry.frame.Image;

/** Hears of every pass when it is done, for example to show it or to keep its image. */
@FunctionalInterface
public interface PassListener {
    /** Hears nothing. */
    PassListener SILENT = (pass, image) -> {};

    /**
     * A pass is done. Called by the thread that runs the estimator, which waits.
     *
     * @param pass what it did
     * @param image gives a copy of the image after the pass (Bq/mL), made only when asked for
     */
    void passed(PassReport pass, Supplier<Image> image);
}
