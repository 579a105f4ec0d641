import fs from "node:fs";
import { backgroundIn, objectIn, rowsOfSet, type JsonObject } from "./checkFiles";
import { CompiledTable } from "~shared/likelihood/compile";
import { FitProblem } from "~shared/inference/problem";
import { tanhFamily } from "~shared/inference/families";
const file = JSON.parse(fs.readFileSync("tests/fixtures/checks/fit.json","utf8")) as JsonObject;
const bg = backgroundIn(objectIn(file,"cosmology"));
const now=()=>Number(process.hrtime.bigint())/1e6;
let t=now();
const p = new FitProblem(new CompiledTable({ rows: rowsOfSet(file, "all_rows_plus_tau") }), tanhFamily(), bg);
console.log("build", now()-t);
const th=new Float64Array(2), out=new Float64Array(4); let s=0;
for (let r=0;r<4;r++){ t=now(); for(let i=0;i<200;i++)for(let j=0;j<200;j++){th[0]=5+7*i/199;th[1]=.1+2.9*j/199;s+=p.minus2LnL(th);} console.log("grid200", now()-t); }
const any=p as any;
for (let r=0;r<2;r++){ t=now(); for(let i=0;i<200;i++)for(let j=0;j<200;j++){th[0]=5+7*i/199;th[1]=.1+2.9*j/199;any.predict(th,any.values);} console.log("predict", now()-t); 
t=now(); for(let i=0;i<200;i++)for(let j=0;j<200;j++){any.values[0]=i/200;s+=any.table.evaluate(any.values);} console.log("evaluate", now()-t);
t=now(); for(let i=0;i<200;i++)for(let j=0;j<200;j++){th[0]=5+7*i/199;th[1]=.1+2.9*j/199;p.derived(th,out);} console.log("derived", now()-t); }
for (const set of ["all_rows_no_tau","tau_only"]) {const q=new FitProblem(new CompiledTable({ rows: rowsOfSet(file, set) }), tanhFamily(), bg) as any;for (let r=0;r<2;r++){t=now(); for(let i=0;i<200;i++)for(let j=0;j<200;j++){th[0]=5+7*i/199;th[1]=.1+2.9*j/199;q.predict(th,q.values);} console.log("predict "+set, now()-t);}}
