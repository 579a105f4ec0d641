"use strict";

const live = process.stdout.isTTY === true;

/**
 * Runs one step and prints one line with its time. The step may return a string, which
 * then replaces the label: "MariaDB is ready on 127.0.0.1:40123".
 */
async function step(label, action) {
  const began = Date.now();
  if (live) process.stdout.write(`          ${label} …`);
  const clear = () => live && process.stdout.write("\r\u001b[K");
  try {
    const result = await action();
    clear();
    const said = typeof result === "string" ? result : label;
    say(`${seconds(began)}  ${said}`);
    return result;
  } catch (error) {
    clear();
    say(`${seconds(began)}  ${label}: stopped here`);
    throw error;
  }
}

function seconds(began) {
  return `${((Date.now() - began) / 1000).toFixed(1)} s`.padStart(8);
}

function say(line = "") {
  process.stdout.write(`${line}\n`);
}

module.exports = { step, say };
