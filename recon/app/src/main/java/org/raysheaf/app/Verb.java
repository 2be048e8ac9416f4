package org.raysheaf.app;

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
        run();
        return 0;
    }
}
