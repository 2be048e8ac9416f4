package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.file.Path;
import java.util.HashMap;
import java.util.Map;
import org.raysheaf.geometry.detector.DetectorSystem;

/** What a description refers to: the files beside it, each read once, and the detector system. One thread. */
final class Surroundings {
    private final Path description;
    private final DetectorSystem system;
    private final Map<Path, TableFile> tables = new HashMap<>();
    private final Map<Path, CrystalMap> maps = new HashMap<>();

    Surroundings(Path description, DetectorSystem system) {
        this.description = description;
        this.system = system;
    }

    /** The description, for messages. */
    Path description() {
        return description;
    }

    DetectorSystem system() {
        return system;
    }

    TableFile table(String name) throws IOException {
        Path path = description.resolveSibling(name);
        TableFile table = tables.get(path);
        if (table == null) {
            table = TableFile.read(path);
            tables.put(path, table);
        }
        return table;
    }

    CrystalMap map(String name) throws IOException {
        Path path = description.resolveSibling(name);
        CrystalMap map = maps.get(path);
        if (map == null) {
            map = CrystalMap.read(path);
            maps.put(path, map);
        }
        return map;
    }
}
