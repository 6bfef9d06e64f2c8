console.warn("a word");
throw new Error("a fault");
