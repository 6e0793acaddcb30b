package countwright.table;

import java.util.regex.Pattern;

/** Says why a column cannot be used as numbers: the first value that is none, and what to do. */
final class WrongKind {

    private static final Pattern DECIMAL_COMMA = Pattern.compile("\\s*[+-]?\\d+,\\d+\\s*");
    private static final Pattern GROUPED = Pattern.compile("\\s*[+-]?\\d{1,3}([,. ']\\d{3})+\\s*");
    private static final Pattern NUMBER = Pattern.compile("\\s*[+-]?(\\d+\\.?\\d*|\\.\\d+)([eE][+-]?\\d+)?\\s*");

    private WrongKind() {}

    static IllegalArgumentException notNumbers(Column column, String source) {
        String name = column.name();
        String what = "column '" + name + "' of " + source + " holds " + column.kind() + ", not numbers";
        if (!(column instanceof TextColumn)) {
            return new IllegalArgumentException(what + ". Make a column of numbers from it, such as table.with(\""
                    + name + "Year\", row -> row.date(\"" + name + "\").getYear()).");
        }
        for (int row = 0; row < column.size(); row++) {
            String value = column.text(row);
            if (!column.isMissing(row) && !NUMBER.matcher(value).matches()) {
                return new IllegalArgumentException(
                        what + ": row " + (row + 1) + " is '" + value + "'. " + remedy(name, value));
            }
        }
        return new IllegalArgumentException(what + ", though each value reads as a number. Make them numbers with"
                + " table.with(\"" + name + "\", row -> Double.parseDouble(row.text(\"" + name + "\"))).");
    }

    private static String remedy(String name, String value) {
        String parse = "row -> Double.parseDouble(row.text(\"" + name + "\")";
        if (DECIMAL_COMMA.matcher(value).matches()) {
            return "If the comma is a decimal comma, make it a point: table.with(\"" + name + "\", " + parse
                    + ".replace(',', '.'))).";
        }
        if (GROUPED.matcher(value).matches()) {
            return "If thousands are grouped, take the signs out: table.with(\"" + name + "\", " + parse
                    + ".replaceAll(\"[^0-9]\", \"\"))).";
        }
        return "Correct that value in the file (an unknown one is an empty field or NA), or use the column as a factor"
                + " with levels(\"" + name + "\").";
    }
}
