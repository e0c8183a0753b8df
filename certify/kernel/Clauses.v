(** * Kind [clauses]: facts that hold for a Hamiltonian cycle, as clauses that cannot all hold

    Each fact is looked at in the question alone. Its clauses are computed here, by the rule of
    FORMAT.md, section 6, so that clauses and variables have the numbers that the stored
    proof uses. The steps of the proof then show that the clauses contradict each other. *)

From Coq Require Import Bool List PArith Arith FMapPositive.
From Certify Require Import Statement Question Facts Sets.
From Certify Require Import Propagation Variables ExactlyTwo Mirror.
Import ListNotations.

(** [Mirror k image]: the mirror with the images of all vertices, compared at [k] places. *)
Inductive fact :=
  | Degree (v : vertex)
  | Cut (s : list vertex)
  | Required (u v : vertex)
  | Mirror (k : positive) (image : list vertex).

Record clauses := { facts : list fact; steps : list step }.

Section Clauses.

Variable Q : question.

(** [near_edges Q], which is looked up often. *)
Variable near : neighbourhoods.

(** A set that is neither empty nor everything. *)
Definition cut_fine (s : list vertex) : bool :=
  vertex_set (last_vertex Q) s && (1 <=? length s) && (length s <? order Q).

(** The edges that leave a set. *)
Definition cut_clause (s : list vertex) : clause :=
  let inside := members s in
  map (fun e => xO (fst e))
    (filter (fun e => leaves (fun v => PositiveMap.mem v inside) (snd e)) (numbered_edges Q)).

(** The clauses of a fact that is true; [None] for one that is not. A cycle has two edges at
    each vertex, leaves each set, uses what is needed; of mirrors see Mirror.v. *)
Definition fact_clauses (f : fact) (next : variable) : option formula :=
  match f with
  | Degree v => exactly_two (map snd (around near v)) next
  | Cut s => if cut_fine s then Some ([cut_clause s], next) else None
  | Required u v =>
      if is_needed Q u v then
        option_map (fun x => ([[xO x]], next)) (variable_of near u v)
      else None
  | Mirror k image => mirror_clauses Q near k image next
  end.

Fixpoint all_clauses (l : list fact) (next : variable) : option formula :=
  match l with
  | [] => Some ([], next)
  | f :: rest =>
      match fact_clauses f next with
      | Some (some, free) =>
          option_map (fun more => (some ++ fst more, snd more)) (all_clauses rest free)
      | None => None
      end
  end.

(** The order of the facts in the file. Nothing rests on it, but there is one way to write
    them down. *)
Definition comes_before (f g : fact) : bool :=
  match f, g with
  | Degree u, Degree v => (u <? v)%positive
  | Degree _, _ => true
  | Cut _, Degree _ => false
  | Cut _, _ => true
  | Required u v, Required x y => pair_ltb (u, v) (x, y)
  | Required _ _, Mirror _ _ => true
  | Mirror _ _, Mirror _ _ => true
  | _, _ => false
  end.

Fixpoint facts_sorted (l : list fact) : bool :=
  match l with
  | f :: (g :: _) as rest => comes_before f g && facts_sorted rest
  | _ => true
  end.

(** The clauses of all facts, and the first variable that they leave free. *)
Definition clauses_of (l : list fact) : option formula :=
  if facts_sorted l then all_clauses l (first_free Q) else None.

End Clauses.

Definition check_clauses (Q : question) (proof : clauses) : bool :=
  if 3 <=? order Q then
    match clauses_of Q (near_edges Q) (facts proof) with
    | Some (given, _) => check_proof given (steps proof)
    | None => false
    end
  else false.
