import { run } from "./setup/bootstrap.mjs";

void run("checks");
