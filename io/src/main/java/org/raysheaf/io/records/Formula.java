package org.raysheaf.io.records;

import java.util.LinkedHashSet;
import java.util.Locale;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * Compiles formulas over the values of a record into a flat program of loops over columns.
 *
 * <pre>
 * numbers      12  0x1F  2.5e3                    operators, weakest first
 * names        adc  overflow.count                or   and   not
 * functions    abs(x)  min(x, y)  max(x, y)       ==  !=  &lt;  &lt;=  &gt;  &gt;=        1 if true, else 0
 *              sqrt(x)  exp(x)  log(x)            +  -
 *              floor(x)  round(x)                 *  /  //  %                 // and % round down
 *              if(c, x, y)   x where c is not 0   -x
 *              bits(x, first, count)   unsigned bits of a whole number, bit 0 the least significant
 * </pre>
 *
 * <p>Whole numbers stay whole and exact (64 bits) in {@code + - * // % min max abs if bits} and comparisons of whole numbers; {@code /} and everything
 * with a real number is computed in double precision. A record in which whole numbers overflow, or are divided by 0, is set aside. Not safe for use by several threads.
 */
final class Formula {
    private final String text;
    private final Program program;
    private int at;

    /** Makes the columns of a program and keeps its steps. */
    interface Program {
        /** The column of a name, or null if there is no such value. */
        @Nullable
        Column named(String name);

        /** The names that there are, for messages. */
        Set<String> names();

        /** A column for a result in between. */
        Column temporary(boolean whole);

        /** Adds a step. */
        void add(Op op);

        /** Number of a reason to set records aside. */
        int reason(String words);
    }

    private Formula(String text, Program program) {
        this.text = text;
        this.program = program;
    }

    /**
     * Compiles a formula.
     *
     * @param text the formula
     * @param program receives the steps
     * @return the column that will hold the result
     * @throws IllegalArgumentException if the formula cannot be understood; says where
     */
    static Column compile(String text, Program program) {
        Formula formula = new Formula(text, program);
        Column result = formula.or();
        formula.skipBlanks();
        if (formula.at < text.length()) {
            throw formula.problem("an operator or the end");
        }
        return result;
    }

    /** The names that a formula may use; never fails. */
    static Set<String> names(String text) {
        Set<String> names = new LinkedHashSet<>();
        int i = 0;
        while (i < text.length()) {
            char c = text.charAt(i);
            int start = i;
            if (isLetter(c)) {
                while (i < text.length() && isNamePart(text.charAt(i))) {
                    i++;
                }
                names.add(text.substring(start, i));
            } else if (c >= '0' && c <= '9') {
                while (i < text.length() && isNamePart(text.charAt(i))) {
                    i++; // so that the letters of 0x1F and 1e5 are no names
                }
            } else {
                i++;
            }
        }
        return names;
    }

    private static boolean isLetter(char c) {
        return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_';
    }

    private static boolean isNamePart(char c) {
        return isLetter(c) || (c >= '0' && c <= '9') || c == '.';
    }

    private IllegalArgumentException problem(String expected) {
        String found = at >= text.length() ? "its end" : "\"" + text.substring(at) + "\"";
        return new IllegalArgumentException(
                "formula \"" + text + "\", character " + (at + 1) + ": expected " + expected + ", found " + found);
    }

    private void skipBlanks() {
        while (at < text.length() && text.charAt(at) <= ' ') {
            at++;
        }
    }

    /** Takes a sign if it comes next. */
    private boolean take(String sign) {
        skipBlanks();
        boolean next = text.startsWith(sign, at);
        if (next && isLetter(sign.charAt(0))) {
            int end = at + sign.length();
            next = end >= text.length() || !isNamePart(text.charAt(end));
        }
        at += next ? sign.length() : 0;
        return next;
    }

    private void require(String sign) {
        if (!take(sign)) {
            throw problem("\"" + sign + "\"");
        }
    }

    private Column or() {
        Column left = and();
        while (take("or")) {
            left = Loops.logic(program, left, and(), false);
        }
        return left;
    }

    private Column and() {
        Column left = not();
        while (take("and")) {
            left = Loops.logic(program, left, not(), true);
        }
        return left;
    }

    private Column not() {
        if (take("not")) {
            return Loops.compare(program, not(), Loops.constant(program, 0), Loops.Comparison.EQUAL);
        }
        return comparison();
    }

    private Column comparison() {
        Column left = sum();
        for (Loops.Comparison comparison : Loops.Comparison.values()) {
            if (take(comparison.sign())) {
                return Loops.compare(program, left, sum(), comparison);
            }
        }
        return left;
    }

    private Column sum() {
        Column left = product();
        while (true) {
            if (take("+")) {
                left = Loops.arithmetic(program, left, product(), '+');
            } else if (take("-")) {
                left = Loops.arithmetic(program, left, product(), '-');
            } else {
                return left;
            }
        }
    }

    private Column product() {
        Column left = sign();
        while (true) {
            if (take("*")) {
                left = Loops.arithmetic(program, left, sign(), '*');
            } else if (take("//")) {
                left = Loops.floorDivision(program, left, sign());
            } else if (take("/")) {
                left = Loops.arithmetic(program, Loops.real(program, left), sign(), '/');
            } else if (take("%")) {
                left = Loops.modulo(program, left, sign());
            } else {
                return left;
            }
        }
    }

    private Column sign() {
        if (take("-")) {
            return Loops.arithmetic(program, Loops.constant(program, 0), sign(), '-');
        }
        return atom();
    }

    private Column atom() {
        skipBlanks();
        if (at >= text.length()) {
            throw problem("a value");
        }
        char c = text.charAt(at);
        if (c == '(') {
            at++;
            Column inside = or();
            require(")");
            return inside;
        }
        if ((c >= '0' && c <= '9') || c == '.') {
            return number();
        }
        if (isLetter(c)) {
            return nameOrFunction();
        }
        throw problem("a value");
    }

    private Column number() {
        int start = at;
        boolean hex = text.startsWith("0x", at) || text.startsWith("0X", at);
        at += hex ? 2 : 0;
        while (at < text.length()) {
            char c = text.charAt(at);
            boolean exponentSign = !hex && (c == '+' || c == '-') && "eE".indexOf(text.charAt(at - 1)) >= 0;
            if (!isNamePart(c) && !exponentSign) {
                break;
            }
            at++;
        }
        String digits = text.substring(start, at);
        try {
            if (hex) {
                return Loops.constant(program, Long.parseUnsignedLong(digits.substring(2), 16));
            }
            if (digits.chars().allMatch(c -> c >= '0' && c <= '9')) {
                return Loops.constant(program, Long.parseLong(digits));
            }
            String last = digits.substring(digits.length() - 1).toLowerCase(Locale.ROOT);
            if (last.equals("d") || last.equals("f")) {
                throw new NumberFormatException(digits);
            }
            return Loops.constant(program, Double.parseDouble(digits));
        } catch (NumberFormatException e) {
            at = start;
            throw (IllegalArgumentException) problem("a number").initCause(e);
        }
    }

    private Column nameOrFunction() {
        int start = at;
        while (at < text.length() && isNamePart(text.charAt(at))) {
            at++;
        }
        String name = text.substring(start, at);
        skipBlanks();
        if (at < text.length() && text.charAt(at) == '(') {
            return function(name, start);
        }
        Column column = program.named(name);
        if (column == null) {
            at = start;
            throw problem("one of the values " + String.join(", ", program.names()));
        }
        return column;
    }

    private Column function(String name, int start) {
        require("(");
        Column first = or();
        Column result;
        switch (name) {
            case "abs" ->
                result = Loops.largest(
                        program, first, Loops.arithmetic(program, Loops.constant(program, 0), first, '-'), true);
            case "sqrt" -> result = Loops.function(program, first, Math::sqrt);
            case "exp" -> result = Loops.function(program, first, Math::exp);
            case "log" -> result = Loops.function(program, first, Math::log);
            case "floor" -> result = Loops.toWhole(program, first, Math::floor);
            case "round" -> result = Loops.toWhole(program, first, Math::rint);
            case "min", "max" -> {
                require(",");
                result = Loops.largest(program, first, or(), name.equals("max"));
            }
            case "if" -> {
                require(",");
                Column then = or();
                require(",");
                result = Loops.choose(program, first, then, or());
            }
            case "bits" -> {
                require(",");
                int low = wholeConstant(0, 63);
                require(",");
                int count = wholeConstant(1, 64 - low);
                if (!first.whole()) {
                    throw problem("a whole number as the first argument of bits, found a real one before");
                }
                result = Loops.bits(program, first, low, count);
            }
            default -> {
                at = start;
                throw problem("a function: abs, min, max, sqrt, exp, log, floor, round, if or bits");
            }
        }
        require(")");
        return result;
    }

    private int wholeConstant(int low, int high) {
        skipBlanks();
        int start = at;
        while (at < text.length() && Character.isDigit(text.charAt(at))) {
            at++;
        }
        String digits = text.substring(start, at);
        int value = digits.isEmpty() || digits.length() > 3 ? -1 : Integer.parseInt(digits);
        if (value < low || value > high) {
            at = start;
            throw problem("a number from " + low + " to " + high);
        }
        return value;
    }
}
