/** Loaded into the server's process ahead of it: when the command that started it dies without a word, the server ends too. */
process.on("disconnect", () => process.kill(process.pid, "SIGTERM"));
// Or the channel alone would keep an ended server alive.
process.channel?.unref();
