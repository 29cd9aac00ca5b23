import {run} from "@/scripts/bench/fits"; run().then(r=>console.log(r[0].value));
