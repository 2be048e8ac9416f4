package org.raysheaf.app;

import java.io.IOException;
import java.util.Locale;
import java.util.concurrent.Callable;
import picocli.CommandLine.Mixin;

/** What every verb has. */
abstract class Verb implements Callable<Integer> {
    @Mixin
    private Common common;

    Common common() {
        return common;
    }

    /** Does the work. */
    abstract void run() throws Exception;

    @Override
    public Integer call() throws Exception {
        try {
            run();
            return 0;
        } catch (OutOfMemoryError e) {
            // Everything that the verb held is free again, so there is room for a message.
            throw new IOException(
                    String.format(
                            Locale.ROOT,
                            "Java may use %.1f GB of memory, and that was not enough; give it more, for example"
                                    + " RAYSHEAF_JAVA_OPTIONS=-Xmx12g, or ask for less: larger voxels, fewer lanes. Nothing that"
                                    + " was written is damaged; an unfinished reconstruction goes on with --resume",
                            Runtime.getRuntime().maxMemory() * 1e-9),
                    e);
        }
    }
}
