package countwright.install;

import static com.tngtech.archunit.base.DescribedPredicate.describe;
import static com.tngtech.archunit.core.domain.JavaClass.Predicates.resideInAnyPackage;
import static com.tngtech.archunit.core.domain.JavaClass.Predicates.resideOutsideOfPackages;
import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.classes;
import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noMethods;
import static com.tngtech.archunit.library.dependencies.SlicesRuleDefinition.slices;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.base.DescribedPredicate;
import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.domain.JavaConstructorCall;
import com.tngtech.archunit.core.domain.JavaPackage;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import com.tngtech.archunit.lang.ArchRule;
import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import org.jspecify.annotations.NullMarked;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;

/** The arrows between the packages, and the house rules that a compiler does not hold. */
class ArchitectureTest {

    private static final String[] LIBRARY = {
        "countwright.table..", "countwright.design..", "countwright.family..", "countwright.fit..",
        "countwright.model..", "countwright.check..", "countwright.rates..", "countwright.watch..",
        "countwright.plan..", "countwright.chart..", "countwright.show.."
    };

    /** A class that writes to the terminal outside the command line, each for its own reason. */
    private static final Set<String> MAY_WRITE_TO_THE_TERMINAL = Set.of(
            // Stands in for the notebook where there is none.
            "countwright.show.Terminal",
            // Puts the channels to the kernel in the place of the terminal's streams.
            "countwright.worker.StandardStreams",
            // Says on the worker's own terminal why it could not start, since there is no other way yet.
            "countwright.worker.WorkerMain",
            // Flushes what the user's code has written when its cell ends.
            "countwright.worker.CellThread");

    /** For the one chart in a hundred that needs what ours cannot do. */
    private static final String ESCAPE_HATCH = "countwright.chart.Chart.xchart()";

    private static JavaClasses all = new ClassFileImporter().importClasses();

    @BeforeAll
    static void importAll() {
        all = new ClassFileImporter()
                .withImportOption(ImportOption.Predefined.DO_NOT_INCLUDE_TESTS)
                .importPackages("countwright");
    }

    @Test
    void imported_classes_areAllThereAre() {
        assertThat(all.stream().filter(JavaClass::isTopLevelClass)).hasSizeGreaterThan(90);
        assertThat(packages())
                .extracting(JavaPackage::getName)
                .contains(
                        "countwright.show",
                        "countwright.table",
                        "countwright.worker",
                        "countwright.kernel.wire",
                        "countwright.kernel.cell",
                        "countwright.kernel.worker",
                        "countwright.kernel.desk",
                        "countwright.kernel.cli");
    }

    @Nested
    class Arrows {

        @Test
        void library_knowsNothingOfKernelAndWorker() {
            check(noClasses()
                    .that()
                    .resideInAnyPackage(LIBRARY)
                    .should()
                    .dependOnClassesThat()
                    .resideInAnyPackage("countwright.kernel..", "countwright.worker.."));
        }

        @Test
        void kernel_seesOnlyShowOfTheLibrary() {
            check(noClasses()
                    .that()
                    .resideInAPackage("countwright.kernel..")
                    .should()
                    .dependOnClassesThat(libraryButShow()));
        }

        @Test
        void worker_seesOnlyShowOfTheLibrary_andNothingOfTheKernel() {
            check(noClasses()
                    .that()
                    .resideInAPackage("countwright.worker..")
                    .should()
                    .dependOnClassesThat(libraryButShow().or(resideInAnyPackage("countwright.kernel.."))));
        }

        @Test
        void show_knowsNothingOfTheRest() {
            check(noClasses()
                    .that()
                    .resideInAPackage("countwright.show..")
                    .should()
                    .dependOnClassesThat(libraryButShow()));
        }

        @Test
        void fit_knowsNeitherTablesNorChartsNorModels() {
            check(noClasses()
                    .that()
                    .resideInAPackage("countwright.fit..")
                    .should()
                    .dependOnClassesThat()
                    .resideInAnyPackage(
                            "countwright.table..",
                            "countwright.chart..",
                            "countwright.model..",
                            "countwright.design..",
                            "countwright.check..",
                            "countwright.show.."));
        }

        @Test
        void packages_haveNoCycles() {
            check(slices().matching("countwright.(**)").should().beFreeOfCycles());
        }
    }

    @Nested
    class Libraries {

        @Test
        void sockets_areOnlyInWire() {
            only(new String[] {"countwright.kernel.wire.."}, "org.zeromq..", "zmq..");
        }

        @Test
        void json_isOnlyInTheKernel() {
            only(new String[] {"countwright.kernel.."}, "tools.jackson..", "com.fasterxml.jackson..");
        }

        @Test
        void jshell_isOnlyInCellAndWorker() {
            only(new String[] {"countwright.kernel.cell..", "countwright.worker.."}, "jdk.jshell..");
        }

