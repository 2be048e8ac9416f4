/**
 * From a lab's own records to events. {@link org.raysheaf.io.records.RecordsDescription} is what a description says; {@link
 * org.raysheaf.io.records.RecordImport} does it.
 *
 * <pre>
 * data files ─ reader ─► columns of fields ─ pipeline ─► columns of values ─ filler ─► events ─ order, zero ─► list
 *              text            (2048            set_aside,                 units,
 *              binary         records           compute                    rules
 *              HDF5, npy      a block)
 * </pre>
 *
 * <p>Every stage works on a block of records at a time, column by column, in plain loops; {@link org.raysheaf.io.records.RecordReader} is the one
 * interface that readers share. Nothing is dropped without being counted: unreadable records by {@link org.raysheaf.io.records.DamageLog}, records set
 * aside by {@link org.raysheaf.io.records.Reasons}. Settings and {@code RecordImport} are public, the rest is not.
 */
@NullMarked
package org.raysheaf.io.records;

import org.jspecify.annotations.NullMarked;
