package org.raysheaf.app;

import java.util.List;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Into which parts a list is cut, each with an image of its own beside that of the whole: one of the three.
 *
 * @param edgesS times at which frames begin, and at the end the one at which the last ends (s since the start of the list)
 * @param events prompt events in each frame; the last takes those left over as well
 * @param gates whether each gate that the list tells gets an image
 */
record FrameSettings(
        @Nullable List<Double> edgesS,
        @Nullable Long events,
        @Default("false") boolean gates) {
    FrameSettings {
        edgesS = edgesS == null ? null : List.copyOf(edgesS);
        int ways = (edgesS == null ? 0 : 1) + (events == null ? 0 : 1) + (gates ? 1 : 0);
        Problems problems = new Problems("frames")
                .rule(ways == 1, "edges_s", "expected one of edges_s, events and gates, found " + ways + " of them");
        if (events != null) {
            problems.atLeast("events", events, 1);
        }
        if (edgesS != null) {
            problems.rule(edgesS.size() >= 2, "edges_s", "expected at least two times, found " + edgesS.size());
            for (int i = 0; i < edgesS.size(); i++) {
                double before = i == 0 ? -Double.MIN_VALUE : edgesS.get(i - 1);
                problems.rule(
                        edgesS.get(i) > before,
                        "edges_s[" + i + "]",
                        "expected times of at least 0 that grow, found " + edgesS.get(i) + " after "
                                + (i == 0 ? "nothing" : before));
            }
        }
        problems.orThrow();
    }
}
