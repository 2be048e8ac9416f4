package org.raysheaf.io.description;

import java.io.IOException;
import java.util.List;
import java.util.stream.Collectors;

/** Thrown when a description cannot be used; carries everything that is wrong with it, not just the first problem. */
public final class DescriptionException extends IOException {
    private static final long serialVersionUID = 1L;

    /** A message with more lines than this hides the first one from its reader. */
    private static final int LINES = 25;

    private final transient List<DescriptionProblem> problems;

    /**
     * Makes the exception.
     *
     * @param problems what is wrong, at least one; the message has one line for each of the first 25
     */
    public DescriptionException(List<DescriptionProblem> problems) {
        super(message(problems));
        this.problems = List.copyOf(problems);
    }

    DescriptionException(String source, String message) {
        this(List.of(new DescriptionProblem(source, 0, 0, "", message)));
    }

    DescriptionException(String source, int line, int column, String message) {
        this(List.of(new DescriptionProblem(source, line, column, "", message)));
    }

    /**
     * What is wrong.
     *
     * @return every problem, in the order of the file's lines
     */
    public List<DescriptionProblem> problems() {
        return problems;
    }

    private static String message(List<DescriptionProblem> problems) {
        String shown =
                problems.stream().limit(LINES).map(DescriptionProblem::toString).collect(Collectors.joining("\n"));
        return problems.size() > LINES ? shown + "\nand " + (problems.size() - LINES) + " more" : shown;
    }
}
