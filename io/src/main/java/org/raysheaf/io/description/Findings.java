package org.raysheaf.io.description;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;

/** Collects what is wrong with one description. */
final class Findings {
    private final String source;
    private final List<DescriptionProblem> problems = new ArrayList<>();

    Findings(String source) {
        this.source = source;
    }

    void add(Place place, String message) {
        problems.add(new DescriptionProblem(source, place.line(), 0, place.field(), message));
    }

    void orThrow() throws DescriptionException {
        if (!problems.isEmpty()) {
            problems.sort(Comparator.comparingInt(DescriptionProblem::line));
            throw new DescriptionException(problems);
        }
    }
}
