(** * Graphs written as graph6 or sparse6 (formats.txt of nauty)

    The vertices are 0, ..., n - 1. A reader who does not want to believe this file
    can take the edges written out instead (EdgeGraph.v). *)

From Coq Require Import Bool List ZArith Ascii String.
From Certify Require Import Statement Rules EdgeGraph.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.

(** Each character stands for six bits: its code less 63, the highest bit first. *)
Definition six_bits (c : ascii) : option (list bool) :=
  let code := Z.of_N (N_of_ascii c) - 63 in
  if (0 <=? code) &&& (code <=? 63)
  then Some (map (Z.testbit code) [5; 4; 3; 2; 1; 0])
  else None.

Fixpoint read_bits (s : string) : option (list bool) :=
  match s with
  | EmptyString => Some []
  | String c s' =>
      match six_bits c, read_bits s' with
      | Some b, Some bits => Some (b ++ bits)
      | _, _ => None
      end
  end.

Fixpoint number_of (k : nat) (bits : list bool) (value : Z) : option (Z * list bool) :=
  match k, bits with
  | O, _ => Some (value, bits)
  | S k', b :: bits' => number_of k' bits' (2 * value + Z.b2z b)
  | S _, [] => None
  end.

(** The number of vertices: six bits, or eighteen after six ones. It has the shorter form
    if it can, and a graph of more than 258,047 is not read. *)
Definition read_size (bits : list bool) : option (Z * list bool) :=
  match number_of 6 bits 0 with
  | Some (63, rest) =>
      match number_of 18 rest 0 with
      | Some (n, rest') => if (63 <=? n) &&& (n <? 63 * 2 ^ 12) then Some (n, rest') else None
      | None => None
      end
  | small => small
  end.

(** A bit for each pair u < v, in the order (0,1), (0,2), (1,2), (0,3), ...; at the end
    fewer than six more, all zero. *)
Fixpoint read_pairs (n u v : Z) (bits : list bool) : option (list (Z * Z)) :=
  match bits with
  | [] => if n <=? v then Some [] else None
  | b :: bits' =>
      if n <=? v then
        if Nat.ltb (List.length bits) 6 &&& forallb negb bits then Some [] else None
      else
        let rest := if u + 1 =? v then read_pairs n 0 (v + 1) bits'
                    else read_pairs n (u + 1) v bits' in
        if b then option_map (cons (u, v)) rest else rest
  end.

Definition read_graph6 (bits : list bool) : option (Z * list (Z * Z)) :=
  match read_size bits with
  | Some (n, rest) => option_map (pair n) (read_pairs n 0 1 rest)
  | None => None
  end.

(** sparse6 moves a mark [v] up, and notes edges below it. Each move is a bit, which says
    whether [v] goes one up, and a number [x] of [k] bits: a larger [x] is the new mark,
    a smaller one is joined to it. What is read are the edges and the bits that follow the
    last of them. [fuel]: there are no more moves than bits. *)
Fixpoint read_moves (fuel : nat) (n : Z) (k : nat) (v : Z) (bits after : list bool)
  : list (Z * Z) * list bool :=
  match fuel, bits with
  | S fuel', b :: bits' =>
      match number_of k bits' 0 with
      | Some (x, rest) =>
          let v' := v + Z.b2z b in
          if (v' <? n) &&& (x <? n) then
            if v' <? x then read_moves fuel' n k x rest after
            else let '(edges, after') := read_moves fuel' n k v' rest rest in
                 ((x, v') :: edges, after')
          else ([], after)
      | None => ([], after)
      end
  | _, _ => ([], after)
  end.

(** The bits after the last edge: at most five, all ones, but for a zero before them
    where ones alone could be a move. *)
Definition filled (n : Z) (k : nat) (after : list bool) : bool :=
  let ones := match after with
              | false :: more =>
                  if (n =? 2 ^ Z.of_nat k) &&& Nat.leb k (List.length more) then more else after
              | _ => after
              end in
  Nat.leb (List.length after) 5 &&& forallb id ones.

Definition read_sparse6 (bits : list bool) : option (Z * list (Z * Z)) :=
  match read_size bits with
  | Some (n, rest) =>
      if n <=? 1 then match rest with [] => Some (n, []) | _ => None end
      else
        let k := Z.to_nat (Z.log2 (n - 1) + 1) in
        let '(edges, after) := read_moves (List.length rest) n k 0 rest rest in
        if filled n k after &&& forallb (fun e => negb (fst e =? snd e)) edges
        then Some (n, edges) else None
  | None => None
  end.

(** A text that begins with a colon is sparse6. *)
Definition read_line (s : string) : option (Z * list (Z * Z)) :=
  match s with
  | String ":" s' => match read_bits s' with Some bits => read_sparse6 bits | None => None end
  | _ => match read_bits s with Some bits => read_graph6 bits | None => None end
  end.

Definition is_graph6 (s : string) : bool :=
  match read_line s with
  | Some _ => true
  | None => false
  end.

(** The graph of a text that is one. A text that is neither graph6 nor sparse6 has no graph,
    so a proof that it is one is asked for, and [graph6 "..."] makes it, by computing. *)
Definition graph_of (s : string) (fine : is_graph6 s = true) : query Z :=
  match read_line s with
  | Some (n, edges) => edge_graph n edges
  | None => edge_graph 0 []
  end.

Notation graph6 s := (graph_of s ltac:(vm_cast_no_check (eq_refl true))) (only parsing).
