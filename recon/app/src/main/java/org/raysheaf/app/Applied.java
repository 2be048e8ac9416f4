package org.raysheaf.app;

import java.util.ArrayList;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** Which corrections were applied, with their size, and which were left out; for the report. One thread. */
final class Applied {
    private final Map<String, Object> done = new LinkedHashMap<>();
    private final List<String> left = new ArrayList<>();

    void add(String name, Object size) {
        done.put(name, size);
    }

    void leave(String name) {
        left.add(name);
    }

    Map<String, Object> done() {
        return Collections.unmodifiableMap(done);
    }

    List<String> left() {
        return List.copyOf(left);
    }
}
