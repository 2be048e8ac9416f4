package org.raysheaf.engine;

import java.util.List;
import java.util.Optional;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Enough when further passes only fit noise: some events are kept out of the updates, and the image that explains <em>them</em> best is kept. This is
 * cross-validation (Coakley 1991, IEEE Trans. Nucl. Sci. 38:9; Johnson 1994, IEEE Trans. Image Process. 3:336, for counts split in two); a list
 * makes it free, since each event is a datum of its own.
 *
 * @param every k: the k-th, 2k-th, 3k-th … event used is kept out, 2 to 1000; the image is made of the other (k − 1)/k
 * @param patience passes in a row that may be no better than the best one before it is over, 1 to 100
 */
public record HeldOutStop(
        @Default("10") int every, @Default("2") int patience) implements Stop {
    /**
     * Checks the ranges.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if a value is out of range
     */
    public HeldOutStop {
        new Problems("stop")
                .within("every", every, 2, 1000)
                .within("patience", patience, 1, 100)
                .orThrow();
    }

    @Override
    public int heldOutEvery() {
        return every;
    }

    @Override
    public Optional<String> reached(List<PassReport> passes) {
        int best = best(passes);
        return passes.size() - best >= patience
                ? Optional.of("pass " + best + " explains the held-out events best; " + patience
                        + " passes after it did not do better")
                : Optional.empty();
    }

    @Override
    public int best(List<PassReport> passes) {
        int best = 0;
        for (int i = 1; i < passes.size(); i++) {
            if (passes.get(i).heldOut() > passes.get(best).heldOut()) {
                best = i;
            }
        }
        return best + 1;
    }
}
