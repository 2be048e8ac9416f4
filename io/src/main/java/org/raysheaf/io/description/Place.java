package org.raysheaf.io.description;

import org.yaml.snakeyaml.nodes.Node;

/**
 * Where something stands in a description.
 *
 * @param field the way to it, for example {@code blocks[2].pitch_mm}; empty for the whole
 * @param line the line, counted from 1
 */
record Place(String field, int line) {
    static Place root(Node node) {
        return new Place("", lineOf(node));
    }

    Place key(String key, int keyLine) {
        return new Place(field.isEmpty() ? key : field + "." + key, keyLine);
    }

    Place item(int index, Node item) {
        return new Place(field + "[" + index + "]", lineOf(item));
    }

    static int lineOf(Node node) {
        return node.getStartMark().getLine() + 1;
    }
}
