package org.raysheaf.app;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.AccessDeniedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.FileSystemException;
import java.nio.file.InvalidPathException;
import java.nio.file.NoSuchFileException;
import java.util.Collection;
import java.util.List;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.settings.Nearest;
import picocli.CommandLine;

/**
 * Turns what went wrong into one message and an exit code: 1 for a problem in data or files, 2 for usage. Only exceptions about files and settings
 * count as the user's; any other is a mistake of ours and says so.
 */
final class Failures implements CommandLine.IExecutionExceptionHandler, CommandLine.IParameterExceptionHandler {
    Failures() {}

    @Override
    public int handleExecutionException(Exception failure, CommandLine line, CommandLine.ParseResult parsed)
            throws Exception {
        if (failure instanceof CommandLine.ParameterException usage) {
            return handleParseException(usage, new String[0]);
        }
        boolean verbose =
                line.getCommand() instanceof Verb verb && verb.common().verbose();
        line.getErr().println("raysheaf " + line.getCommandName() + ": " + words(failure));
        if (verbose) {
            failure.printStackTrace(line.getErr());
        }
        line.getErr().flush();
        return 1;
    }

    private static String words(Exception failure) {
        if (failure instanceof NoSuchFileException missing) {
            return missing.getFile() + ": there is no such file";
        }
        if (failure instanceof FileAlreadyExistsException existing) {
            return existing.getFile() + " is already there; choose another name or add --replace";
        }
        if (failure instanceof AccessDeniedException denied) {
            return denied.getFile() + ": permission denied";
        }
        if (failure instanceof FileSystemException other && other.getReason() == null) {
            return other.getFile() + ": cannot be used (" + other.getClass().getSimpleName() + ")";
        }
        boolean expected = failure instanceof IOException
                || failure instanceof UncheckedIOException
                || failure instanceof InvalidSettingsException
                || failure instanceof InvalidPathException; // a name in a description that no file can have
        if (expected && failure.getMessage() != null) {
            return failure.getMessage();
        }
        return "this should not happen and is our mistake: " + failure
                + "; run it again with --verbose and report what it prints";
    }

    @Override
    public int handleParseException(CommandLine.ParameterException usage, String[] arguments) {
        CommandLine line = usage.getCommandLine();
        line.getErr().println("raysheaf: " + words(usage, arguments).replaceAll("\\s*\\R\\s*", "; "));
        line.getErr().println("see: raysheaf " + verb(line) + "--help");
        line.getErr().flush();
        return 2;
    }

    private static String words(CommandLine.ParameterException usage, String[] arguments) {
        CommandLine line = usage.getCommandLine();
        if (usage instanceof CommandLine.MissingParameterException) {
            // A mistyped option is missing under its right name, but the name that was typed tells more.
            for (String argument : arguments) {
                if (argument.startsWith("--") && !options(List.of(line)).contains(name(argument))) {
                    return unknown(line, argument);
                }
            }
        }
        if (!(usage instanceof CommandLine.UnmatchedArgumentException unmatched)) {
            return String.valueOf(usage.getMessage());
        }
        String found = unmatched.getUnmatched().get(0);
        boolean noVerb = !line.getSubcommands().isEmpty();
        if (!unmatched.isUnknownOption()) {
            return noVerb
                    ? "unknown verb " + found + "; the nearest is "
                            + Nearest.to(found, line.getSubcommands().keySet())
                    : "expected no further argument, found " + found;
        }
        if (noVerb && options(line.getSubcommands().values()).contains(name(found))) {
            return "expected a verb, found the option " + name(found) + "; options stand behind the verb";
        }
        return unknown(line, found);
    }

    private static String unknown(CommandLine line, String option) {
        return "unknown option " + name(option) + "; the nearest is "
                + Nearest.to(name(option), options(List.of(line)));
    }

    /** An option without the value that may hang on it. */
    private static String name(String option) {
        int end = option.indexOf('=');
        return end < 0 ? option : option.substring(0, end);
    }

    private static List<String> options(Collection<CommandLine> lines) {
        return lines.stream()
                .flatMap(line -> line.getCommandSpec().optionsMap().keySet().stream())
                .toList();
    }

    private static String verb(CommandLine line) {
        return line.getParent() == null ? "" : line.getCommandName() + " ";
    }
}
