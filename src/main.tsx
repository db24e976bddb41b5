import { StrictMode } from "react";
import { createRoot } from "react-dom/client";
import { z } from "zod";
import { App } from "./app/app";
import "./styles.css";

// Zod's compiled validators need eval, which our content security policy refuses (and reports).
z.config({ jitless: true });

const root = document.getElementById("root");
if (!root) throw new Error("index.html has no #root to draw the page into.");
createRoot(root).render(
  <StrictMode>
    <App />
  </StrictMode>,
);
