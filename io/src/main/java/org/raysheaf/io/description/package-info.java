/**
 * From YAML to the plain settings records that the other rooms own, and back. Read {@link
 * org.raysheaf.io.description.DescriptionReader} first; {@link org.raysheaf.io.description.DescriptionWriter} is its mirror. Public.
 *
 * <p>A description names its kind and version in its first line, {@code raysheaf: system/1}. Below it, one key stands for each component
 * of a record. The records state their own rules and defaults; nothing here knows any of them.
 *
 * <table>
 *   <caption>How a component is written in a file</caption>
 *   <tr><th>component</th><th>in the file</th></tr>
 *   <tr><td>name {@code radiusMm}, {@code energyKeV}, {@code activityMBq}</td><td>key {@code radius_mm}, {@code energy_keV}, {@code
 *       activity_MBq}: snake case, units spelled as physicists do</td></tr>
 *   <tr><td>{@code double}</td><td>a number; whole numbers are fine, infinities and NaN are not</td></tr>
 *   <tr><td>{@code int}, {@code long}</td><td>a whole number; {@code 2e6} is one, {@code 3.5} and {@code 3.0} are not</td></tr>
 *   <tr><td>{@code boolean}</td><td>{@code true} or {@code false}, nothing else</td></tr>
 *   <tr><td>{@code String}, {@code Instant}</td><td>text; ISO-8601 such as {@code 2026-03-01T09:30:00Z}</td></tr>
 *   <tr><td>an enum</td><td>the constant in lower case, words joined by {@code _} or {@code -}</td></tr>
 *   <tr><td>{@code Vector3}</td><td>a list of three numbers {@code [x, y, z]}</td></tr>
 *   <tr><td>{@code List<T>}, {@code Map<String, T>}</td><td>a list; a mapping whose order is kept</td></tr>
 *   <tr><td>a record</td><td>a mapping</td></tr>
 *   <tr><td>a sealed interface</td><td>a mapping whose key {@code kind} names the permitted record in snake case (or with {@code -}),
 *       without the last words that all permitted records and the interface share: {@code RingPlacement} and {@code PanelPlacement} of
 *       {@code Placement} are {@code ring} and {@code panel}</td></tr>
 *   <tr><td>{@code @Nullable T}, {@code Optional<T>}</td><td>may be left out, or empty</td></tr>
 *   <tr><td>{@code @Default("0.5")}</td><td>may be left out, and is then 0.5</td></tr>
 * </table>
 */
@NullMarked
package org.raysheaf.io.description;

import org.jspecify.annotations.NullMarked;