        @Test
        void debuggerInterface_isOnlyInTheKernelsWorkerPackage() {
            only(new String[] {"countwright.kernel.worker.."}, "com.sun.jdi..");
        }

        @Test
        void commandLine_isOnlyInCli() {
            only(new String[] {"countwright.kernel.cli.."}, "picocli..");
        }

        @Test
        void markdownAndSanitizer_areOnlyAtTheDesk() {
            only(new String[] {"countwright.kernel.desk.."}, "org.commonmark..", "org.owasp..");
        }

        @Test
        void chartLibrary_isOnlyInChart() {
            only(new String[] {"countwright.chart.."}, "org.knowm..");
        }

        @Test
        void database_isOnlyInTable() {
            only(new String[] {"countwright.table.."}, "org.duckdb..", "java.sql..");
        }

        @Test
        void theirTypes_areInNoPublicSignature() {
            check(noMethods()
                    .that()
                    .arePublic()
                    .and()
                    .areDeclaredInClassesThat()
                    .arePublic()
                    .and(describe(
                            "are not the escape hatch",
                            method -> !method.getFullName().equals(ESCAPE_HATCH)))
                    .should(new UseInSignature("org.knowm", "org.duckdb", "java.sql", "org.apache.commons.math3")));
        }

        private void only(String[] home, String... library) {
            check(noClasses()
                    .that(resideOutsideOfPackages(home))
                    .should()
                    .dependOnClassesThat()
                    .resideInAnyPackage(library));
        }
    }

    @Nested
    class HouseRules {

        @Test
        void processes_areStartedOnlyForWorkersAndByTheDesk() {
            check(noClasses()
                    .that()
                    .resideOutsideOfPackage("countwright.kernel.worker..")
                    .and()
                    .doNotHaveFullyQualifiedName("countwright.kernel.desk.KernelProcess")
                    .should()
                    .dependOnClassesThat()
                    .haveFullyQualifiedName("java.lang.ProcessBuilder"));
        }

        @Test
        void terminal_isWrittenToByTheCommandLineOnly() {
            check(noClasses()
                    .that(describe(
                            "are not allowed to",
                            type -> !type.getPackageName().equals("countwright.kernel.cli")
                                    && !MAY_WRITE_TO_THE_TERMINAL.contains(
                                            outermost(type).getName())))
                    .should()
                    .accessField(System.class, "out")
                    .orShould()
                    .accessField(System.class, "err"));
        }

        @Test
        void exceptions_sayWhichKindTheyAre() {
            check(noClasses()
                    .should()
                    .callConstructorWhere(describe(
                            "a bare exception is made",
                            call -> isBare(call) && !call.getOriginOwner().isAssignableTo(Throwable.class))));
        }

        @Test
        void packages_sayThatNonNullIsTheDefault() {
            assertThat(packages())
                    .allSatisfy(each -> assertThat(each.isAnnotatedWith(NullMarked.class))
                            .as(each.getName())
                            .isTrue());
        }

        @Test
        void packages_areNamedByConcept() {
            check(noClasses()
                    .should()
                    .resideInAnyPackage("..util..", "..utils..", "..common..", "..helper..", "..impl..", "..misc.."));
        }

        @Test
        void classes_areFinalUnlessMadeForExtension() {
            check(classes()
                    .that()
                    .areTopLevelClasses()
                    .and()
                    .arePublic()
                    .and()
                    .areNotInterfaces()
                    .and()
                    .areNotEnums()
                    .and()
                    .areNotRecords()
                    .and()
                    .areNotAnnotations()
                    .and()
                    .doNotHaveSimpleName("package-info")
                    .should(new BeFinalAbstractOrSealed()));
        }

        private boolean isBare(JavaConstructorCall call) {
            return List.of(
                            "java.lang.RuntimeException",
                            "java.lang.Exception",
                            "java.lang.Throwable",
                            "java.lang.Error")
                    .contains(call.getTargetOwner().getName());
        }
    }

    private static DescribedPredicate<JavaClass> libraryButShow() {
        return resideInAnyPackage(LIBRARY).and(resideOutsideOfPackages("countwright.show.."));
    }

    private static JavaClass outermost(JavaClass type) {
        return type.getEnclosingClass().map(ArchitectureTest::outermost).orElse(type);
    }

    private static List<JavaPackage> packages() {
        Set<String> names = new TreeSet<>();
        all.forEach(type -> names.add(type.getPackageName()));
        return names.stream().map(all::getPackage).toList();
    }

    /** A rule about a package that is not there yet holds; the floor on the classes seen guards against scanning nothing. */
    private static void check(ArchRule rule) {
        rule.allowEmptyShould(true).check(all);
    }
}
