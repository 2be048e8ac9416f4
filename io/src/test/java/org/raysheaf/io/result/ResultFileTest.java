package org.raysheaf.io.result;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIOException;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.frame.Vector3;

class ResultFileTest {
    @TempDir
    private Path folder;

    enum Mode {
        LIST_MODE
    }

    sealed interface Prior permits QuadraticPrior {}

    record QuadraticPrior(double strength) implements Prior {}

    record Result(
            double meanKBqPerMl,
            float shade,
            long events,
            Mode mode,
            Prior prior,
            Vector3 centre,
            Instant start,
            @Nullable String note,
            Optional<Integer> seed,
            Object likelihood) {}

    private static Result result(double mean, Object likelihood) {
        return new Result(
                mean,
                0.1f,
                400_000,
                Mode.LIST_MODE,
                new QuadraticPrior(2e-3),
                new Vector3(0, -1.5, 2),
                Instant.parse("2026-03-01T09:30:00Z"),
                null,
                Optional.of(7),
                likelihood);
    }

    @Test
    void writesKeysInOrderAndNumbersInTheirShortestForm() {
        assertThat(ResultFile.render(result(0x1.52d02c7e14af6p77, new double[] {-1e6, 0.1 + 0.2})))
                .isEqualTo("""
                        {
                          "mean_kBq_per_mL" : 2.0E23,
                          "shade" : 0.1,
                          "events" : 400000,
                          "mode" : "list_mode",
                          "prior" : {
                            "kind" : "quadratic",
                            "strength" : 0.002
                          },
                          "centre" : [ 0.0, -1.5, 2.0 ],
                          "start" : "2026-03-01T09:30:00Z",
                          "note" : null,
                          "seed" : 7,
                          "likelihood" : [ -1000000.0, 0.30000000000000004 ]
                        }
                        """);
    }

    @Test
    void keepsTheOrderOfOrderedMapsAndSortsTheOthers() {
        Map<String, Object> ordered = new LinkedHashMap<>();
        ordered.put("z", 1);
        ordered.put("a", Map.of("c", 1, "b", 2, "d", 3));

        assertThat(ResultFile.render(ordered).replaceAll("\\s", ""))
                .isEqualTo("{\"z\":1,\"a\":{\"b\":2,\"c\":1,\"d\":3}}");
    }

    @Test
    void refusesNumbersThatJsonDoesNotHaveAndNamesTheField() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> ResultFile.render(result(1, List.of(0.5, Map.of("inner", Double.NaN)))))
                .withMessage(
                        "field likelihood[1].inner: expected a finite number, found NaN; say why it is not known instead");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> ResultFile.render(result(1, new Object())))
                .withMessage("field likelihood: a result cannot hold a java.lang.Object");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> ResultFile.render("text"))
                .withMessage("results are a record or a map: found java.lang.String");
    }

    @Test
    void saysWhyANumberIsNotKnown() {
        assertThat(ResultFile.render(Map.of("contrast", new NotKnown("no cold region")))
                        .replaceAll("\\s+", " "))
                .isEqualTo("{ \"contrast\" : { \"value\" : null, \"reason\" : \"no cold region\" } } ");
    }

    @Test
    void writesAFileAndDoesNotOverwriteUnlessAllowed() throws IOException {
        Path file = folder.resolve("result.json");
        ResultFile.write(Map.of("a", 1), file, false);

        assertThatIOException()
                .isThrownBy(() -> ResultFile.write(Map.of("a", 2), file, false))
                .withMessage(file + ": exists already; choose another name, or allow it with --replace");
        assertThat(Files.readString(file)).isEqualTo("{\n  \"a\" : 1\n}\n");
    }
}
