package org.raysheaf.geometry.settings;

import java.lang.annotation.ElementType;
import java.lang.annotation.Retention;
import java.lang.annotation.RetentionPolicy;
import java.lang.annotation.Target;

/**
 * The value that a setting takes when a description leaves it out. Stands on a component of a settings record and is the only
 * place where that default is written: readers of descriptions apply it, help texts and documentation print it.
 */
@Retention(RetentionPolicy.RUNTIME)
@Target(ElementType.RECORD_COMPONENT)
public @interface Default {
    /**
     * The default, spelled as a description would spell it.
     *
     * @return the text of the value, for example {@code "0.5"}, {@code "[0, 0, 0]"} or {@code "true"}
     */
    String value();
}
