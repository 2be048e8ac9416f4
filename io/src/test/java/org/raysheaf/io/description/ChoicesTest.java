package org.raysheaf.io.description;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

class ChoicesTest {
    sealed interface Solid permits Sphere, TruncatedCone {}

    record Sphere() implements Solid {}

    record TruncatedCone() implements Solid {}

    sealed interface TimeKernel permits GaussianTimeKernel, UniformKernel, OtherKernel {}

    record GaussianTimeKernel() implements TimeKernel {}

    record UniformKernel() implements TimeKernel {}

    sealed interface OtherKernel extends TimeKernel permits BoxKernel {}

    record BoxKernel() implements OtherKernel {}

    sealed interface Prior permits NoPrior {}

    record NoPrior() implements Prior {}

    @Test
    void namesRecordsByTheirOwnNames() {
        assertThat(Choices.of(Solid.class).keySet()).containsExactly("sphere", "truncated_cone");
    }

    @Test
    void leavesOutTheLastWordsThatAllShareWithTheInterface() {
        assertThat(Choices.of(TimeKernel.class).keySet()).containsExactly("gaussian_time", "uniform", "box");
        assertThat(Choices.of(Prior.class).keySet()).containsExactly("no");
    }
}
