package org.raysheaf.engine;

import java.util.List;
import java.util.Locale;
import java.util.Optional;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Enough when a pass changes the objective little. Likelihoods of lists are known up to a constant only, so the change is measured against all that
 * was gained since the first pass, and not against the value itself. With several subsets the curve shows the trend only, and the rule follows it.
 *
 * @param below largest change of log-likelihood less penalty from one pass to the next that counts as little, in parts of what was gained since the
 *     first pass; above 0, at most 0.5
 */
public record ChangeStop(@Default("0.001") double below) implements Stop {
    /**
     * Checks the range.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if the value is out of range
     */
    public ChangeStop {
        new Problems("stop")
                .rule(
                        below > 0 && below <= 0.5,
                        "below",
                        "expected a part of the gain above 0, at most 0.5; found " + below)
                .orThrow();
    }

    @Override
    public Optional<String> reached(List<PassReport> passes) {
        int last = passes.size() - 1;
        // One difference is all of the gain; two passes cannot tell.
        if (last < 2) {
            return Optional.empty();
        }
        double change =
                Math.abs(passes.get(last).objective() - passes.get(last - 1).objective());
        double gain = Math.abs(passes.get(last).objective() - passes.get(0).objective());
        return change <= below * gain
                ? Optional.of(String.format(
                        Locale.ROOT,
                        "the objective changed by %.2g of what was gained since the first pass",
                        gain > 0 ? change / gain : 0))
                : Optional.empty();
    }
}
