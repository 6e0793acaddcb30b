package countwright.kernel.worker;

import countwright.worker.Frame;

/** Receives what a worker says of its own accord, in order, on the worker's reading thread. */
public interface WorkerListener {

    /** Something shown, printed or asked. */
    void said(Frame.ToKernel frame);

    /** Text that came from the process itself rather than from Java code: the JVM or native code. */
    void processSaid(String text);
}
