package org.raysheaf.geometry.settings;

import java.util.List;
import java.util.stream.Collectors;

/** Thrown when settings break one or more of their rules; carries every broken rule, not just the first. */
public final class InvalidSettingsException extends IllegalArgumentException {
    private static final long serialVersionUID = 1L;

    private final transient List<Problems.Problem> problems;

    /**
     * Makes the exception.
     *
     * @param subject what was being checked
     * @param problems the broken rules, at least one
     */
    public InvalidSettingsException(String subject, List<Problems.Problem> problems) {
        super(subject + ": " + problems.stream().map(Problems.Problem::toString).collect(Collectors.joining("; ")));
        this.problems = List.copyOf(problems);
    }

    /**
     * The broken rules.
     *
     * @return every broken rule, in the order stated
     */
    public List<Problems.Problem> problems() {
        return problems;
    }
}
