package org.raysheaf.bench;

import java.io.IOException;
import java.lang.management.ManagementFactory;
import java.lang.management.MemoryPoolMXBean;
import java.lang.management.MemoryType;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.OptionalLong;

/** What this program takes of the machine's memory. */
final class Memory {
    private static final Path STATUS = Path.of("/proc/self/status");

    private Memory() {}

    /** Heap that is still in use after a collection (bytes). */
    static long retained() {
        System.gc();
        return ManagementFactory.getMemoryMXBean().getHeapMemoryUsage().getUsed();
    }

    /** The largest heap so far, garbage included (bytes). */
    static long peakHeap() {
        return ManagementFactory.getMemoryPoolMXBeans().stream()
                .filter(pool -> pool.getType() == MemoryType.HEAP)
                .map(MemoryPoolMXBean::getPeakUsage)
                .mapToLong(usage -> usage.getUsed())
                .sum();
    }

    /** The most physical memory that the process has held so far, mapped files included (bytes); known on Linux only. */
    static OptionalLong peakResident() throws IOException {
        return status("VmHWM:");
    }

    /** Physical memory that holds no file, heap and all (bytes); 0 where it is not known. */
    static long anonymous() {
        try {
            return status("RssAnon:").orElse(0);
        } catch (IOException e) {
            return 0;
        }
    }

    private static OptionalLong status(String key) throws IOException {
        if (!Files.isReadable(STATUS)) {
            return OptionalLong.empty();
        }
        return Files.readAllLines(STATUS).stream()
                .filter(line -> line.startsWith(key))
                .mapToLong(line -> 1024 * Long.parseLong(line.replaceAll("[^0-9]", "")))
                .findFirst();
    }
}
