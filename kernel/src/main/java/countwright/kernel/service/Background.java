package countwright.kernel.service;

import java.util.concurrent.ExecutorService;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.ThreadPoolExecutor;
import java.util.concurrent.TimeUnit;

/** Threads for work that must not hold up the thread that receives requests. */
final class Background {

    private static final long IDLE_SECONDS = 30;

    private Background() {}

    /** Returns one thread that does one thing after the other, is there only while needed, and keeps no process alive. */
    static ExecutorService inOrder(String name) {
        ThreadPoolExecutor executor =
                new ThreadPoolExecutor(1, 1, IDLE_SECONDS, TimeUnit.SECONDS, new LinkedBlockingQueue<>(), task -> {
                    Thread thread = new Thread(task, name);
                    thread.setDaemon(true);
                    return thread;
                });
        executor.allowCoreThreadTimeOut(true);
        return executor;
    }
}
