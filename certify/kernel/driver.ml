(* Reads instances with certificates, has the extracted checks judge them, prints a line for each.

   The input is words, separated by blanks or line ends. An instance is

     path|cycle exists|impossible N [EDGES] [ENDS] [REQUIRED] [FORBIDDEN] CERTIFICATE

   about the graph with the vertices 0, ..., N - 1. Numbers are hexadecimal, with "-" before a
   negative one: so digits become Coq's numbers without any arithmetic. A list stands in
   brackets; an edge is two numbers in a row. In a certificate vertices are counted from 1, as the
   kernel counts them, and the apex of a path is the last. A certificate is one of

     witness [V ...]        absent        sweep [V ...]
     obstruction FORM       FORM: small, leaf V, crowded V A B C, ring [V ...],
                            separator [V ...], independent [V ...]
     counting [V Z ...] [[V ...] Z ...] [[V ...] [U V ...] Z ...]
     cases [NODE ...] [[V ...] ...]
                            NODE: forced, edge U V, vertex V, like J K,
                            obstruction FORM, counting as above
     clauses [FACT ...] [[LITERAL ...] [HINT ...] ...]
                            FACT: degree V, cut [V ...], required U V, mirror K [V ...];
                            LITERAL: 2x for variable x, 2x + 1 for its negation

   The output is "accepted", "rejected", or "overflow" (the stack is too small to tell).

   To be believed here: that [judge] hands on graph and answer as they stand, and that "accepted"
   is printed for [true] alone. Whatever certificate is read, if it is accepted the answer is
   right (Extract.v). *)

open Kernel

exception Malformed of string

(* Words *)

let rec word () =
  match input_char stdin with
  | ' ' | '\n' -> word ()
  | c -> let text = Buffer.create 16 in rest_of_word text c

and rest_of_word text c =
  Buffer.add_char text c;
  match input_char stdin with
  | ' ' | '\n' -> Buffer.contents text
  | c -> rest_of_word text c

(* Numbers *)

let digit c =
  match c with
  | '0' .. '9' -> Char.code c - Char.code '0'
  | 'a' .. 'f' -> Char.code c - Char.code 'a' + 10
  | _ -> raise (Malformed (String.make 1 c))

let append number bit =
  match number, bit with
  | Z0, 0 -> Z0
  | Z0, _ -> Zpos XH
  | Zpos p, 0 -> Zpos (XO p)
  | Zpos p, _ -> Zpos (XI p)
  | Zneg _, _ -> raise (Malformed "-")

let natural w =
  let number = ref Z0 in
  String.iter
    (fun c ->
      let d = digit c in
      List.iter (fun i -> number := append !number ((d lsr i) land 1)) [ 3; 2; 1; 0 ])
    w;
  !number

let integer w =
  if w.[0] <> '-' then natural w
  else
    match natural (String.sub w 1 (String.length w - 1)) with
    | Zpos p -> Zneg p
    | _ -> raise (Malformed w)

let positive w = match natural w with Zpos p -> p | _ -> raise (Malformed w)
let count w = Z.to_nat (natural w)

(* Lists and pairs; a reader takes the first word of what it reads *)

let rec items read found =
  match word () with
  | "]" -> List.rev found
  | w ->
      let item = read w in
      items read (item :: found)

let list read w = if w = "[" then items read [] else raise (Malformed w)

let pair first second w =
  let a = first w in
  let b = second (word ()) in
  (a, b)

let numbers = list positive
let edge = pair positive positive

(* Certificates *)

let obstruction w =
  match w with
  | "small" -> Small
  | "leaf" -> Leaf0 (positive (word ()))
  | "crowded" ->
      let (v, a), (b, c) = pair edge edge (word ()) in
      Crowded (v, a, b, c)
  | "ring" -> Ring (numbers (word ()))
  | "separator" -> Separator (numbers (word ()))
  | "independent" -> Independent (numbers (word ()))
  | _ -> raise (Malformed w)

let counting w =
  let weights = list (pair positive integer) w in
  let cuts = list (pair numbers integer) (word ()) in
  let parities = list (pair (pair numbers (list edge)) integer) (word ()) in
  { weights; cuts; parities }

let node w =
  match w with
  | "forced" -> Forced
  | "edge" ->
      let u, v = edge (word ()) in
      Edge (u, v)
  | "vertex" -> Vertex (positive (word ()))
  | "like" ->
      let j, k = pair count count (word ()) in
      Like (j, k)
  | "obstruction" -> ByObstruction (obstruction (word ()))
  | "counting" -> ByCounting (counting (word ()))
  | _ -> raise (Malformed w)

let fact w =
  match w with
  | "degree" -> Degree (positive (word ()))
  | "cut" -> Cut (numbers (word ()))
  | "required" ->
      let u, v = edge (word ()) in
      Required (u, v)
  | "mirror" ->
      let k, images = pair positive numbers (word ()) in
      Mirror (k, images)
  | _ -> raise (Malformed w)

let certificate w =
  match w with
  | "witness" -> ByWitness (numbers (word ()))
  | "absent" -> ByAbsence
  | "obstruction" -> ByObstruction0 (obstruction (word ()))
  | "counting" -> ByCounting0 (counting (word ()))
  | "cases" ->
      let nodes, symmetries = pair (list node) (list numbers) (word ()) in
      ByCases { nodes; symmetries }
  | "sweep" -> BySweep (numbers (word ()))
  | "clauses" ->
      let facts, steps = pair (list fact) (list (pair numbers numbers)) (word ()) in
      ByClauses { facts; steps }
  | _ -> raise (Malformed w)

(* Instances *)

let answer w =
  match w with
  | "exists" -> true
  | "impossible" -> false
  | _ -> raise (Malformed w)

let judge structure =
  let said = answer (word ()) in
  let n = natural (word ()) in
  let edges = list (pair natural natural) (word ()) in
  let ends = list integer (word ()) in
  let required = list (pair integer integer) (word ()) in
  let forbidden = list (pair integer integer) (word ()) in
  let shown = certificate (word ()) in
  match structure with
  | "path" -> shows_path n edges ends required forbidden said shown
  | "cycle" -> shows_cycle n edges required forbidden said shown
  | _ -> raise (Malformed structure)

let rec main () =
  match word () with
  | exception End_of_file -> ()
  | structure ->
      print_endline
        (match judge structure with
        | true -> "accepted"
        | false -> "rejected"
        | exception Stack_overflow -> "overflow");
      main ()

let () = main ()
