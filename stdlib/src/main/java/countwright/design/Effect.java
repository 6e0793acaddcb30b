package countwright.design;

import countwright.table.Column;
import countwright.table.NumberColumn;
import countwright.table.Table;
import java.util.Optional;

/** A bound term: a run of columns in which each row has at most one entry. */
sealed interface Effect {

    /** Returns the number of columns. */
    int width();

    /** Returns the name of the coefficient of a column, counted from 0 within the effect. */
    String name(int index);

    /** Returns the effect ready to be read off the rows of a table. */
    Reader over(Table table);

    /** Reads the entries of an effect off a table. */
    interface Reader {

        /** Returns the column, counted from 0 within the effect, in which a row has its entry, or -1. */
        int index(int row);

        /** Returns the entry. */
        double value(int row);
    }

    /** The baseline: 1 in every row. */
    record Baseline() implements Effect {

        @Override
        public int width() {
            return 1;
        }

        @Override
        public String name(int index) {
            return "baseline";
        }

        @Override
        public Reader over(Table table) {
            return new ConstantReader();
        }
    }

    /** A column of numbers. */
    record Linear(String column) implements Effect {

        private static final double TINY = 1e-50;

        static Linear learn(String name, Table table) {
            Column column = table.column(name);
            if (!(column instanceof NumberColumn numbers)) {
                throw notNumbers(column, table.source());
            }
            double largest = 0;
            boolean varies = false;
            for (int row = 0; row < numbers.size(); row++) {
                largest = Math.max(largest, Math.abs(numbers.value(row)));
                varies |= numbers.value(row) != numbers.value(0);
            }
            if (varies && largest < TINY) {
                throw new IllegalArgumentException(
                        "linear(\"" + name + "\") has no value above 1e-50 in size, and squares of"
                                + " such numbers vanish. Give the column in another unit.");
            }
            if (varies) {
                return new Linear(name);
            }
            throw new IllegalArgumentException("linear(\"" + name + "\") has no effect to estimate: every row used is "
                    + numbers.text(0) + ". Leave the term out, or use rows in which it varies.");
        }

        @Override
        public int width() {
            return 1;
        }

        @Override
        public String name(int index) {
            return column + " (per 1)";
        }

        @Override
        public Reader over(Table table) {
            Column values = table.column(column);
            if (!(values instanceof NumberColumn numbers)) {
                throw notNumbers(values, table.source());
            }
            return new LinearReader(numbers, table.source());
        }

        private static IllegalArgumentException notNumbers(Column column, String source) {
            String remedy = column.kind().equals("text")
                    ? "Use levels(\"" + column.name() + "\") to compare its levels."
                    : "Use levels(\"" + column.name() + "\"), or add a column of numbers such as days since a start.";
            return new IllegalArgumentException("linear(\"" + column.name() + "\") needs a column of numbers, but '"
                    + column.name() + "' in " + source + " holds " + column.kind() + ". " + remedy);
        }
    }

    /** A factor: one column for each level but the reference. */
    record Levels(Factor factor) implements Effect {

        @Override
        public int width() {
            return factor.levels().size() - 1;
        }

        @Override
        public String name(int index) {
            String level = factor.levels().get(index < factor.referenceIndex() ? index : index + 1);
            return factor.column() + " " + level + " vs " + factor.reference();
        }

        @Override
        public Reader over(Table table) {
            return new LevelsReader(factor.codes(table), factor.referenceIndex());
        }
    }

    /** The product of two effects: a column for each pair of their columns, the second running faster. */
    record Product(Effect first, Effect second) implements Effect {

        @Override
        public int width() {
            return Math.multiplyExact(first.width(), second.width());
        }

        @Override
        public String name(int index) {
            if (first instanceof Linear linear && first.equals(second)) {
                return linear.column() + "² (per 1)";
            }
            return first.name(index / second.width()) + " × " + second.name(index % second.width());
        }

        @Override
        public Reader over(Table table) {
            return new ProductReader(first.over(table), second.over(table), second.width());
        }
    }

    /** Reads the baseline. */
    record ConstantReader() implements Reader {

        @Override
        public int index(int row) {
            return 0;
        }

        @Override
        public double value(int row) {
            return 1;
        }
    }

    /** Reads a column of numbers. */
    record LinearReader(NumberColumn numbers, String source) implements Reader {

        @Override
        public int index(int row) {
            return 0;
        }

        @Override
        public double value(int row) {
            double value = numbers.value(row);
            if (!Double.isFinite(value)) {
                throw new IllegalArgumentException(
                        "row " + (row + 1) + " of column '" + numbers.name() + "' in " + source
                                + (Double.isNaN(value) ? " is missing" : " is " + value)
                                + ", but the model needs a number there. Fill it in, or leave the row out.");
            }
            return value;
        }
    }

    /** Reads a factor from the codes of its levels. */
    final class LevelsReader implements Reader {

        private final int[] codes;
        private final int reference;

        LevelsReader(int[] codes, int reference) {
            this.codes = codes;
            this.reference = reference;
        }

        @Override
        public int index(int row) {
            int code = codes[row];
            return code == reference ? -1 : code < reference ? code : code - 1;
        }

        @Override
        public double value(int row) {
            return 1;
        }
    }

    /** Reads a product of effects. */
    record ProductReader(Reader first, Reader second, int secondWidth) implements Reader {

        @Override
        public int index(int row) {
            int a = first.index(row);
            int b = second.index(row);
            return a < 0 || b < 0 ? -1 : a * secondWidth + b;
        }

        @Override
        public double value(int row) {
            return first.value(row) * second.value(row);
        }
    }

    /** Returns the effect of a main term, learned from a table. */
    static Effect learn(MainTerm term, Optional<String> inheritedReference, Table table) {
        if (term instanceof LevelsTerm levels) {
            Optional<String> reference = levels.chosenReference().or(() -> inheritedReference);
            return new Levels(Factor.learn(levels.column(), reference, table));
        }
        return Linear.learn(term.column(), table);
    }
}
