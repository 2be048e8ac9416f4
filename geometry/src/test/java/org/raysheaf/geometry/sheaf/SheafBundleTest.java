package org.raysheaf.geometry.sheaf;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;

class SheafBundleTest {
    @Test
    void raysOfASheafFollowEachOther() {
        SheafBundle bundle = new SheafBundle(2, 3);
        bundle.append();
        int sheaf = bundle.append();
        bundle.set(2 * sheaf + 1, 1, 2, 3, 4, 5, 6, 0.25);
        assertThat(bundle.size()).isEqualTo(2);
        assertThat(bundle.rays()).hasSize(36).containsSubsequence(1, 2, 3, 4, 5, 6);
        assertThat(bundle.rays()[18]).isEqualTo(1);
        assertThat(bundle.weights()).containsExactly(0, 0, 0, 0.25f, 0, 0);
    }

    @Test
    void takesNoMoreThanItsCapacity() {
        SheafBundle bundle = new SheafBundle(1, 1);
        assertThat(bundle.full()).isFalse();
        bundle.append();
        assertThat(bundle.full()).isTrue();
        assertThatThrownBy(bundle::append).hasMessageContaining("capacity=1");
        bundle.clear();
        assertThat(bundle.append()).isZero();
        assertThatThrownBy(() -> new SheafBundle(0, 1)).hasMessageContaining("raysPerSheaf=0");
    }
}
