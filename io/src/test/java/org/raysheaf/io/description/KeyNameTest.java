package org.raysheaf.io.description;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.solid.Sphere;

class KeyNameTest {
    @ParameterizedTest
    @CsvSource({
        "radiusMm, radius_mm",
        "windowNs, window_ns",
        "energyKeV, energy_keV",
        "lowestMeV, lowest_MeV",
        "activityMBq, activity_MBq",
        "activityBq, activity_Bq",
        "concentrationKBqPerMl, concentration_kBq_per_mL",
        "startAngleDeg, start_angle_deg",
        "timePs, time_ps",
        "liveTimeS, live_time_s",
        "spacingXMm, spacing_x_mm",
        "positionAXMm, position_a_x_mm",
        "voxelVolumeMm3, voxel_volume_mm3",
        "nx, nx",
        "mlemPasses, mlem_passes",
        "MlemSettings, mlem_settings",
        "a, a",
        "RingPlacement, ring_placement"
    })
    void spellsWordsInLowerCaseAndUnitsAsPhysicistsDo(String name, String key) {
        assertThat(KeyName.of(name)).isEqualTo(key);
    }

    @Test
    void namesTheChoicesThatRecordsAre() {
        assertThat(KeyName.ofChoice(Sphere.class)).isEqualTo("sphere");
        assertThat(KeyName.ofChoice(Cabin.RingPlacement.class)).isEqualTo("ring");
        assertThat(KeyName.ofChoice(Cabin.Block.class)).isNull();
    }
}
