package org.raysheaf.io.description;

import java.util.LinkedHashMap;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.yaml.snakeyaml.nodes.MappingNode;
import org.yaml.snakeyaml.nodes.Node;
import org.yaml.snakeyaml.nodes.NodeTuple;
import org.yaml.snakeyaml.nodes.ScalarNode;

/** The keys of one mapping with their values, each key once, in the order of the file. */
final class Entries {
    private final Place place;
    private final Map<String, Node> values = new LinkedHashMap<>();
    private final Map<String, Place> places = new LinkedHashMap<>();

    Entries(MappingNode mapping, Place place, Findings findings) {
        this.place = place;
        for (NodeTuple entry : mapping.getValue()) {
            Node key = entry.getKeyNode();
            if (key instanceof ScalarNode scalar && !Found.isNothing(scalar)) {
                add(scalar, entry.getValueNode(), findings);
            } else {
                findings.add(
                        new Place(place.field(), Place.lineOf(key)), "expected a key, found " + Found.describe(key));
            }
        }
    }

    private void add(ScalarNode key, Node value, Findings findings) {
        String name = key.getValue();
        Place here = place.key(name, Place.lineOf(key));
        Place first = places.putIfAbsent(name, here);
        if (first == null) {
            values.put(name, value);
        } else {
            findings.add(here, "expected each key once, found it also in line " + first.line() + "; remove one");
        }
    }

    /** The mapping itself. */
    Place place() {
        return place;
    }

    Map<String, Node> values() {
        return values;
    }

    @Nullable
    Node value(String key) {
        return values.get(key);
    }

    /** Where a key stands; for an absent key, where it should be. */
    Place placeOf(String key) {
        Place known = places.get(key);
        return known != null ? known : place.key(key, place.line());
    }
}
