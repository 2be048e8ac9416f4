package org.raysheaf.app;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.raysheaf.geometry.event.EventTally;

/** What became of every event of a list, for results and for people. */
record Accounting(EventTally tally) {
    /** As result.json has it: every reason, also those that set nothing aside. */
    Map<String, Object> named() {
        Map<String, Object> events = new LinkedHashMap<>();
        events.put("read", tally.read());
        events.put("used", tally.used());
        Map<String, Object> aside = new LinkedHashMap<>();
        for (EventTally.Reason reason : EventTally.Reason.values()) {
            aside.put(reason.words(), tally.setAsideFor(reason));
        }
        events.put("set_aside", aside);
        return events;
    }

    /** As a table. */
    List<String> lines() {
        List<String> lines = new ArrayList<>();
        lines.add(String.format(Locale.ROOT, "events     %,12d read", tally.read()));
        lines.add(String.format(Locale.ROOT, "           %,12d used", tally.used()));
        for (EventTally.Reason reason : EventTally.Reason.values()) {
            if (tally.setAsideFor(reason) > 0) {
                lines.add(String.format(
                        Locale.ROOT, "           %,12d set aside: %s", tally.setAsideFor(reason), reason.words()));
            }
        }
        return lines;
    }
}
