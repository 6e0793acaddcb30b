package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;

import java.util.Random;
import java.util.concurrent.TimeUnit;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class GlobTest {

    @ParameterizedTest
    @CsvSource({
        "*,'',true",
        "'','',true",
        "'',a,false",
        "a?c,abc,true",
        "a?c,ac,false",
        "?,😀,true",
        "*b*,abc,true",
        "a*,ba,false",
        "*[2],a[2],true",
        "*[2],a2,false",
        "a.c,abc,false",
        "*a*b,xxaxxbxb,true",
        "**,anything,true",
    })
    void pattern_standsForTheWholeText(String pattern, String text, boolean matches) {
        assertThat(Glob.of(pattern).matches(text)).isEqualTo(matches);
    }

    /** The regular expression is slow on such patterns, but on short texts it knows the truth. */
    @Test
    void randomPatterns_agreeWithARegularExpression() {
        Random random = new Random(20261201);
        for (int round = 0; round < 20_000; round++) {
            String pattern = random(random, "ab?*", 6);
            String text = random(random, "ab", 8);
            String regex = pattern.replace("?", ".").replace("*", ".*");
            assertThat(Glob.of(pattern).matches(text))
                    .as("%s on %s", pattern, text)
                    .isEqualTo(Pattern.matches(regex, text));
        }
    }

    @Test
    @Timeout(value = 20, unit = TimeUnit.SECONDS)
    void manyStars_doNotBlowUp() {
        Glob glob = Glob.of("*a".repeat(1_000) + "*b");
        assertThatCode(() -> assertThat(glob.matches("a".repeat(100_000))).isFalse())
                .doesNotThrowAnyException();
    }

    private static String random(Random random, String letters, int longest) {
        StringBuilder text = new StringBuilder();
        for (int i = random.nextInt(longest + 1); i > 0; i--) {
            text.append(letters.charAt(random.nextInt(letters.length())));
        }
        return text.toString();
    }
}
