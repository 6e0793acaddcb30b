/**
 * The invented data of the demo notebooks. Each class generates one file from a stated seed, byte for byte the same on every
 * Java, and names the effects it was generated with, so that an analysis can be held against the truth.
 */
@NullMarked
package countwright.demo;

import org.jspecify.annotations.NullMarked;
