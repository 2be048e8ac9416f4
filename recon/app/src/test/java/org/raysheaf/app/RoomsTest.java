package org.raysheaf.app;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static com.tngtech.archunit.library.dependencies.SlicesRuleDefinition.slices;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;

/** Holds the arrows between the rooms. Rooms may still be empty, so a rule that finds no class to judge is kept. */
class RoomsTest {

    private static final JavaClasses CLASSES = new ClassFileImporter()
            .withImportOption(ImportOption.Predefined.DO_NOT_INCLUDE_TESTS)
            .importPackages("org.raysheaf");

    /** Each room, with the rooms that it may know. */
    private enum Room {
        GEOMETRY,
        IO(GEOMETRY),
        ENGINE(GEOMETRY),
        TRANSPORT(GEOMETRY),
        QUALITY(GEOMETRY, ENGINE),
        REPORT(GEOMETRY, QUALITY),
        STUDY(GEOMETRY, IO, ENGINE, TRANSPORT, QUALITY, REPORT),
        APP(GEOMETRY, IO, ENGINE, TRANSPORT, QUALITY, REPORT, STUDY);

        @SuppressWarnings("ImmutableEnumChecker") // made by List.of, which does not change
        private final List<Room> known;

        Room(Room... known) {
            this.known = List.of(known);
        }

        String root() {
            return "org.raysheaf." + name().toLowerCase(Locale.ROOT);
        }

        String packages() {
            return root() + "..";
        }

        String[] packagesOfStrangers() {
            return Arrays.stream(values())
                    .filter(other -> other != this && !known.contains(other))
                    .map(Room::packages)
                    .toArray(String[]::new);
        }
    }

    @ParameterizedTest
    @EnumSource
    void roomIsOnTheClassPath(Room room) {
        assertThat(CLASSES).anyMatch(type -> type.getPackageName().equals(room.root()));
    }

    @ParameterizedTest
    @EnumSource
    void roomKnowsOnlyTheRoomsBelowIt(Room room) {
        noClasses()
                .that()
                .resideInAPackage(room.packages())
                .should()
                .dependOnClassesThat()
                .resideInAnyPackage(room.packagesOfStrangers())
                .allowEmptyShould(true)
                .check(CLASSES);
    }

    @ParameterizedTest
    @EnumSource(names = {"ENGINE", "TRANSPORT", "QUALITY"})
    void roomNeverOpensFiles(Room room) {
        noClasses()
                .that()
                .resideInAPackage(room.packages())
                .should()
                .dependOnClassesThat()
                .haveNameMatching("java\\.io\\.(File|RandomAccessFile).*"
                        + "|java\\.nio\\.file\\..*"
                        + "|java\\.nio\\.channels\\.(Asynchronous)?FileChannel.*")
                .allowEmptyShould(true)
                .check(CLASSES);
    }

    @Test
    void packagesFormNoCycles() {
        slices().matching("org.raysheaf.(**)")
                .should()
                .beFreeOfCycles()
                .allowEmptyShould(true)
                .check(CLASSES);
    }
}
