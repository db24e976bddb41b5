// Loaded into a part with --import: when the command that started it is gone, even by force, it ends in order too.
if (process.channel) {
  process.once("disconnect", () => process.kill(process.pid, "SIGTERM"));
  // The channel alone is no reason to stay alive.
  process.channel.unref();
}
