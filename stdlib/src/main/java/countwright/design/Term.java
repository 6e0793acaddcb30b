package countwright.design;

import java.util.List;

/** A part of the linear predictor of a model. Made by the factories of {@link Terms}. */
public sealed interface Term permits MainTerm, InteractionTerm {

    /** Returns the names of the columns of a table that the term reads. */
    List<String> columns();

    /** Returns the term in words, as it is named in messages: "age", "depot", "age × doorType". */
    String label();
}
